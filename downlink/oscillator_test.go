package downlink

import (
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
)

var osciStart = time.Date(2026, 9, 1, 0, 0, 0, 0, time.UTC)

// Points on a line give the line back; the closed form of three points by hand.
func TestFitOscillator(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		offset, drift := rapid.Float64Range(-1e5, 1e5).Draw(t, "offset"), rapid.Float64Range(-1e-2, 1e-2).Draw(t, "drift")
		var points []OscillatorPoint
		at := 0.0
		for range rapid.IntRange(1, 20).Draw(t, "points") {
			at += rapid.Float64Range(60, 86400).Draw(t, "later")
			points = append(points, OscillatorPoint{osciStart.Add(time.Duration(at * 1e9)), unit.Frequency(offset + drift*at)})
		}
		o, err := FitOscillator(points)
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range points {
			if d := (o.OffsetAt(p.Time) - p.Offset).Hertz(); math.Abs(d) > 1e-5 {
				t.Fatalf("off by %v Hz", d)
			}
		}
	})
	// 0, 1 and 5 Hz at 0, 1 and 2 days: slope 2.5 Hz a day through 2 Hz at day 1; left over 0.5, -1, 0.5 Hz.
	o, err := FitOscillator([]OscillatorPoint{{osciStart, 0}, {osciStart.AddDate(0, 0, 1), 1}, {osciStart.AddDate(0, 0, 2), 5}})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(o.Offset.Hertz()-2) > 1e-12 || math.Abs(o.Drift*86400-2.5) > 1e-12 || math.Abs(o.RMS.Hertz()-math.Sqrt(1.5)) > 1e-12 {
		t.Errorf("got %v", o)
	}
	if want := "2 Hz off at 2026-09-02T00:00:00Z, drifting 2.5 Hz a day (fit to 3 measured, 1.22 Hz left over, the last of 2026-09-03T00:00Z)"; o.String() != want {
		t.Errorf("got %s\nwant %s", o, want)
	}
	for _, bad := range [][]OscillatorPoint{nil, {{osciStart, 0}, {osciStart, 1}}, {{osciStart, unit.Frequency(math.NaN())}}} {
		if _, err := FitOscillator(bad); err == nil || !strings.Contains(err.Error(), "oscillator") {
			t.Errorf("%v: %v", bad, err)
		}
	}
	if (*Oscillator)(nil).OffsetAt(osciStart) != 0 {
		t.Error("no oscillator has an offset")
	}
}
