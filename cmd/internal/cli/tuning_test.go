package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"
)

type frequencyRow struct {
	UTC      string
	Rate     float64  `json:"range_rate_km_s"`
	Received *float64 `json:"received_frequency_hz"`
	Sent     *float64 `json:"sent_frequency_hz"`
}

func askFrequencies(t *testing.T, args ...string) (rows []frequencyRow, notes string) {
	t.Helper()
	code, out, errOut := invoke(t, append([]string{"tuning", "--spacecraft", "Dunlin 1", "--station", "Skerry Point", "--list-every", "45s", "--format", "json"}, args...)...)
	if code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	var a struct {
		Frequencies []frequencyRow
		Notes       []string
	}
	if err := json.Unmarshal([]byte(out), &a); err != nil || len(a.Frequencies) < 5 {
		t.Fatalf("%d rows, %v", len(a.Frequencies), err)
	}
	return a.Frequencies, strings.Join(a.Notes, "\n")
}

// TestFrequenciesBothWays holds the listed frequencies to the relations worked by hand
// from the printed range rates: what is sent arrives as the spacecraft's own frequency.
func TestFrequenciesBothWays(t *testing.T) {
	const c, up, down = 299792.458, 2067.270833e6, 2245e6
	const ratio = 240.0 / 221
	for _, tt := range []struct {
		name     string
		args     []string
		received func(b float64) float64 // b = 1 - rate/c
	}{
		{"steady", []string{"--transmitter", "S-band", "--uplink", "S command", "--locked", "steady"}, func(b float64) float64 { return up * ratio * b * b }},
		{"following", []string{"--transmitter", "S-band", "--uplink", "S command", "--locked", "following"}, func(b float64) float64 { return up * ratio * b }},
	} {
		rows, _ := askFrequencies(t, tt.args...)
		for _, r := range rows {
			b := 1 - r.Rate/c
			// Range rates are printed to a millimetre a second: 0.01 Hz.
			if got, want := *r.Received, tt.received(b); math.Abs(got-want) > 0.02 {
				t.Errorf("%s at %s: received %.3f Hz, want %.3f", tt.name, r.UTC, got, want)
			}
			if got := *r.Sent * b; math.Abs(got-up) > 0.02 {
				t.Errorf("%s at %s: %.3f Hz arrive, want %.3f", tt.name, r.UTC, got, up)
			}
		}
	}
	// Unlocked: the line through the three points, as numpy's polyfit gives it.
	first := time.Date(2026, 9, 2, 5, 10, 0, 0, time.UTC)
	rows, notes := askFrequencies(t, "--transmitter", "S-band")
	for _, r := range rows {
		offset := *r.Received/(1-r.Rate/c) - down
		at, err := time.Parse(time.RFC3339, r.UTC)
		want := 2313.071260 + 12.009790*at.Sub(first).Hours()/24
		if err != nil || r.Sent != nil || math.Abs(offset-want) > 0.02 {
			t.Errorf("at %s the carrier is %.3f Hz off, want %.3f", r.UTC, offset, want)
		}
	}
	if !strings.Contains(notes, "fit to 3 measured") {
		t.Errorf("notes: %s", notes)
	}
}

func TestTuningContradictions(t *testing.T) {
	for _, tt := range []struct {
		args []string
		want string
	}{
		{[]string{"--residual-hz", "100", "--list-every", "10s"}, "give one of the two"},
		{[]string{"--residual-hz", "100", "--transmitter", "S-band", "--uplink", "S command"}, "or --list-every for both"},
		{[]string{"--list-every", "10s", "--transmitter", "S-band", "--locked", "loose"}, "it must be following or steady"},
		{[]string{"--residual-hz", "100", "--uplink", "S command", "--locked", "steady"}, "it has no effect on an uplink"},
		{[]string{"--list-every", "-1s", "--transmitter", "S-band"}, "it must be at least 1ms"},
	} {
		code, _, errOut := invoke(t, append([]string{"tuning", "--spacecraft", "Dunlin 1", "--station", "Skerry Point"}, tt.args...)...)
		if code != ExitInput || !strings.Contains(errOut, tt.want) {
			t.Errorf("%v: code %d, %s; want %s", tt.args, code, errOut, tt.want)
		}
	}
}
