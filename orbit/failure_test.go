package orbit

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// The published cases that end, with the first second for which sgp4 2.15 gives an
// error code, and that code: 1 and 4 are the ranges of the theory, 6 is decay.
func TestPublishedVerificationFailures(t *testing.T) {
	want := map[int]struct {
		seconds float64
		reason  Reason
	}{
		22312: {489.15 * 60, Diverged},          // code 1
		28350: {1472.13333333 * 60, Diverged},   // code 1
		28872: {51.51666667 * 60, Decayed},      // code 6
		29141: {422.63333333 * 60, Decayed},     // code 6
		33333: {20.43333333 * 60, Diverged},     // code 4
		33334: {0, Diverged},                    // code 3
		20413: {1459131.55007916 * 60, Decayed}, // code 6, seven hundred days on
	}
	seen := 0
	for _, c := range verificationCases(t) {
		w, ok := want[c.el.CatalogNumber]
		if !ok {
			continue
		}
		delete(want, c.el.CatalogNumber)
		seen++
		from := c.el.Epoch.Add(time.Duration(max(0, w.seconds-80000)) * time.Second)
		e, err := NewEphemeris(c.el, from, from.Add(24*time.Hour), EarthOrientation{})
		var pe *PropagationError
		if err == nil {
			pe = e.Truncated()
		} else if !errors.As(err, &pe) {
			t.Errorf("%05d: %v, want a *PropagationError", c.el.CatalogNumber, err)
			continue
		}
		if pe == nil {
			t.Errorf("%05d: no failure found", c.el.CatalogNumber)
			continue
		}
		if d := math.Abs(pe.Time.Sub(c.el.Epoch).Seconds() - w.seconds); d > 1.001 || pe.Reason != w.reason {
			t.Errorf("%05d: %v: %.1f s after the epoch, want %.1f s and reason %d", c.el.CatalogNumber, pe, pe.Time.Sub(c.el.Epoch).Seconds(), w.seconds, w.reason)
		}
		if err == nil {
			p, v := interpolationError(t, e, rand.New(rand.NewPCG(7, 8)), 2000)
			if p > MaxPositionError.Metres() || v > float64(MaxVelocityError) {
				t.Errorf("%05d: step %g s: %.4f m and %.6f m/s from SGP4 before the end", c.el.CatalogNumber, e.Step(), p, v)
			}
		}
		if err == nil && !(e.Time(e.Span()).Before(pe.Time)) {
			t.Errorf("%05d: the span ends at %v, not before the failure at %v", c.el.CatalogNumber, e.Time(e.Span()), pe.Time)
		}
	}
	if seen != 7 {
		t.Errorf("%d of the 7 failing cases were looked at", seen)
	}
}

func TestDecayedBeforeTheWindow(t *testing.T) {
	el := Elements{Name: "Falling", CatalogNumber: 99001, Epoch: testEpoch, MeanMotion: 16.35, Eccentricity: 0.001,
		Inclination: 82 * unit.Degree, BStar: 2e-3}
	for days := 3; days < 400; days += 7 {
		from := testEpoch.Add(time.Duration(days) * 24 * time.Hour)
		_, err := NewEphemeris(el, from, from.Add(24*time.Hour), EarthOrientation{})
		var pe *PropagationError
		if !errors.As(err, &pe) {
			t.Fatalf("%d days on: got %v, want a *PropagationError", days, err)
		}
		if age := pe.Time.Sub(testEpoch).Hours() / 24; age < 2 || age > 3 {
			t.Errorf("%d days on: the decay is put %.2f days after the epoch, want 2 to 3", days, age)
		}
		if !strings.Contains(err.Error(), "Falling") || !strings.Contains(err.Error(), "99001") {
			t.Errorf("the message does not name the set: %v", err)
		}
	}
}

func TestSpans(t *testing.T) {
	el := orbitKinds[0].elements()
	from := testEpoch.Add(time.Hour)
	var re *unit.RangeError
	if _, err := NewEphemeris(el, from, from.Add(-time.Second), EarthOrientation{}); !errors.As(err, &re) {
		t.Errorf("reversed: got %v, want a *unit.RangeError", err)
	}
	if _, err := NewEphemeris(el, from, from.AddDate(11, 0, 0), EarthOrientation{}); !errors.As(err, &re) {
		t.Errorf("eleven years: got %v, want a *unit.RangeError", err)
	}
	e, err := NewEphemeris(el, from, from, EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	if _, err := e.At(from); err != nil {
		t.Errorf("a span of nothing: %v", err)
	}
	var se *SpanError
	if _, err := e.At(from.Add(time.Nanosecond)); !errors.As(err, &se) {
		t.Errorf("outside: got %v, want a *SpanError", err)
	}
	defer func() {
		if recover() == nil {
			t.Error("PositionAt outside the span did not panic")
		}
	}()
	e.PositionAt(math.NaN())
}

// Elements that pass Validate and yet are no orbit, or one that SGP4 has no answer for.
func TestNoOrbit(t *testing.T) {
	for _, c := range []struct {
		name   string
		change func(*Elements)
		want   Reason
	}{
		{"under the ground", func(e *Elements) { e.MeanMotion = 18 }, Decayed},
		{"exactly against the Earth's rotation", func(e *Elements) { e.Inclination = 180 * unit.Degree }, NotANumber},
		{"a line through the Earth", func(e *Elements) { e.MeanMotion, e.Eccentricity = 20, 0.9999999 }, Diverged},
	} {
		el := orbitKinds[1].elements()
		c.change(&el)
		_, err := NewEphemeris(el, testEpoch, testEpoch.Add(time.Hour), EarthOrientation{})
		var pe *PropagationError
		if !errors.As(err, &pe) || pe.Reason != c.want {
			t.Errorf("%s: got %v, want reason %q", c.name, err, c.want)
		}
	}
}

func TestEarthOrientationOutOfRange(t *testing.T) {
	el := orbitKinds[0].elements()
	for _, o := range []EarthOrientation{
		{UT1MinusUTC: time.Second},
		{PolarMotionX: unit.Angle(math.NaN())},
		{PolarMotionY: -2 * unit.Arcsecond},
	} {
		var re *unit.RangeError
		if _, err := NewEphemeris(el, testEpoch, testEpoch, o); !errors.As(err, &re) {
			t.Errorf("%+v: got %v, want a *unit.RangeError", o, err)
		}
	}
}

func TestRebuildGivesWhatNewEphemerisGives(t *testing.T) {
	var again Ephemeris
	for _, kind := range []int{13, 1, 19, 4} {
		el := orbitKinds[kind].elements()
		to := testEpoch.Add(36 * time.Hour)
		want, err := NewEphemeris(el, testEpoch, to, EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		if err := again.Rebuild(el, testEpoch, to, EarthOrientation{}); err != nil {
			t.Fatal(err)
		}
		if again.Span() != want.Span() || again.Step() != want.Step() {
			t.Errorf("%s: span %g s, step %g s, want %g and %g", el.Name, again.Span(), again.Step(), want.Span(), want.Step())
		}
		for s := 0.0; s <= want.Span(); s += 777.7 {
			if again.StateAt(s) != want.StateAt(s) || again.LightAt(s) != want.LightAt(s) {
				t.Errorf("%s: the states at %g s differ", el.Name, s)
			}
		}
	}
}
