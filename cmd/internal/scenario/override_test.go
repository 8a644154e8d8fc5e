package scenario_test

import (
	"testing"
	"time"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit/elements"
)

const goodFile = "testdata/good/everything.yaml"

func lengthFlag(t *testing.T, value string) map[string]*pflag.Flag {
	t.Helper()
	fs := pflag.NewFlagSet("test", pflag.ContinueOnError)
	fs.String("window-length-h", "", "")
	if value != "" {
		if err := fs.Set("window-length-h", value); err != nil {
			t.Fatal(err)
		}
	}
	return map[string]*pflag.Flag{"window.length_h": fs.Lookup("window-length-h")}
}

// TestPrecedence: a flag goes before the environment, which goes before the file.
func TestPrecedence(t *testing.T) {
	length := func(flag string) time.Duration {
		t.Helper()
		s, err := scenario.Load(scenario.Request{Path: goodFile, Flags: lengthFlag(t, flag)})
		if err != nil {
			t.Fatal(err)
		}
		return s.Window.Length()
	}
	if got := length(""); got != 12*time.Hour+30*time.Minute {
		t.Errorf("file alone: %v, want 12h30m", got)
	}
	t.Setenv("SLANTWISE_WINDOW_LENGTH_H", "6")
	if got := length(""); got != 6*time.Hour {
		t.Errorf("environment over file: %v, want 6h", got)
	}
	if got := length("2.5"); got != 2*time.Hour+30*time.Minute {
		t.Errorf("flag over environment: %v, want 2h30m", got)
	}
}

// TestOverridesOfOtherKeys: an end replaces a length, and groups are made as needed.
func TestOverridesOfOtherKeys(t *testing.T) {
	t.Setenv("SLANTWISE_WINDOW_END_UTC", "2026-09-15T03:00:00Z")
	t.Setenv("SLANTWISE_EARTH_UT1_MINUS_UTC_S", "0.25")
	t.Setenv("SLANTWISE_ELEMENT_CHOICE", "nearest")
	s, err := scenario.Load(scenario.Request{Path: "testdata/good/no-spacecraft.yaml", Flags: nil})
	if err == nil {
		t.Fatalf("an end before the file's start was accepted: %v", s.Window)
	}
	const want = `environment SLANTWISE_WINDOW_END_UTC: window.end_utc: "2026-09-15T03:00:00Z" is not allowed; it must be after start_utc, 2026-09-24T12:00:00Z; swap the two if they are reversed`
	if err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	t.Setenv("SLANTWISE_WINDOW_START_UTC", "2026-09-15T00:00:00Z")
	if s, err = scenario.Load(scenario.Request{Path: "testdata/good/no-spacecraft.yaml"}); err != nil {
		t.Fatal(err)
	}
	if s.Window.Length() != 3*time.Hour || s.Earth.UT1MinusUTC != 250*time.Millisecond || s.Choice != elements.Nearest {
		t.Errorf("got window %v, UT1-UTC %v, choice %v", s.Window, s.Earth.UT1MinusUTC, s.Choice)
	}
}

func TestWrongOverrides(t *testing.T) {
	for _, tt := range []struct{ variable, value, flag, want string }{
		{"SLANTWISE_WINDOW_LENGTH", "6", "", "environment SLANTWISE_WINDOW_LENGTH: the variable is not known; did you mean SLANTWISE_WINDOW_LENGTH_H?"},
		{"SLANTWISE_COLOUR", "no", "", "environment SLANTWISE_COLOUR: the variable is not known; unset it; variables set scalars outside lists, as SLANTWISE_WINDOW_LENGTH_H does"},
		{"SLANTWISE_WINDOW_LENGTH_H", "long", "", `environment SLANTWISE_WINDOW_LENGTH_H: window.length_h: "long" is not allowed; it must be a number, greater than 0 and at most 87672 h; give the number alone`},
		{"SLANTWISE_WINDOW_END_UTC", "2026-09-16T00:00:00Z", "6", "environment SLANTWISE_WINDOW_END_UTC: window.end_utc: it stands beside length_h, which says the same in another way; keep one of length_h, end_utc"},
		{"SLANTWISE_HORIZON", "NaN", "", `environment SLANTWISE_HORIZON: horizon: "NaN" is not allowed; it must be one of geometric, apparent`},
		{"SLANTWISE_WINDOW_LENGTH_H", "6", "-1", `flag --window-length-h: window.length_h: "-1" is not allowed; it must be greater than 0 and at most 87672 h`},
	} {
		t.Run(tt.variable+"="+tt.value, func(t *testing.T) {
			t.Setenv(tt.variable, tt.value)
			_, err := scenario.Load(scenario.Request{Path: goodFile, Flags: lengthFlag(t, tt.flag)})
			if err == nil || err.Error() != tt.want {
				t.Errorf("got  %v\nwant %s", err, tt.want)
			}
		})
	}
}
