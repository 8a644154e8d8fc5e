package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// Each answer says by which kind of orbit it was computed; a state and an ephemeris have
// no catalogue number, an ephemeris no epoch.
func TestAnswersSayWhatIsFlown(t *testing.T) {
	day := filepath.Join(t.TempDir(), "day")
	if code, _, errOut := invoke(t, "new", "--launch-day", day); code != ExitAnswer {
		t.Fatalf("new --launch-day: exit code %d\n%s", code, errOut)
	}
	for _, c := range []struct{ file, text, json, told string }{
		{"slipped", "\nstate of 2026-09-15T06:23:00.000Z, 0.00 days old\n",
			`"kind":"state","catalog_number":null,"epoch_utc":"2026-09-15T06:23:00.000Z"`, "the state of Sandpiper 1 has the epoch 2026-09-15T06:23:00.000Z"},
		{"tracked", "\nephemeris of Sandpiper 1 (2026-777A), 2026-09-15T06:23:00.000Z to 2026-09-16T06:30:00.000Z, tracked.oem\n",
			`"kind":"ephemeris","catalog_number":null,"epoch_utc":null,"age_days":null,"from_utc":"2026-09-15T06:23:00.000Z"`, "Sandpiper 1 flies on the ephemeris of Sandpiper 1"},
		{"catalogued", "\nelement set 99777 of 2026-09-15T19:58:48.000Z, 0.56 days ahead\n",
			`"kind":"element set","catalog_number":99777,"epoch_utc":"2026-09-15T19:58:48.000Z"`, "the element set of Sandpiper 1 has the epoch"},
	} {
		link := []string{"--scenario", filepath.Join(day, c.file+".yaml"), "--spacecraft", "Sandpiper 1", "--station", "Hoarfjord"}
		if _, out, errOut := invoke(t, append([]string{"budget"}, link...)...); !strings.Contains(out, c.text) {
			t.Errorf("budget on %s: no line %q\n%.600s\n%s", c.file, c.text, out, errOut)
		}
		at := []string{"--from", "2026-09-15T06:30:00Z", "--to", "2026-09-15T06:30:00Z", "--step", "1s", "--format", "json"}
		_, out, errOut := invoke(t, append(append([]string{"pointing"}, link...), at...)...)
		if !strings.Contains(out, c.json) || !strings.Contains(errOut, c.told) {
			t.Errorf("pointing on %s: want %s and %q\n%.600s\n%s", c.file, c.json, c.told, out, errOut)
		}
	}
	for file, told := range map[string]string{"slipped": "Flown by this orbit: state of 2026-09-15T06:23:00.000Z", "tracked": "Flown by this orbit: ephemeris of Sandpiper 1 (2026-777A), 2026-09-15T06:23:00.000Z to 2026-09-16T06:30:00.000Z, tracked.oem"} {
		into := filepath.Join(t.TempDir(), file)
		if code, _, errOut := invoke(t, "report", "--scenario", filepath.Join(day, file+".yaml"), "--station", "Hoarfjord", "--spacecraft", "Sandpiper 1", "--into", into); code != ExitAnswer {
			t.Fatalf("report on %s: exit code %d\n%s", file, code, errOut)
		}
		pages, _ := filepath.Glob(filepath.Join(into, "passes", "*.html"))
		if len(pages) == 0 {
			t.Fatalf("report on %s: no pages", file)
		}
		page, err := os.ReadFile(pages[0])
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(string(page), told) || strings.Contains(string(page), "Age of the element set") {
			t.Errorf("the page on %s does not say %q, or speaks of an element set", file, told)
		}
	}
	_, out, _ := invoke(t, "check", "--scenario", filepath.Join(day, "tracked.yaml"), "--format", "json")
	for _, want := range []string{`"catalog_number": null`, `"sets": null`, `"kind": "ephemeris"`} {
		if !strings.Contains(out, want) {
			t.Errorf("check: no %s\n%.800s", want, out)
		}
	}
}
