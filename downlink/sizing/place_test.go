package sizing

import (
	"context"
	"math"
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// C/N0 by the ladder against the budget's own profile under weather, with the aperture
// of another diameter: 0.015 dB, most of it at the
// kinks of the noise table.
func TestLadderAgainstProfile(t *testing.T) {
	c := usualCase()
	c.days = 7
	s := c.study(t, None(), Family{})
	for _, d := range []unit.Length{1.2, 3.7, 9} {
		a := c.antenna
		a.Diameter = d
		link := c.weather(t, 0, a)
		f, err := s.front(0, Variant{Diameter: d})
		if err != nil {
			t.Fatal(err)
		}
		y := &s.spec.Flight.Sites[0]
		eph, err := c.orbit.Ephemeris(caseStart, caseStart.AddDate(0, 0, 7), c.earth(), nil)
		if err != nil {
			t.Fatal(err)
		}
		worst := 0.0
		for i, p := range y.Passes {
			profile, err := link.Profile(eph, p.AOS, p.LOS, DefaultStep)
			if err != nil {
				t.Fatal(err)
			}
			from, _ := y.Samples(i)
			for k, want := range profile.CN0DBHz {
				got := y.FluxDB[from+k] + s.sites[0].place[from+k].at(f.planned)
				worst = max(worst, math.Abs(got-want))
			}
		}
		if worst > 0.015 {
			t.Errorf("%g m: C/N0 is up to %.4f dB from the budget's", d.Metres(), worst)
		}
	}
}

// The parts of a year's study one by one.
func BenchmarkFlyYear(b *testing.B) {
	c := usualCase()
	c.days = 365
	b.ReportAllocs()
	for b.Loop() {
		c.fly(b)
	}
}

func BenchmarkNewStudy(b *testing.B) {
	c := usualCase()
	c.days = 365
	f, places := c.fly(b)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := NewStudy(Spec{Flight: f, Places: places, Rates: newPlanner(b, caseRules), Mode: caseModes[0], Margin: 3, Needs: None()}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkOutcome(b *testing.B) {
	c := usualCase()
	c.days = 365
	s := c.study(b, None(), Family{})
	d := unit.Length(3)
	b.ReportAllocs()
	for b.Loop() {
		d += 0.001
		if _, err := s.Outcome(Variant{Diameter: d}); err != nil {
			b.Fatal(err)
		}
	}
}

// One site, a year, twenty diameters, from the flight on.
func BenchmarkYearTwentyDiameters(b *testing.B) {
	c := usualCase()
	c.days = 365
	for b.Loop() {
		s := c.study(b, None(), Family{})
		for _, d := range (Range{Low: 1, High: 13, Steps: 20}).Grid() {
			if _, err := s.Outcome(Variant{Diameter: d}); err != nil {
				b.Fatal(err)
			}
		}
	}
}

func TestFlightRefuses(t *testing.T) {
	c := usualCase()
	spec := FlightSpec{Orbit: c.orbit, Start: caseStart, Days: 3, Sites: []FlightSite{{Site: &c.sites[0]}}}
	if _, err := Fly(context.Background(), spec); err == nil {
		t.Error("three days: no error")
	}
	spec.Days, spec.Sites = 30, nil
	if _, err := Fly(context.Background(), spec); err == nil {
		t.Error("no site: no error")
	}
	measured := c.antenna
	measured.Gain = station.Constant(46)
	if _, err := (&Family{}).Antenna(&measured, 3); err == nil {
		t.Error("a measured gain follows no diameter: no error")
	}
}
