package cli

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"slantwise/reports/viewing"
)

// looked is a page that the program writes or serves, and what is expected of it.
type looked struct {
	name   string
	page   func(t *testing.T, folder string) string // makes it and returns its address
	charts int                                      // at least so many
	sheets [2]int                                   // A4 sheets in print, from and to: fonts differ between machines
	quick  bool                                     // looked at in a short test, too
	wait   string                                   // an expression that becomes true when it is drawn; empty: when it has loaded
}

// The window is short, so that making the pages takes less time than looking at them.
var lookedPages = []looked{
	{name: "index", page: written("report", "--into", "out"), charts: 1, sheets: [2]int{2, 5}},
	{name: "summary", page: beside(filepath.Join("out", "week.html"), "report", "--static", "--into", "out"), charts: 1, sheets: [2]int{1, 8}, quick: true},
	{name: "pass", page: passOf("report", "--into", "out", "--station", "Skerry Point", "--spacecraft", "Wagtail 1"), charts: 12, sheets: [2]int{5, 9}},
	{name: "pass without radio", page: passOf("report", "--into", "out", "--station", "Acacia Ridge", "--spacecraft", "Wagtail 1"), charts: 3, sheets: [2]int{2, 5}},
	{name: "index without script", page: written("report", "--static", "--into", "out", "--spacecraft", "Wagtail 1"), charts: 1, sheets: [2]int{2, 4}, quick: true},
	{name: "pass without script", page: passOf("report", "--static", "--into", "out", "--station", "Skerry Point", "--spacecraft", "Wagtail 1"), charts: 12, sheets: [2]int{5, 9}},
	{name: "plan", page: beside("plan.html", "contacts", "--iterations", "3", "--page", "plan.html"), charts: 7, sheets: [2]int{2, 6}, quick: true},
	{name: "path", page: beside("path.html", "path", "--station", "Tussock Bay", "--frequency-mhz", "26250", "--sweep", "elevation", "--points", "20", "--into", "path.html"), charts: 2, sheets: [2]int{1, 3}},
	{name: "comparison", page: launchDays, charts: 1, sheets: [2]int{1, 4}, quick: true},
	{name: "shift", page: beside("shift.html", "shift", "--station", "Skerry Point", "--from", "2026-09-15T00:00:00Z", "--into", "shift.html"), sheets: [2]int{1, 1}, quick: true},
	{name: "dish", page: written("dish", "--days", "7", "--report", "out"), charts: 4, sheets: [2]int{4, 9}},
	{name: "live", page: func(t *testing.T, _ string) string {
		return serve(t, "--clock", "2026-09-15T00:55:00Z", "--speed", "0")
	}, charts: 4, sheets: [2]int{2, 5}, quick: true, wait: `!document.getElementById('chosen').hidden && document.querySelectorAll('#margin path, #map circle').length > 2`},
}

// written runs a command that makes a folder out with an index, in a window of half a day.
func written(args ...string) func(*testing.T, string) string {
	return beside(filepath.Join("out", "index.html"), args...)
}

// beside runs a command in folder and returns the address of the file that it leaves.
func beside(file string, args ...string) func(*testing.T, string) string {
	return func(t *testing.T, folder string) string {
		t.Helper()
		args := append([]string(nil), args...)
		for i, a := range args {
			if a == "out" || filepath.Ext(a) == ".html" {
				args[i] = filepath.Join(folder, a)
			}
		}
		if args[0] != "dish" { // that is flown for days
			args = append(args, "--window-length-h", "12")
		}
		if code, _, errOut := invoke(t, args...); code != ExitAnswer {
			t.Fatalf("code %d: %s", code, errOut)
		}
		return "file://" + filepath.ToSlash(filepath.Join(folder, file))
	}
}

// launchDays compares a launch day as planned with the one after a late launch.
func launchDays(t *testing.T, folder string) string {
	t.Helper()
	day := filepath.Join(folder, "day")
	if code, _, errOut := invoke(t, "new", "--launch-day", day); code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	return beside("compared.html", "compare", filepath.Join(day, "nominal.yaml"), filepath.Join(day, "slipped.yaml"), "--page", "compared.html")(t, folder)
}

// passOf is written, for the first of the passes.
func passOf(args ...string) func(*testing.T, string) string {
	return func(t *testing.T, folder string) string {
		t.Helper()
		written(args...)(t, folder)
		pages, err := filepath.Glob(filepath.Join(folder, "out", "passes", "*.html"))
		if err != nil || len(pages) == 0 {
			t.Fatalf("no page of a pass: %v", err)
		}
		return "file://" + filepath.ToSlash(pages[0])
	}
}

