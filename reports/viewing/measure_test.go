package viewing

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// sound is a page without a fault; each row of faultsAreFound spoils it once.
const sound = `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>Sound</title><style>
body { margin: 0 8px; color: #222; background: #fff } a:focus-visible, summary:focus-visible { outline: 3px solid #b65a00 } svg { display: block; width: 300px }
</style></head><body><a href="#main">To the content</a><main id="main"><h1>A page</h1><p id="words">Words with enough contrast.</p>
<section><h2>A chart</h2><svg role="img" aria-label="Elevation over time" viewBox="0 0 300 100">
<rect width="300" height="100" fill="#eee"/><path d="M0 50H300" stroke="#000"/><path d="M0 70L300 10" stroke="#000"/><text x="50" y="40" fill="#222">high</text></svg>
<details><summary>Numbers</summary><table><caption>Elevation</caption><tr><th scope="col">deg</th></tr><tr><td>5</td></tr></table></details></section>
<p><a id="last" href="numbers.csv">CSV</a></p></main></body></html>`

func TestInTheBrowser(t *testing.T) {
	if testing.Short() {
		t.Skip("short: without a browser")
	}
	b, err := Start(Path(t))
	if err != nil {
		t.Fatal("starting chromium:", err)
	}
	t.Cleanup(b.Close)
	t.Run("faults are found", func(t *testing.T) { faultsAreFound(t, b) })
	t.Run("words and requests are heard", func(t *testing.T) { wordsAreHeard(t, b) })
}

// faultsAreFound spoils a sound page in one way after another: what is measured must
// find each, and nothing in the sound page.
func faultsAreFound(t *testing.T, b *Browser) {
	ctx := b.Tab(t, time.Minute)
	file := filepath.Join(t.TempDir(), "page.html")
	found := func(what, page string) []string {
		t.Helper()
		if err := os.WriteFile(file, []byte(page), 0o600); err != nil {
			t.Fatal(err)
		}
		Show(t, ctx, "file://"+file, Screen{Width: 375, Scheme: "light"})
		if what == "walk" {
			return Walk(t, ctx)
		}
		return Faults(t, ctx, what)
	}
	for _, what := range []string{Contrast, Overflow, Outline, Names, Drawn, "walk"} {
		if got := found(what, sound); len(got) > 0 {
			t.Errorf("%s of the sound page: %q", what, got)
		}
	}
	for _, row := range []struct{ what, old, new, want string }{
		{Contrast, `<p id="words">`, `<p id="words" style="color:#777">`, "contrast 4.48"},
		{Contrast, `<p id="words">`, `<p id="words" style="opacity:.4">`, "#words"},
		{Contrast, `<text x="50"`, `<rect width="300" height="100" fill="#333"/><text x="50"`, "<text> \"high\""},
		{Overflow, `<p id="words">`, `<p id="words" style="white-space:nowrap;font-size:60px">`, "#words"},
		{Overflow, `<svg role`, `<svg style="width:500px" role`, "px wide on 375 px: <svg>"},
		{Outline, `<h2>A chart</h2>`, `<h3>A chart</h3>`, "follows a heading of level 1"},
		{Outline, `<h1>A page</h1>`, `<p>A page</p>`, "0 headings of level 1"},
		{Outline, ` lang="en"`, ``, "no language"},
		{Outline, `<title>Sound</title>`, ``, "no title"},
		{Outline, `<section>`, `<section id="main">`, "the id main stands twice"},
		{Outline, `<section>`, `<section aria-labelledby="nobody">`, "names nobody"},
		{Names, ` aria-label="Elevation over time"`, ``, "the chart has no name"},
		{Names, `role="img" `, `role="button" `, "the chart's role is button"},
		{Names, `>CSV</a>`, `></a>`, "has no name"},
		{Names, `<caption>Elevation</caption>`, ``, ""},
		{Names, `numbers.csv`, `numbers`, ""},
		{Drawn, `<path d="M0 50H300" stroke="#000"/><path d="M0 70L300 10" stroke="#000"/>`, ``, "1 marks"},
		{"walk", `outline: 3px solid #b65a00`, `outline: none`, "its focus cannot be seen"},
		{"walk", `<a id="last"`, `<a id="last" tabindex="2"`, "the way begins at"},
		{"walk", `<a id="last"`, `<a id="last" tabindex="-1"`, "was not reached"},
		{"walk", `<p><a id="last"`, `<p style="position:absolute;top:0;left:0"><a id="last"`, "stands above"},
		{"walk", `</main>`, `</main><div style="position:fixed;inset:0"></div>`, "something covers it"},
		{"walk", `<a id="last"`, `<a onkeydown="event.preventDefault()" href="#main">trap</a> <a id="last"`, "was not reached"},
	} {
		page := strings.Replace(sound, row.old, row.new, 1)
		if page == sound {
			t.Fatalf("%q is not in the page", row.old)
		}
		got := strings.Join(found(row.what, page), "; ")
		if row.want == "" && got != "" || row.want != "" && !strings.Contains(got, row.want) {
			t.Errorf("%s with %s: found %q, want %q", row.what, row.new, got, row.want)
		}
	}
}

// wordsAreHeard hears what a page says, what it asks for, and how much came.
func wordsAreHeard(t *testing.T, b *Browser) {
	ctx := b.Tab(t, time.Minute)
	file := filepath.Join(t.TempDir(), "page.html")
	page := strings.Replace(sound, `</main>`, `</main><script>console.log("a word"); fetch("https://example.net/x").catch(() => {})</script>`, 1)
	if err := os.WriteFile(file, []byte(page), 0o600); err != nil {
		t.Fatal(err)
	}
	seen := Observe(t, ctx)
	cost := ShowFirst(t, ctx, "file://"+file, Screen{Width: 1440, Scheme: "dark"})
	time.Sleep(200 * time.Millisecond) // until the refusal is heard
	if said := strings.Join(seen.Said(), "; "); !strings.Contains(said, "a word") || !strings.Contains(said, "ERR_NAME_NOT_RESOLVED") {
		t.Errorf("it said %q, without its word or without the refusal of an address outside", said)
	}
	if asked := strings.Join(seen.asked, " "); !strings.Contains(asked, "https://example.net/x") {
		t.Errorf("it asked for %q", asked)
	}
	if got := seen.Bytes(); got != len(page) {
		t.Errorf("%d bytes came, the page has %d", got, len(page))
	}
	if cost.Work <= 0 || cost.Clock <= 0 {
		t.Errorf("it took %+v", cost)
	}
	if _, sheets := Print(t, ctx); sheets != 1 {
		t.Errorf("it prints on %d sheets", sheets)
	}
}
