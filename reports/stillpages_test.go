package reports

import (
	"os"
	"path/filepath"
	"testing"
)

// The summary and the comparison have no script: their charts are there at any width, no
// page is wider than its screen, and each chart can be reached by keyboard.
func TestStillPagesAtAnyWidth(t *testing.T) {
	ctx := browser(t)
	o := observe(t, ctx)
	root := toDisk(t, fixtureReport(12), Options{}, stubScript)
	page, err := ComparisonPage(comparisonFixture())
	if err != nil {
		t.Fatal(err)
	}
	compared := filepath.Join(t.TempDir(), "compare.html")
	if err := os.WriteFile(compared, page, 0o600); err != nil {
		t.Fatal(err)
	}
	for _, s := range []screen{{375, "light"}, {768, "dark"}, {1440, "light"}} {
		for _, url := range []string{root + weekFile, "file://" + filepath.ToSlash(compared)} {
			show(t, ctx, url, s)
			if got := ask[int](t, ctx, `document.querySelectorAll('.drawing > svg').length`); got != 4 {
				t.Errorf("%s at %d px: %d charts, want 4", url, s.width, got)
			}
			if got := ask[int64](t, ctx, `document.documentElement.scrollWidth`); got > s.width {
				t.Errorf("%s at %d px: the page is %d px wide", url, s.width, got)
			}
			if got := ask[int](t, ctx, `document.querySelectorAll('.drawing:not([tabindex="0"]), table:not(:has(caption))').length`); got != 0 {
				t.Errorf("%s at %d px: %d charts without a place in the keyboard's order or tables without a name", url, s.width, got)
			}
		}
	}
	o.Quiet(t, "file://")
}
