package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// launchDayWith writes the launch day and returns one of its scenarios, changed.
func launchDayWith(t *testing.T, name, old, with string) string {
	t.Helper()
	day := filepath.Join(t.TempDir(), "day")
	if code, _, errOut := invoke(t, "new", "--launch-day", day); code != ExitAnswer {
		t.Fatalf("new --launch-day: exit code %d\n%s", code, errOut)
	}
	file := filepath.Join(day, name)
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(text), old) {
		t.Fatalf("%s does not hold %q", name, old)
	}
	if err := os.WriteFile(file, []byte(strings.Replace(string(text), old, with, 1)), 0o600); err != nil {
		t.Fatal(err)
	}
	return file
}

// An orbit that the scenario gives up before the window is an answer without passes, and
// the answer says why.
func TestNoPassesAfterTheOrbitIsGivenUp(t *testing.T) {
	file := launchDayWith(t, "catalogued.yaml", `element_set: "99777"`, "element_set: \"99777\"\n    valid_until_utc: 2026-09-15T06:00:00Z")
	const why = "valid_until_utc, 2026-09-15T06:00:00Z: after it the orbit is another"
	link := []string{"--spacecraft", "Sandpiper 1", "--station", "Hoarfjord"}
	for _, args := range [][]string{{"passes", "--format", "csv"}, {"check"}, append([]string{"budget"}, link...), append([]string{"rates"}, link...), append([]string{"tuning", "--residual-hz", "1000"}, link...)} {
		code, out, errOut := invoke(t, append(args, "--scenario", file)...)
		if code != ExitAnswer || !strings.Contains(out+errOut, why) {
			t.Errorf("%v: exit code %d, want %d and %q\n%.500s", args, code, ExitAnswer, why, errOut)
		}
		if args[0] == "passes" && strings.Count(out, "\n") != 1 {
			t.Errorf("passes after the orbit was given up:\n%s", out)
		}
	}
	code, _, errOut := invoke(t, append(append([]string{"budget", "--scenario", file}, link...), "--at", "2026-09-15T07:00:00Z")...)
	if code != ExitInput || !strings.Contains(errOut, "no orbit is known at 2026-09-15T07:00:00Z: "+why) {
		t.Errorf("budget --at: exit code %d\n%s", code, errOut)
	}
}

// The last instant of an ephemeris has a state, the millisecond after it has none, and the
// refusal names all that the ephemeris covers.
func TestEphemerisHoldsToItsLastInstant(t *testing.T) {
	file := launchDayWith(t, "tracked.yaml", "length_h: 24", "length_h: 25")
	link := []string{"--scenario", file, "--spacecraft", "Sandpiper 1", "--station", "Hoarfjord"}
	for at, want := range map[string]string{"2026-09-15T06:23:00Z": "", "2026-09-16T06:30:00Z": "",
		"2026-09-16T06:30:00.001Z": "2026-09-16T06:30:00.001Z is outside the span 2026-09-15T06:23:00.000Z to 2026-09-16T06:30:00.000Z; the ephemeris has ended",
		"2026-09-15T06:22:59.999Z": "2026-09-15T06:22:59.999Z is outside the span 2026-09-15T06:23:00.000Z to 2026-09-16T06:30:00.000Z; the ephemeris begins only then"} {
		for _, args := range [][]string{{"pointing", "--from", at, "--to", at, "--step", "1s"}, {"budget", "--at", at}} {
			code, _, errOut := invoke(t, append(args, link...)...)
			switch {
			case want == "" && code != ExitAnswer:
				t.Errorf("%v: exit code %d\n%s", args, code, errOut)
			case want != "" && (code != ExitInput || !strings.Contains(errOut, want)):
				t.Errorf("%v: exit code %d, want %d and %q\n%s", args, code, ExitInput, want, errOut)
			}
		}
	}
}
