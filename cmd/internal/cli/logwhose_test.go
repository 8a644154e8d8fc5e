package cli

import (
	"math"
	"os"
	"strings"
	"testing"
)

// TestLogWhose: the invented log of an X band carrier, 400 Hz high and half a second late, among
// the demo's objects; then with the same orbit as an ephemeris beside it, which cannot be told from
// it; then alone among others.
func TestLogWhose(t *testing.T) {
	text, err := os.ReadFile("../scenario/demo/elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	demo := string(text)
	inLogbook(t)
	for _, call := range [][]string{{"elements", "tabulate", "--spacecraft", "Wagtail 1", "--into", "own.oem"}} {
		if code, _, errOut := invoke(t, call...); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	who := []string{"log", "whose", "r.csv", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--candidates", "all.tle"}
	if err := os.WriteFile("all.tle", []byte(demo), 0o600); err != nil {
		t.Fatal(err)
	}
	rows := records(t, who...)
	if len(rows) < 3 || !strings.HasPrefix(rows[0]["object"], "Wagtail 1 (99001") || float(t, rows[0], "probability") < 0.95 || rows[0]["explains"] != "yes" {
		t.Fatalf("%v", rows)
	}
	if off, late := float(t, rows[0], "offset_hz"), float(t, rows[0], "late_s"); math.Abs(off-rehearsalOffsetHz) > 30 || math.Abs(late-rehearsalLate.Seconds()) > 0.05 {
		t.Errorf("offset %.1f Hz, late %.3f s", off, late)
	}
	code, out, errOut := invoke(t, append(who, "--candidates", "own.oem")...)
	if code != ExitAnswer || !strings.Contains(errOut, "cannot tell: the best has") || !strings.Contains(out, "(ephemeris)") {
		t.Errorf("the same orbit twice: code %d, %s%s", code, errOut, out)
	}
	others := ""
	if _, rest, found := strings.Cut(demo, "Wagtail 1\n"); found {
		others = strings.SplitAfterN(rest, "\n", 3)[2]
	}
	if err := os.WriteFile("all.tle", []byte(others), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errOut := invoke(t, who...); code != ExitAnswer || !strings.Contains(errOut, "no candidate explains the log") {
		t.Errorf("none of these: code %d, %s", code, errOut)
	}
	if rows := records(t, append(who, "--candidates", "own.oem")...); !strings.Contains(rows[0]["object"], "(ephemeris)") || float(t, rows[0], "probability") < 0.95 {
		t.Errorf("as an ephemeris: %v", rows)
	}
}

func TestLogWhoseRefuses(t *testing.T) {
	inLogbook(t)
	for _, c := range []struct {
		args []string
		want string
	}{
		{nil, "--candidates: left out"},
		{[]string{"--candidates", "none.tle"}, "none.tle: no such file"},
		{[]string{"--candidates", "r.csv"}, "r.csv"},
		{[]string{"--candidates", "none.tle", "--late-s", "-1"}, "--late-s: -1 is not allowed"},
	} {
		args := append([]string{"log", "whose", "r.csv", "--spacecraft", "Wagtail 1", "--station", "Skerry Point"}, c.args...)
		if code, _, errOut := invoke(t, args...); code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, %s", c.args, code, errOut)
		}
	}
}
