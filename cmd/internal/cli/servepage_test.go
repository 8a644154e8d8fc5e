package cli

import (
	"context"
	"fmt"
	"math"
	"net/http"
	"net/url"
	"os"
	"strings"
	"testing"
	"time"

	"slantwise/cmd/internal/web"
	"slantwise/reports/viewing"
)

// until waits for what an expression of the page says.
func until(t *testing.T, ctx context.Context, expression string) {
	t.Helper()
	for range 200 {
		if viewing.Ask[bool](t, ctx, expression) {
			return
		}
		time.Sleep(50 * time.Millisecond)
	}
	t.Fatalf("not within 10 s: %s; the page says %q", expression, viewing.Ask[string](t, ctx, "document.body.innerText"))
}

// TestLivePage opens a link with a question in Chromium: the page has the answer that the
// JSON has, is read by screen and keyboard at each width, light and dark, has a scenario
// written, and shows faults of the files.
func TestLivePage(t *testing.T) {
	if testing.Short() {
		t.Skip("short: without a browser")
	}
	path := viewing.Path(t)
	t.Chdir(t.TempDir())
	unpackDemo(t)
	if err := os.Rename("what-if.yaml", "slantwise.yaml"); err != nil {
		t.Fatal(err)
	}
	at := serve(t, "--clock", "2026-09-15T00:55:00Z")
	var s web.State
	ask(t, at+"api/state", nil, &s)
	dish, power := 5.5, 3.0
	var under string
	for _, c := range s.Next {
		if c.Spacecraft == "Wagtail 1" && c.Station == "Skerry Point" {
			under = c.ID
			break
		}
	}
	q := web.Question{Contact: under, DishM: &dish, PowerW: &power, Mode: "middle"}
	var want web.Answer
	if code := ask(t, at+"api/what-if", q, &want); code != http.StatusOK {
		t.Fatalf("status %d", code)
	}

	browser, err := viewing.Start(path)
	if err != nil {
		t.Fatal("starting chromium:", err)
	}
	t.Cleanup(browser.Close)
	ctx := browser.Tab(t, 2*time.Minute)
	seen := viewing.Observe(t, ctx)
	link := at + "#" + url.Values{"contact": {q.Contact}, "dish_m": {"5.5"}, "power_w": {"3"}, "mode": {"middle"}}.Encode()
	viewing.Show(t, ctx, link, viewing.Screen{Width: 1440, Scheme: "light"})
	until(t, ctx, `document.querySelectorAll("#outcomes tr").length === 2 && document.querySelectorAll("#map-moving text").length > 3`)
	got := viewing.Ask[[]string](t, ctx, `[...document.querySelectorAll("#outcomes tr:last-child td")].map(e => e.textContent)`)
	if len(got) != 5 || got[0] != "middle" || got[4] != fmt.Sprintf("%.3g MB", float64(want.After.Bytes)/1e6) || got[2] != fmt.Sprintf("%.1f", float64(want.After.LeastMarginDB)) {
		t.Errorf("the page answers %q, the JSON %+v", got, want.After)
	}

	for _, words := range []string{"Wagtail 1 over Skerry Point, X-band: azimuth", "ends in 0:0", "Next: "} {
		if line := viewing.Ask[string](t, ctx, `document.getElementById("headline").textContent`); !strings.Contains(line, words) {
			t.Errorf("the first line says %q, not %q", line, words)
		}
	}
	measures := []string{viewing.Contrast, viewing.Overflow, viewing.Outline, viewing.Names, viewing.Drawn}
	for _, screen := range []viewing.Screen{{Width: 1440, Scheme: "light"}, {Width: 768, Scheme: "dark"}, {Width: 375, Scheme: "light"}} {
		viewing.Set(t, ctx, screen)
		for _, what := range measures {
			for _, f := range viewing.Faults(t, ctx, what) {
				t.Errorf("%d px, %s: %s: %s", screen.Width, screen.Scheme, what, f)
			}
		}
	}
	for _, f := range viewing.Walk(t, ctx) {
		t.Errorf("keyboard: %s", f)
	}

	viewing.Ask[bool](t, ctx, `(document.getElementById("save-name").value = "from page.yaml", document.querySelector("#save button").click(), true)`)
	until(t, ctx, `document.getElementById("kept").textContent.startsWith("Written as from page.yaml")`)
	if code, _, errOut := invoke(t, "check", "--scenario", "from page.yaml"); code != ExitAnswer {
		t.Errorf("check: %s", errOut)
	}
	good, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile("slantwise.yaml", []byte("wrong_key: <b>1</b>\n"+string(good)), 0o600); err != nil {
		t.Fatal(err)
	}
	until(t, ctx, `document.getElementById("fault").checkVisibility() && document.getElementById("fault").textContent.includes("wrong_key") && document.querySelectorAll("#map-moving text").length > 3`)
	for _, f := range viewing.Faults(t, ctx, viewing.Contrast) {
		t.Errorf("with faults: %s", f)
	}
	// Mended, and with another key left out: the foot tells of it without a new page.
	if err := os.WriteFile("slantwise.yaml", []byte(strings.Replace(string(good), "horizon: geometric", "#", 1)), 0o600); err != nil {
		t.Fatal(err)
	}
	until(t, ctx, `!document.getElementById("fault").checkVisibility() && document.getElementById("foot").textContent.includes("horizon left out")`)
	if moved := viewing.Ask[float64](t, ctx, `Date.parse(state.now_utc)`); math.Abs(moved-float64(s.WindowFrom.Add(55*time.Minute).UnixMilli())) > 60_000 {
		t.Errorf("the page's clock stands at %.0f", moved)
	}
	seen.Quiet(t, strings.TrimSuffix(at, "/"))
}
