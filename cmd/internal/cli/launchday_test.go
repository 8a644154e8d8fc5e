package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestLaunchDay goes through the day: each scenario is sound, the slip moves every pass
// of the window by its 660 s, and what tracking and the first element set change stays
// within four standard deviations of what was known before.
func TestLaunchDay(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "--launch-day", "day"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	for _, name := range []string{"nominal", "slipped", "tracked", "catalogued"} {
		if code, _, errOut := invoke(t, "check", "--scenario", filepath.Join("day", name+".yaml")); code != ExitAnswer {
			t.Errorf("%s: %s", name, errOut)
		}
	}
	moved := 0
	for _, r := range compareRows(t, "day/nominal.yaml", "day/slipped.yaml", "--transmitter", "S-band", "--station", "Hoarfjord") {
		if r["change"] != "moved" {
			continue // the window cuts the last
		}
		moved++
		if d := near(t, r["aos_shift_s"]) - 66000; d < -1 || d > 1 {
			t.Errorf("the slip moves %v", r)
		}
	}
	if moved < 8 {
		t.Errorf("%d passes moved", moved)
	}
	for _, step := range [][2]string{{"slipped", "tracked"}, {"tracked", "catalogued"}} {
		rows := compareRows(t, "day/"+step[0]+".yaml", "day/"+step[1]+".yaml", "--transmitter", "S-band", "--station", "Hoarfjord")
		for _, r := range rows {
			if r["change"] != "moved" || strings.HasPrefix(r["max_elevation_before_deg"], "5.") {
				continue // over the horizon by a hair AOS says little
			}
			shift, sigma := near(t, r["aos_shift_s"]), near(t, r["aos_plus_minus_before_s"])
			if r["aos_plus_minus_before_s"] == "" || shift > 4*sigma+1 || shift < -4*sigma-1 {
				t.Errorf("%s to %s: AOS by %s s, with plus-minus %s s before: %v", step[0], step[1], r["aos_shift_s"], r["aos_plus_minus_before_s"], r)
			}
		}
		if len(rows) < 8 {
			t.Errorf("%d rows", len(rows))
		}
	}
}

func TestLaunchDayReplacesNothing(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.Mkdir("launch-day", 0o777); err != nil {
		t.Fatal(err)
	}
	theirs := filepath.Join("launch-day", "tracked.oem")
	if err := os.WriteFile(theirs, []byte("theirs"), 0o600); err != nil {
		t.Fatal(err)
	}
	code, _, errOut := invoke(t, "new", "--launch-day")
	if code != ExitInput || !strings.Contains(errOut, "tracked.oem: there is such a file already") {
		t.Errorf("code %d, %s", code, errOut)
	}
	if entries, err := os.ReadDir("launch-day"); err != nil || len(entries) != 1 {
		t.Errorf("the folder holds %v (%v)", entries, err)
	}
}
