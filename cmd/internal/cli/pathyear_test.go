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
