package fit_test

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/fit"
	"slantwise/orbit/unit"
)

const day = 24 * time.Hour

// Orbits of every shape come back from a day of their own positions at the default epoch,
// and the fit follows the set two days beyond. Velocities are not needed.
func TestOwnPositions(t *testing.T) {
	shape := func(change func(*orbit.Elements)) orbit.Elements {
		el := wagtail()
		change(&el)
		return el
	}
	for name, el := range map[string]orbit.Elements{
		"polar":                     wagtail(),
		"circular":                  shape(func(e *orbit.Elements) { e.Eccentricity = 0 }),
		"equatorial":                shape(func(e *orbit.Elements) { e.Inclination = 0 }),
		"circular and equatorial":   shape(func(e *orbit.Elements) { e.Inclination, e.Eccentricity = 0, 0 }),
		"retrograde in the equator": shape(func(e *orbit.Elements) { e.Inclination = 179.9 * unit.Degree }),
		"eccentric":                 shape(func(e *orbit.Elements) { e.MeanMotion, e.Eccentricity = 9, 0.3 }),
		"low":                       shape(func(e *orbit.Elements) { e.MeanMotion, e.BStar = 15.9, 3e-4 }),
	} {
		t.Run(name, func(t *testing.T) {
			data := ephemeris(t, el, el.Epoch, day, 2*time.Minute, false)
			r, err := fit.Fit(context.Background(), data, fit.Options{})
			if err != nil {
				t.Fatal(err)
			}
			later := ephemeris(t, el, el.Epoch.Add(3*day), time.Hour, 10*time.Minute, false)
			p, err := orbit.NewPropagation(r.Elements)
			if err != nil {
				t.Fatal(err)
			}
			worst := 0.0
			for _, d := range later {
				at, _, err := p.At(d.Time)
				if err != nil {
					t.Fatal(err)
				}
				worst = math.Max(worst, at.Sub(d.Position).Norm())
			}
			t.Logf("RMS %.3f m, two days beyond the data %.3f m, condition %.0f, B* %.4e", r.RMS, worst, r.Condition, r.Elements.BStar)
			// What is left is SGP4's drag, whose coefficients are those of the epoch.
			if !(r.RMS < 3) || !(worst < 60) {
				t.Errorf("RMS %g m, two days beyond the data %g m", r.RMS, worst)
			}
		})
	}
}

// The written digits of a two-line set are 1e-4 degrees; whatever the epoch, the set is the
// same orbit.
func TestEpochs(t *testing.T) {
	el := wagtail()
	data := ephemeris(t, el, el.Epoch, day, 2*time.Minute, true)
	for _, at := range []time.Duration{-6 * time.Hour, 0, 12 * time.Hour, day, 30 * time.Hour} {
		r, err := fit.Fit(context.Background(), data, fit.Options{Epoch: el.Epoch.Add(at)})
		if err != nil {
			t.Fatal(err)
		}
		if !r.Elements.Epoch.Equal(el.Epoch.Add(at)) || !(r.RMS < 1) {
			t.Errorf("epoch %v: got %v, RMS %g m", at, r.Elements.Epoch, r.RMS)
		}
	}
	last := time.Date(2026, 3, 11, 12, 0, 26, 0, time.UTC)
	epoch := fit.DefaultEpoch(last)
	if want := time.Date(2026, 3, 11, 12, 0, 0, 0, time.UTC); !epoch.Equal(want) || epoch.Sub(epoch.Truncate(day))%(864*time.Microsecond) != 0 {
		t.Errorf("default epoch of %v is %v, want %v", last, epoch, want)
	}
	_, err := fit.Fit(context.Background(), data, fit.Options{Epoch: el.Epoch.Add(40 * day)})
	if refused(err) != fit.OutsideTheory {
		t.Errorf("an epoch far from the data: %v", err)
	}
}

func refused(err error) fit.Why {
	var r *fit.Refusal
	if errors.As(err, &r) {
		return r.Why
	}
	return 0
}