// TestPagesInTheBrowser looks at every page as a reader does: on a phone, a tablet in the
// dark and a wide screen, by keyboard alone, and on paper.
func TestPagesInTheBrowser(t *testing.T) {
	path := viewing.Path(t)
	b, err := viewing.Start(path)
	if err != nil {
		t.Fatal("starting chromium:", err)
	}
	t.Cleanup(b.Close)
	for _, p := range lookedPages {
		t.Run(p.name, func(t *testing.T) { p.look(t, b) })
	}
}

func (p *looked) look(t *testing.T, b *viewing.Browser) {
	if testing.Short() && !p.quick {
		t.Skip("short: only pages that are soon made and drawn")
	}
	address := p.page(t, t.TempDir())
	ctx := b.Tab(t, 2*time.Minute)
	seen := viewing.Observe(t, ctx)
	s := viewing.Screen{Width: 375, Scheme: "light"}
	p.cost(t, b, address, viewing.ShowFirst(t, ctx, address, s), seen.Bytes())
	p.await(t, ctx)
	p.judge(t, ctx, s, viewing.Drawn, viewing.Overflow)
	viewing.Fold(t, ctx, true)
	p.judge(t, ctx, s, viewing.Overflow, viewing.Contrast)
	if !testing.Short() {
		s = viewing.Screen{Width: 768, Scheme: "dark"}
		viewing.Set(t, ctx, s)
		p.judge(t, ctx, s, viewing.Drawn, viewing.Overflow, viewing.Contrast)
		s = viewing.Screen{Width: 1440, Scheme: "light"}
		viewing.Set(t, ctx, s)
		p.judge(t, ctx, s, viewing.Drawn, viewing.Overflow, viewing.Outline)
		viewing.Fold(t, ctx, false)
		for _, f := range viewing.Walk(t, ctx) {
			t.Errorf("by keyboard: %s", f)
		}
		if _, sheets := viewing.Print(t, ctx); sheets < p.sheets[0] || sheets > p.sheets[1] {
			t.Errorf("it prints on %d sheets, want %d to %d", sheets, p.sheets[0], p.sheets[1])
		}
		p.judge(t, ctx, s, viewing.Names) // last: from here on the browser keeps a tree of names
	}
	seen.Quiet(t, address[:strings.LastIndex(address, "/")+1], "file://"+os.TempDir())
}

// cost holds a page to 1.5 MB in all and a second of its own thread's work, the least of
// three tries: a busy machine makes that longer too. The time on the clock is told.
func (p *looked) cost(t *testing.T, b *viewing.Browser, address string, c viewing.Cost, bytes int) {
	t.Helper()
	for range 2 {
		if c.Work <= time.Second {
			break
		}
		if again := viewing.ShowFirst(t, b.Tab(t, time.Minute), address, viewing.Screen{Width: 1440, Scheme: "light"}); again.Work < c.Work {
			c = again
		}
	}
	t.Logf("%d bytes; loaded and drawn with %d ms of work, in %d ms", bytes, c.Work.Milliseconds(), c.Clock.Milliseconds())
	if bytes < 1000 || bytes > 1500e3 {
		t.Errorf("the page weighs %d bytes, want up to 1.5 MB", bytes)
	}
	if c.Work <= 0 || c.Work > time.Second {
		t.Errorf("its own thread worked for %v, want up to 1 s", c.Work)
	}
}

// judge counts the charts, and tells every fault of what is measured.
func (p *looked) judge(t *testing.T, ctx context.Context, s viewing.Screen, what ...string) {
	t.Helper()
	if got := viewing.Charts(t, ctx); got < p.charts {
		t.Errorf("%d px: %d charts, want %d at least", s.Width, got, p.charts)
	}
	for _, w := range what {
		for _, f := range viewing.Faults(t, ctx, w) {
			t.Errorf("%d px, %s, %s: %s", s.Width, s.Scheme, w, f)
		}
	}
}

// await waits until a page that draws later has drawn.
func (p *looked) await(t *testing.T, ctx context.Context) {
	t.Helper()
	if p.wait == "" {
		return
	}
	for range 200 {
		if viewing.Ask[bool](t, ctx, p.wait) {
			return
		}
		time.Sleep(50 * time.Millisecond)
	}
	t.Fatal("not drawn within 10 s")
}
