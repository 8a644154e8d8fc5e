package cli

import (
	"context"
	"html"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario"
)

// TestEveryPageSaysWhatItStandsOn writes the pages of every command that writes some: each
// names scenario and program, the element set with epoch and age where something is flown,
// a Recommendation with its edition where there is a path, the defaults taken, and a
// caution.
func TestEveryPageSaysWhatItStandsOn(t *testing.T) {
	sized := dishScenario(t, dishBlock+"    bytes_per_day: 1e9\n")
	t.Chdir(t.TempDir())
	for _, side := range []string{"before.yaml", "after.yaml"} {
		if code, _, errOut := invoke(t, "new", side); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	for _, c := range []struct {
		into     string
		args     []string
		scenario string
		flown    bool
	}{
		{"report", []string{"report", "--scenario", "before.yaml", "--into", "report"}, "before.yaml", true},
		{"plain", []string{"report", "--static", "--one-file", "--scenario", "before.yaml", "--into", "plain"}, "before.yaml", true},
		{"compare.html", []string{"compare", "before.yaml", "after.yaml", "--page", "compare.html"}, "before.yaml before, after.yaml after", true},
		{"plan.html", []string{"contacts", "--scenario", "before.yaml", "--iterations", "1", "--page", "plan.html"}, "before.yaml", true},
		{"shift.html", []string{"shift", "--scenario", "before.yaml", "--into", "shift.html"}, "before.yaml", true},
		{"path.html", []string{"path", "--station", "Skerry Point", "--frequency-mhz", "8180", "--sweep", "elevation", "--into", "path.html"}, "embedded demo", false},
		{"dish", []string{"dish", "--scenario", sized, "--report", "dish"}, "s.yaml", true},
	} {
		if code, _, errOut := invoke(t, c.args...); code != ExitAnswer {
			t.Fatalf("%s: %s", strings.Join(c.args, " "), errOut)
		}
		pages := 0
		err := filepath.WalkDir(c.into, func(path string, _ fs.DirEntry, err error) error {
			if err != nil || filepath.Ext(path) != ".html" {
				return err
			}
			pages++
			text, err := os.ReadFile(path)
			standsOn(t, path, string(text), c.scenario, c.flown)
			return err
		})
		if err != nil || pages == 0 {
			t.Errorf("%s: %d pages, %v", c.into, pages, err)
		}
	}
}

// standsOn looks for what a page must say of itself.
func standsOn(t *testing.T, name, page, scenario string, flown bool) {
	t.Helper()
	_, foot, ok := strings.Cut(page, `<section class="basis"`)
	foot, _, end := strings.Cut(html.UnescapeString(foot), "</section>")
	if !ok || !end {
		t.Errorf("%s does not say what it stands on", name)
		return
	}
	wanted := []string{"<dd>" + scenario + ", slantwise ", "Rec. ITU-R P.676-13", "Defaults taken", "<dt>Caution</dt><dd>"}
	if flown {
		wanted = append(wanted, "element set 99001 of ", ", epoch 2026-09-14 12:00:00 UTC, ", " old", "AIAA 2006-6753")
	}
	for _, want := range wanted {
		if !strings.Contains(foot, want) {
			t.Errorf("%s: no %q in %s", name, want, foot)
		}
	}
}

// The live page says the same.
func TestLivePageSaysWhatItStandsOn(t *testing.T) {
	s, err := scenario.Load(scenario.Request{Need: needOrbits})
	if err != nil {
		t.Fatal(err)
	}
	m, err := newLiveModel(context.Background(), scenario.Request{Need: needOrbits}, s)
	if err != nil {
		t.Fatal(err)
	}
	standsOn(t, "live", string(m.Foot()), "embedded demo", true)
}

// A page about one station does not list the defaults of the others.
func TestDefaultsOfOthersAreLeftOut(t *testing.T) {
	s, err := scenario.Load(scenario.Request{Need: needOrbits})
	if err != nil {
		t.Fatal(err)
	}
	b := basisOf(s, nil, 0)
	name := "station " + s.Stations[0].Site.Name
	kept := about(b, name)
	if len(kept.Defaults) == 0 || len(kept.Defaults) >= len(b.Defaults) {
		t.Errorf("%d of %d defaults are kept", len(kept.Defaults), len(b.Defaults))
	}
	for _, n := range kept.Defaults {
		if n.About != name && !strings.HasPrefix(n.About, name+", ") && (strings.HasPrefix(n.About, "station ") || strings.HasPrefix(n.About, "spacecraft ")) {
			t.Errorf("kept %s: %s", n.About, n.Text)
		}
	}
}