func TestRefusals(t *testing.T) {
	el := wagtail()
	states := ephemeris(t, el, el.Epoch, day, 10*time.Minute, true)
	positions := ephemeris(t, el, el.Epoch, day, 10*time.Minute, false)
	turned := func(data []fit.Datum) []fit.Datum { // a frame that turns with the Earth, taken for one that does not
		out := append([]fit.Datum(nil), data...)
		for i := range out {
			s := orbit.TEMEToEarthFixed(out[i].Position, out[i].Velocity, out[i].Time, orbit.EarthOrientation{})
			out[i].Position, out[i].Velocity = s.Position, s.Velocity
		}
		return out
	}
	changed := func(change func(*fit.Datum)) []fit.Datum {
		out := append([]fit.Datum(nil), states...)
		change(&out[3])
		return out
	}
	jump := append(append([]fit.Datum(nil), states[:72]...), func() []fit.Datum {
		after := wagtail()
		after.MeanMotion += 0.02 // a manoeuvre
		return ephemeris(t, after, el.Epoch, day, 10*time.Minute, true)[72:]
	}()...)
	zero := 0.0
	for name, c := range map[string]struct {
		data []fit.Datum
		o    fit.Options
		why  fit.Why
		says string
	}{
		"none":                     {nil, fit.Options{}, fit.TooFew, "there are none"},
		"none in the span":         {states, fit.Options{From: el.Epoch.Add(2 * day)}, fit.TooFew, "there are none in the span"},
		"two positions":            {positions[:2], fit.Options{}, fit.TooFew, "6 numbers are given for 7 unknowns"},
		"one state and B*":         {states[:1], fit.Options{}, fit.SpanShortForDrag, "one state says nothing of drag"},
		"half an hour with errors": {noisy(states[:4], 50, 1), fit.Options{}, fit.SpanShortForDrag, "per Earth radius; give a longer span, or state B*"},
		"positions hours apart":    {everyNth(positions, 9), fit.Options{}, fit.NoFirstGuess, "the count of revolutions stays open"},
		"a minute of positions":    {noisy(ephemeris(t, el, el.Epoch, time.Minute, 10*time.Second, false), 500, 1), fit.Options{BStar: &zero}, fit.Undetermined, "a revolution after the epoch is known to"},
		"Earth-fixed as inertial":  {turned(states), fit.Options{}, 0, ""},
		"manoeuvre":                {jump, fit.Options{}, fit.BeyondTheory, "split the span at a manoeuvre"},
		"metres for kilometres":    {changed(func(d *fit.Datum) { d.Position = d.Position.Scale(1e-3) }), fit.Options{}, fit.BadDatum, "from the Earth's centre"},
		"no number":                {changed(func(d *fit.Datum) { d.Position.X = math.NaN() }), fit.Options{}, fit.BadDatum, "from the Earth's centre"},
		"standing still":           {changed(func(d *fit.Datum) { d.Velocity = orbit.Vec3{} }), fit.Options{}, fit.BadDatum, "the speed is 0 km/s"},
		"negative sigma":           {changed(func(d *fit.Datum) { d.PositionSigma = -1 }), fit.Options{}, fit.BadDatum, "a standard deviation is negative"},
		"hyperbolic":               {[]fit.Datum{{Time: el.Epoch, Position: orbit.Vec3{X: 7e6}, Velocity: orbit.Vec3{Y: 12e3}, HasVelocity: true}}, fit.Options{BStar: &zero}, fit.OutsideTheory, "no elements belong"},
		"straight down":            {[]fit.Datum{{Time: el.Epoch, Position: orbit.Vec3{X: 7e6}, Velocity: orbit.Vec3{X: -5e3}, HasVelocity: true}}, fit.Options{BStar: &zero}, fit.OutsideTheory, "no elements belong"},
	} {
		t.Run(name, func(t *testing.T) {
			r, err := fit.Fit(context.Background(), c.data, c.o)
			if err == nil {
				t.Fatalf("fitted with an RMS of %g m", r.RMS)
			}
			if got := refused(err); got == 0 || c.why != 0 && got != c.why || !strings.Contains(err.Error(), c.says) {
				t.Errorf("got %v\nwant %v: … %s", err, c.why, c.says)
			}
			t.Log(err)
		})
	}
}

func everyNth(data []fit.Datum, n int) (out []fit.Datum) {
	for i := 0; i < len(data); i += n {
		out = append(out, data[i])
	}
	return out
}

// One state with B* stated gives the set that passes through it, and no covariance.
func TestSingleState(t *testing.T) {
	el := wagtail()
	data := ephemeris(t, el, el.Epoch, 0, time.Minute, true)
	r, err := fit.Fit(context.Background(), data, fit.Options{BStar: &el.BStar})
	if err != nil {
		t.Fatal(err)
	}
	if r.RMS > 1e-3 || r.Uncertainty != nil || !math.IsNaN(r.Covariance[0][0]) || r.Redundancy != 0 {
		t.Errorf("RMS %g m, covariance %g, redundancy %d", r.RMS, r.Covariance[0][0], r.Redundancy)
	}
}

// Outliers count unless they are rejected, are marked, and are named when rejected.
func TestOutliers(t *testing.T) {
	el := wagtail()
	data := noisy(ephemeris(t, el, el.Epoch, day, 10*time.Minute, false), 20, 3)
	for _, i := range []int{10, 77} {
		data[i].Position.X += 2000
	}
	kept, err := fit.Fit(context.Background(), data, fit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	without, err := fit.Fit(context.Background(), data, fit.Options{RejectBeyond: 6})
	if err != nil {
		t.Fatal(err)
	}
	for i := range data {
		odd := i == 10 || i == 77
		if kept.Residuals[i].Rejected || kept.Residuals[i].Suspect != odd || without.Residuals[i].Rejected != odd {
			t.Errorf("datum %d: kept %+v, without %+v", i, kept.Residuals[i], without.Residuals[i])
		}
	}
	if kept.Used != len(data) || without.Used != len(data)-2 || !(without.RMS < 40) || !(kept.RMS > 150) {
		t.Errorf("kept %d with RMS %g m, without %d and %g m", kept.Used, kept.RMS, without.Used, without.RMS)
	}
	for i := range data {
		if i%3 == 0 {
			data[i].Position.X += 3000
		}
	}
	if _, err := fit.Fit(context.Background(), data, fit.Options{RejectBeyond: 1.5}); refused(err) != fit.TooManyRefused {
		t.Errorf("a third of the data is off: %v", err)
	}
}

func TestProgress(t *testing.T) {
	el := wagtail()
	told := 0
	data := ephemeris(t, el, el.Epoch, 5000*time.Second, time.Second, true)
	if _, err := fit.Fit(context.Background(), data, fit.Options{BStar: &el.BStar, Progress: func(n int) { told += n }}); err != nil {
		t.Fatal(err)
	}
	if told < 5000 {
		t.Errorf("told of %d data, there are %d", told, len(data))
	}
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	el := wagtail()
	if _, err := fit.Fit(ctx, ephemeris(t, el, el.Epoch, day, time.Hour, true), fit.Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
}
