package reports

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"

	"slantwise/reports/viewing"
)

// The file of the first pass of goldenReport.
const firstPage = "passes/wagtail-1-skerry-point-20260310t104231z.html"

// onDisk writes a report for the browser and returns the address of its folder. The
// chart script must have been brought: a page must be drawn without any network.
func onDisk(t *testing.T, r *Report, o Options) string {
	t.Helper()
	needScript(t)
	return toDisk(t, r, o, chartScript())
}

// needScript skips a test that draws charts where their script was not brought, but
// not on the machine that decides about a change.
func needScript(t *testing.T) {
	t.Helper()
	if chartScript().code == "" {
		if os.Getenv("CI") == "true" {
			t.Fatal("the chart script was not brought; run go generate ./... first")
		}
		t.Skip("the chart script was not brought; run go generate ./...")
	}
}

func toDisk(t *testing.T, r *Report, o Options, chart script) string {
	t.Helper()
	dir := t.TempDir()
	for name, content := range rendered(t, r, o, chart) {
		path := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, content, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return "file://" + filepath.ToSlash(dir) + "/"
}

// emptyDrawings counts the charts of a page with no line or symbol in them.
const emptyDrawings = `[...document.querySelectorAll('.drawing')].filter(d => d.querySelectorAll('svg path').length < 3).length`

func TestPagesDrawAtAnyWidth(t *testing.T) {
	ctx := browser(t)
	o := observe(t, ctx)
	root := onDisk(t, goldenReport(), Options{})
	pages := map[string]int{
		"index.html": 1, firstPage: 9, "passes/wagtail-1-high-plateau-20260310t121731z.html": 2,
	}
	for _, s := range []screen{{375, "light"}, {768, "dark"}, {1440, "light"}} {
		for name, charts := range pages {
			show(t, ctx, root+name, s)
			if got := ask[int](t, ctx, `document.querySelectorAll('.drawing svg').length`); got != charts {
				t.Errorf("%s at %d px: %d charts, want %d", name, s.width, got, charts)
			}
			if got := ask[int](t, ctx, emptyDrawings); got != 0 {
				t.Errorf("%s at %d px: %d charts are empty", name, s.width, got)
			}
			if got := ask[int64](t, ctx, `document.documentElement.scrollWidth`); got > s.width {
				t.Errorf("%s at %d px: the page is %d px wide", name, s.width, got)
			}
			if ask[bool](t, ctx, `document.getElementById('missing').checkVisibility()`) {
				t.Errorf("%s at %d px: it says that the drawings are missing", name, s.width)
			}
		}
	}
	o.Quiet(t, "file://")
}

func TestCursorGoesThroughAllCharts(t *testing.T) {
	ctx := browser(t)
	show(t, ctx, onDisk(t, goldenReport(), Options{})+firstPage, screen{1440, "light"})
	const hairs = `[...document.querySelectorAll('.hair')].map(h => Math.round(parseFloat(h.style.left)))`
	before := ask[[]int](t, ctx, hairs)
	words := ask[string](t, ctx, `document.getElementById('cursor-reading').textContent`)
	for _, want := range []string{"10:43:16 UTC, 10:43:16 WET", "dBm", "margin", "Mbit/s", "km", "kHz", "azimuth", "MB", "margin, clear sky", "path", "noise"} {
		if !strings.Contains(words, want) {
			t.Errorf("the reading at the culmination lacks %q: %s", want, words)
		}
	}
	if err := chromedp.Do(ctx, chromedp.Focus(chromedp.ID("cursor-slider")), chromedp.KeyEvent(kb.Home)); err != nil {
		t.Fatal(err)
	}
	if got := ask[string](t, ctx, `document.activeElement.id`); got != "cursor-slider" {
		t.Fatalf("the focus is on %q", got)
	}
	after := ask[[]int](t, ctx, hairs)
	for i := range before {
		if before[i] == after[i] {
			t.Errorf("the cursor of chart %d stayed at %d px", i, after[i])
		}
	}
	if got := ask[string](t, ctx, `document.getElementById('cursor-slider').getAttribute('aria-valuetext')`); !strings.HasPrefix(got, "10:42:31 UTC") {
		t.Errorf("the slider reads %q at AOS", got)
	}
}

func TestIndexSortsAndFilters(t *testing.T) {
	ctx := browser(t)
	o := observe(t, ctx)
	show(t, ctx, onDisk(t, fixtureReport(24), Options{})+"index.html", screen{1440, "light"})
	const firstCell = `document.querySelector('#pass-table tbody tr').cells[%d].textContent`
	press := func(column string) {
		ask[bool](t, ctx, `(() => { document.querySelectorAll('#pass-table thead button')[`+column+`].click(); return true })()`)
	}
	press("4") // highest, rising then falling
	low := ask[float64](t, ctx, strings.Replace("Number("+firstCell+")", "%d", "4", 1))
	press("4")
	high := ask[float64](t, ctx, strings.Replace("Number("+firstCell+")", "%d", "4", 1))
	if !(low < high) {
		t.Errorf("sorted by height the first row has %v, the other way round %v", low, high)
	}
	press("6") // least margin: what does not exist comes last
	if got := ask[string](t, ctx, strings.Replace(firstCell, "%d", "6", 1)); got == "–" {
		t.Error("a pass without a margin is sorted first")
	}
	set := func(id, value string) {
		ask[bool](t, ctx, `(() => { const e = document.getElementById('`+id+`'); e.value = '`+value+`'; e.dispatchEvent(new Event('input', {bubbles: true})); return true })()`)
	}
	set("filter-spacecraft", "Wagtail 2")
	if got := ask[int](t, ctx, `[...document.querySelectorAll('#pass-table tbody tr')].filter(r => r.checkVisibility()).length`); got != 8 {
		t.Errorf("%d rows of Wagtail 2 are shown, want 8 of 24", got)
	}
	if got := ask[string](t, ctx, `document.getElementById('shown').textContent`); got != "8 of 24 rows" {
		t.Errorf("the index says %q", got)
	}
	set("filter-spacecraft", "")
	set("sort-by", "8")
	most := ask[float64](t, ctx, `Math.max(...[...document.querySelectorAll('#pass-table tbody tr')].map(r => Number(r.cells[8].dataset.v)))`)
	if got := ask[float64](t, ctx, `Number(document.querySelector('#pass-table tbody tr').cells[8].dataset.v)`); got != most {
		t.Errorf("sorted by volume the first row has %v bytes, the most are %v", got, most)
	}
	o.Quiet(t, "file://")
}

func TestOneFileStandsAlone(t *testing.T) {
	ctx := browser(t)
	o := observe(t, ctx)
	root := onDisk(t, goldenReport(), Options{OneFile: true})
	content, err := os.ReadFile(strings.TrimPrefix(root, "file://") + firstPage)
	if err != nil {
		t.Fatal(err)
	}
	alone := filepath.Join(t.TempDir(), "mailed.html")
	if err := os.WriteFile(alone, content, 0o600); err != nil {
		t.Fatal(err)
	}
	show(t, ctx, "file://"+alone, screen{1440, "dark"})
	if got := ask[int](t, ctx, emptyDrawings); got != 0 {
		t.Errorf("%d charts are empty", got)
	}
	o.Quiet(t, "file://")
}

func TestNamesShowAsTextInTheBrowser(t *testing.T) {
	ctx := browser(t)
	o := observe(t, ctx)
	r := nastyReport()
	root := onDisk(t, r, Options{})
	show(t, ctx, root+"index.html", screen{1440, "light"})
	if got := ask[string](t, ctx, `document.querySelector('#pass-table tbody tr').cells[1].textContent`); got != nasty[0] {
		t.Errorf("the index shows %q, want %q", got, nasty[0])
	}
	show(t, ctx, root+"passes/"+pageNames(r.Keys)[0]+".html", screen{1440, "light"})
	if got := ask[string](t, ctx, `document.querySelector('h1').textContent`); got != nasty[0]+" over "+nasty[1] {
		t.Errorf("the page's heading is %q", got)
	}
	if got := ask[int](t, ctx, emptyDrawings); got != 0 {
		t.Errorf("%d charts are empty", got)
	}
	for _, name := range []string{"index", "passes/" + pageNames(r.Keys)[len(nasty)-1]} {
		show(t, ctx, root+name+".html", screen{375, "light"})
		if got := ask[int](t, ctx, `document.documentElement.scrollWidth`); got > 375 {
			t.Errorf("%s: the page is %d px wide on a screen of 375", name, got)
		}
	}
	o.Quiet(t, "file://")
}

// Where the public script cannot be had, the page says so and opens its tables.
func TestPageSaysWhatIsMissing(t *testing.T) {
	ctx := browser(t)
	show(t, ctx, toDisk(t, goldenReport(), Options{}, script{})+firstPage, screen{1440, "light"})
	if !ask[bool](t, ctx, `document.getElementById('missing').checkVisibility()`) {
		t.Error("nothing says that the drawings are missing")
	}
	if got := ask[int](t, ctx, `document.querySelectorAll('.figure details[open] table').length`); got != 9 {
		t.Errorf("%d tables are open, want 9", got)
	}
}

func TestPrintsOnA4(t *testing.T) {
	ctx := browser(t)
	root := onDisk(t, goldenReport(), Options{})
	for name, want := range map[string]int{"index.html": 2, firstPage: 6} {
		show(t, ctx, root+name, screen{1440, "dark"})
		pdf, got := viewing.Print(t, ctx)
		if got != want {
			t.Errorf("%s prints on %d pages, want %d", name, got, want)
		}
		if !bytes.Contains(pdf, []byte("/MediaBox [0 0 594.95996 841.91998]")) && !bytes.Contains(pdf, []byte("/MediaBox [0 0 595")) && !bytes.Contains(pdf, []byte("/MediaBox [0 0 594")) {
			t.Errorf("%s does not print on A4", name)
		}
	}
}

// An index over a thousand passes shows them all. How long it takes is told and not
// judged: a busy machine would fail it.
func TestLargeIndexShowsAll(t *testing.T) {
	needScript(t)
	ctx := browser(t)
	rows := make([]row, 1000)
	r := fixtureReport(1)
	p, err := r.Load(context.Background(), 0)
	if err != nil {
		t.Fatal(err)
	}
	for i := range rows {
		rows[i] = newRow("page", p)
		rows[i].aos = rows[i].aos.Add(time.Duration(i) * 4 * time.Minute)
		rows[i].culmination = rows[i].culmination.Add(time.Duration(i) * 4 * time.Minute)
	}
	w := newWriter(r, Options{OneFile: true}, chartScript(), nil)
	index, err := indexPage(w, newIndexView(w, rows), rows)
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "index.html")
	if err := os.WriteFile(path, index, 0o600); err != nil {
		t.Fatal(err)
	}
	cost := viewing.ShowFirst(t, ctx, "file://"+path, viewing.Screen{Width: 1440, Scheme: "light"})
	if got := ask[int](t, ctx, `[...document.querySelectorAll('#pass-table tbody tr')].filter(r => r.checkVisibility()).length`); got != len(rows) {
		t.Errorf("%d rows are shown, want %d", got, len(rows))
	}
	const symbols = `echarts.getInstanceByDom(document.getElementById('overview')).getOption().series.reduce((n, s) => n + s.data.length, 0)`
	if got := ask[int](t, ctx, symbols); got != len(rows) {
		t.Errorf("the chart has %d symbols, want %d", got, len(rows))
	}
	const painted = `(() => { const c = document.querySelector('.drawing canvas'); return c.getContext('2d').getImageData(0, 0, c.width, c.height).data.some(v => v > 0) })()`
	if !ask[bool](t, ctx, painted) {
		t.Error("the chart is empty")
	}
	dom := ask[float64](t, ctx, `performance.getEntriesByType('navigation')[0].domContentLoadedEventEnd`)
	t.Logf("1000 passes: loaded and drawn with %v of work; after %v, its content after %.0f ms", cost.Work, cost.Clock, dom)
}
