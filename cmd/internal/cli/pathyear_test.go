package cli

import (
	"bytes"
	"context"
	"errors"
	"strings"
	"testing"
)

// TestPathYearInterrupted: the flight stops at an interrupt, before the next days.
func TestPathYearInterrupted(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	var out, errOut bytes.Buffer
	o := pathOptions{spacecraft: "Fulmar 1", station: "Tussock Bay"}
	o.year.year, o.year.mode, o.year.step = true, "steady", yearStep
	t.Chdir(t.TempDir()) // the demo
	if err := runPath(ctx, newEnv(strings.NewReader(""), &out, &errOut), &o); !errors.Is(err, context.Canceled) || out.Len() > 0 {
		t.Errorf("error %v, output %q", err, out.String())
	}
}

// TestPathYearNotes: nothing is said twice, and a UHF year says that the ionosphere's
// fades are not in it.
func TestPathYearNotes(t *testing.T) {
	t.Chdir(t.TempDir())
	code, out, errOut := invoke(t, "path", "--year", "--days", "2", "--spacecraft", "Pipit 2", "--station", "Reedmere", "--transmitter", "UHF", "--antenna", "crossed yagi")
	if code != ExitAnswer || strings.Count(out, "ionospheric scintillation is not in the statistics") != 1 {
		t.Errorf("code %d, stderr %s, output:\n%s", code, errOut, out)
	}
	seen := map[string]bool{}
	for line := range strings.Lines(out) {
		if told := strings.HasPrefix(line, "warning: ") || strings.HasPrefix(line, "assumption: "); told && seen[line] {
			t.Errorf("twice: %s", line)
		}
		seen[line] = true
	}
}

// TestPathSaysThatRainIsMissing in every form of output, in the file itself: a climate
// without rain, at Ka band.
func TestPathSaysThatRainIsMissing(t *testing.T) {
	climateScenario(t, "{cloud_liquid_water_kg_m2: [[1, 1], [50, 0.1]]}", "")
	for _, form := range [][]string{
		{"--frequency-mhz", "26000", "--elevation-deg", "20"},
		{"--frequency-mhz", "26000", "--sweep", "elevation", "--points", "3"},
		{"--elevation-deg", "20", "--sweep", "frequency", "--points", "3"},
		{"--frequency-mhz", "26000", "--elevation-deg", "20", "--sweep", "percentage", "--points", "3"},
	} {
		for format, want := range map[string]string{"table": "missing from the path: rain", "csv": ",rain", "json": "\"rain\""} {
			code, out, errOut := invoke(t, append([]string{"path", "--format", format}, form...)...)
			if code != ExitAnswer || !strings.Contains(out, want) {
				t.Errorf("%v as %s: code %d, stderr %s, output lacks %q:\n%s", form, format, code, errOut, want, out)
			}
		}
	}
}

// TestIonosphereMissingStandsAtTheHead: at 0.01 % of the year the fades of UHF have no
// table, and a budget without them must not look better than that at 1 %.
func TestIonosphereMissingStandsAtTheHead(t *testing.T) {
	t.Chdir(t.TempDir()) // the demo
	stated := []string{"budget", "--spacecraft", "Pipit 2", "--station", "Reedmere", "--transmitter", "UHF", "--antenna", "crossed yagi", "--range-km", "1500", "--elevation-deg", "20", "--exceeded-percent"}
	const want = "missing from the path: ionosphere ("
	for percent, missing := range map[string]bool{"0.01": true, "1": false} {
		if code, out, errOut := invoke(t, append(stated, percent)...); code != ExitAnswer || strings.Contains(out, want) != missing {
			t.Errorf("%s %%: code %d, stderr %s, output:\n%s", percent, code, errOut, out)
		}
	}
}
