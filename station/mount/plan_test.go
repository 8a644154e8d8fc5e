package mount

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestKeyholeInClosedForm holds the search to the closed form of the keyhole for axes
// that are at their rate at once.
func TestKeyholeInClosedForm(t *testing.T) {
	for _, c := range []struct{ rate, limit, nearest float64 }{
		{0.9, 5, 1}, {0.9, 5, 5}, {1.1, 10, 0.2}, {0.5, 3, 3}, {1, 2, 10}, {0.8, 20, 0.05},
	} {
		t.Run(fmt.Sprint(c), func(t *testing.T) {
			want := KeyholeTime(unit.AngularRate(c.rate*degree), unit.AngularRate(c.limit*degree), unit.Angle(c.nearest)*unit.Degree)
			p := drive(t, -270, 270, c.limit, atOnce).Plan(circle(c.nearest, 40, c.rate, 140), Options{})
			if len(p.Slews) != 1 {
				t.Fatalf("%d slews: %+v", len(p.Slews), p.Slews)
			}
			got := p.OffTrackSeconds()
			near(t, "time off track", got, want, fineStep) // a sample of the touching end
			if got < want-1e-6 {
				t.Errorf("%g s is less than what can be, %g s", got, want)
			}
			// It touches the curve at one of its ends, where the rate is the limit.
			z, x := c.nearest*degree, c.rate/c.limit
			end := math.Asin(math.Sqrt((x*math.Sin(z)-math.Pow(math.Sin(z), 2))/math.Pow(math.Cos(z), 2))) / degree / c.rate
			if first, last := math.Abs(p.Slews[0].From-70+end), math.Abs(p.Slews[0].To-70-end); min(first, last) > 2*fineStep {
				t.Errorf("slews from %g to %g s, neither is %g s from the middle", p.Slews[0].From, p.Slews[0].To, end)
			}
		})
	}
	// Where the target is as fast as the axis there is no keyhole.
	z := KeyholeRadius(unit.AngularRate(0.9*degree), unit.AngularRate(5*degree))
	near(t, "radius", z.Degrees(), math.Asin(0.18)/degree, 1e-12)
	if got := KeyholeTime(unit.AngularRate(0.9*degree), unit.AngularRate(5*degree), z+1e-9); got != 0 {
		t.Errorf("outside the keyhole: %g s", got)
	}
	p := drive(t, -270, 270, 5, atOnce).Plan(circle(z.Degrees()+0.01, 40, 0.9, 140), Options{})
	if p.OffTrackSeconds() != 0 {
		t.Errorf("outside the keyhole %g s are off track", p.OffTrackSeconds())
	}
}

// TestOverTheTop sends a pass through the zenith: with the elevation to 90° half a turn
// of azimuth is lost, past 90° nothing.
func TestOverTheTop(t *testing.T) {
	c := circle(0, 40, 0.9, 140)
	plain := drive(t, -270, 270, 10).Plan(c, Options{})
	// 180° at 10 deg/s with 2 s of speeding up and braking in all.
	near(t, "seconds off track", plain.OffTrackSeconds(), 18+2, 0.3)
	over := drive(t, -270, 270, 10, overTop).Plan(c, Options{Tolerance: 0.001 * unit.Degree})
	if over.OffTrackSeconds() > 2*fineStep || over.LostSeconds() != 0 {
		t.Errorf("over the top %g s are off track, %g s lost", over.OffTrackSeconds(), over.LostSeconds())
	}
	if end := over.End.Upper.Degrees(); end < 90 == (over.Start.Upper.Degrees() < 90) {
		t.Errorf("elevation from %g to %g deg", over.Start.Upper.Degrees(), end)
	}
}

// TestTiltTakesTheKeyholeAway leans the mount across a zenith pass.
func TestTiltTakesTheKeyholeAway(t *testing.T) {
	c := circle(0.5, 40, 0.9, 140)
	lean := drive(t, -270, 270, 10, func(m *station.Mount) { m.TiltAzimuth, m.TiltAngle = 40*unit.Degree, 7*unit.Degree })
	if off := lean.Plan(c, Options{}).OffTrackSeconds(); off != 0 {
		t.Errorf("%g s off track, 6.5 deg from the pole that should be none", off)
	}
	if off := drive(t, -270, 270, 10).Plan(c, Options{}).OffTrackSeconds(); off < 10 {
		t.Errorf("upright %g s off track", off)
	}
}

// TestCableIsPlannedAhead goes round the horizon: where the range allows it the
// beginning is chosen so that nothing is lost, else the turn-over is where it costs least.
func TestCableIsPlannedAhead(t *testing.T) {
	c := level(30, 100, 1, 200) // from 100° clockwise through south, west to 300°
	for _, x := range []struct {
		name      string
		low, high float64
		start     float64
		off       float64
	}{
		{"one turn, no stop on the way", 0, 360, 100, 0},
		{"begins a turn back", -300, -20, -260, 0},
		{"a turn and a half", -270, 270, -260, 0},
	} {
		p := drive(t, x.low, x.high, 10).Plan(c, Options{})
		near(t, x.name+": start", p.Start.Lower.Degrees(), x.start, 1e-9)
		near(t, x.name+": off track", p.OffTrackSeconds(), x.off, 1e-9)
	}
	// Stops at south: 360° round between, at 10 deg/s and 2 s of changing the rate, while
	// the target goes on: (360-T)/10 + about 2 = T.
	d := drive(t, -180, 180, 10)
	p := d.Plan(c, Options{})
	if len(p.Slews) != 1 || !p.Slews[0].TurnOver {
		t.Fatalf("slews %+v", p.Slews)
	}
	near(t, "turn-over", p.OffTrackSeconds(), (360+22)/11., 0.5)
	// It is put where following is worth least.
	p = d.Plan(c, Options{Worth: func(s float64) float64 { return min(1, math.Abs(s-60)/30) }})
	if s := p.Slews[0]; s.From > 60 || s.To < 80 {
		t.Errorf("the turn-over goes from %g to %g s; south is passed at 80 s, the worth is least at 60 s", s.From, s.To)
	}
	// Where it rests decides in which turn to begin, and the lead whether it gets there.
	d = drive(t, -360, 360, 10)
	for _, from := range []float64{-200, 200} {
		at := station.AxisAngles{Lower: unit.Angle(from) * unit.Degree, Upper: 30 * unit.Degree}
		p := d.Plan(c, Options{From: &at, Lead: 100})
		want := 100.
		if from < 0 {
			want = -260
		}
		near(t, "start from rest", p.Start.Lower.Degrees(), want, 1e-9)
		p = d.Plan(c, Options{From: &at})
		if p.OnTrack.From < 5 || p.OnTrack.From > 20 {
			t.Errorf("without lead on track after %g s", p.OnTrack.From)
		}
		if ready := d.Plan(c, Options{From: &at, Lead: 100}).Ready(at); ready.Seconds() < 5 || ready.Seconds() > 20 {
			t.Errorf("ready after %v", ready)
		}
	}
}

// TestElevationLimits leaves out what lies below the least elevation.
func TestElevationLimits(t *testing.T) {
	d := drive(t, -270, 270, 10, func(m *station.Mount) { m.Upper.Low = 20 * unit.Degree })
	c := circle(30, 0, 1, 140) // 70° to each side of its top at 60°
	p := d.Plan(c, Options{})
	// sin el = cos z cos x = sin 20°
	x := math.Acos(math.Sin(20*degree)/math.Cos(30*degree)) / degree
	near(t, "followed from", p.OnTrack.From, 70-x, 1)
	near(t, "lost", p.LostSeconds(), 140-2*x, 2)
	if p := drive(t, -270, 270, 10, func(m *station.Mount) { m.Upper.Low = 70 * unit.Degree }).Plan(c, Options{}); p.Reached || p.LostSeconds() != 140 {
		t.Errorf("never above 60 deg, but %+v", p)
	}
}

// TestXYKeyhole sends a pass through the zenith, where a Y over X mount is at ease, and
// one along the horizon through the end of its X axis, where it is not.
func TestXYKeyhole(t *testing.T) {
	d := drive(t, -90, 90, 5, func(m *station.Mount) { m.Kind, m.Upper = station.YOverX, axis(-88, 88, 5, 3) })
	if off := d.Plan(circle(0, 40, 0.9, 150), Options{}).OffTrackSeconds(); off != 0 {
		t.Errorf("through the zenith %g s off track", off)
	}
	low := d.Plan(level(3, -30, 0.6, 100), Options{})
	if low.OffTrackSeconds() < 5 {
		t.Errorf("past the end of the X axis, 3 deg up, only %g s off track", low.OffTrackSeconds())
	}
}

// TestPlansKeepTheLimits draws mounts and passes: between the first and the last instant
// on track angles are within the ranges and continuous, rates within the limits.
func TestPlansKeepTheLimits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		low := rapid.Float64Range(-400, 0).Draw(t, "low")
		high := low + rapid.Float64Range(200, 700).Draw(t, "range")
		d := drive(t, low, high, rapid.Float64Range(1, 15).Draw(t, "rate"), func(m *station.Mount) {
			m.TiltAngle = unit.Angle(rapid.SampledFrom([]float64{0, 0, 5, 15}).Draw(t, "tilt")) * unit.Degree
			m.Lower.Acceleration = unit.AngularAcceleration(rapid.Float64Range(0.5, 10).Draw(t, "acceleration") * degree)
			if rapid.Bool().Draw(t, "over") {
				overTop(m)
			}
		})
		o := Options{Tolerance: unit.Angle(rapid.SampledFrom([]float64{0, 0.1, 3}).Draw(t, "tolerance")) * unit.Degree}
		c := drawPass(t)
		for _, p := range append(d.Choices(c, o), d.Plan(c, o)) {
			checkPlan(t, d, p, o)
		}
	})
}

func checkPlan(t *rapid.T, d *Drive, p *Plan, o Options) {
	const dt = 0.05
	m := d.Mount()
	before, _, _ := p.At(p.OnTrack.From)
	for s := p.OnTrack.From + dt; s < p.OnTrack.To; s += dt {
		at, lower, upper := p.At(s)
		if !m.Lower.Holds(at.Lower) || !m.Upper.Holds(at.Upper) {
			t.Fatalf("at %g s the axes stand at %g, %g deg, outside their ranges", s, at.Lower.Degrees(), at.Upper.Degrees())
		}
		if math.Abs(float64(lower)) > float64(m.Lower.Rate)*(1+1e-6) || math.Abs(float64(upper)) > float64(m.Upper.Rate)*(1+1e-6) {
			t.Fatalf("at %g s the axes turn at %g, %g deg/s", s, lower.DegreesPerSecond(), upper.DegreesPerSecond())
		}
		if math.Abs(float64(at.Lower-before.Lower)) > float64(m.Lower.Rate)*dt*1.001+1e-9 || math.Abs(float64(at.Upper-before.Upper)) > float64(m.Upper.Rate)*dt*1.001+1e-9 {
			t.Fatalf("at %g s the axes jump from %v to %v", s, before, at)
		}
		before = at
	}
	for _, l := range p.Lost {
		for _, share := range []float64{0.01, 0.5, 0.99} {
			if s := l.From + share*l.Seconds(); l.Seconds() > 0.1 && p.ErrorAt(s) <= o.Tolerance-1e-3 {
				t.Fatalf("at %g s the error is %g deg, and it is called lost", s, p.ErrorAt(s).Degrees())
			}
		}
	}
	for _, f := range p.Followed() {
		// The ends are found to a millisecond.
		if s := (f.From + f.To) / 2; f.Seconds() > 2e-3 && p.ErrorAt(s) > o.Tolerance+exact {
			t.Fatalf("at %g s the error is %g deg, and it is called followed", s, p.ErrorAt(s).Degrees())
		}
	}
}

// TestFasterAxesNeverFollowLess draws a pass and raises the rate and acceleration of the
// axes: what is off track never grows by more than the search's sampling.
func TestFasterAxesNeverFollowLess(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := drawPass(t)
		rate := rapid.Float64Range(0.5, 10).Draw(t, "rate")
		times := rapid.Float64Range(1, 3).Draw(t, "times")
		before := math.Inf(1)
		for range 3 {
			d := drive(t, -270, 270, rate, func(m *station.Mount) { m.Lower.Acceleration *= unit.AngularAcceleration(rate / 5) })
			off := d.Plan(c, Options{}).OffTrackSeconds()
			if off > before+2*coarseStep {
				t.Fatalf("at %g deg/s %g s off track, before %g s", rate, off, before)
			}
			before, rate = off, rate*times
		}
	})
}

// TestSearchAgainstAllSlews tries every slew between two samples of every two ways: none
// keeps more on track than the search's course.
func TestSearchAgainstAllSlews(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drive(t, -180, rapid.Float64Range(100, 300).Draw(t, "high"), rapid.Float64Range(3, 12).Draw(t, "rate"))
		c := circle(rapid.Float64Range(0.1, 20).Draw(t, "from zenith"), rapid.Float64Range(0, 360).Draw(t, "azimuth"), 0.8, 60)
		s := d.prepare(c, Options{})
		w, i, ok := s.run(-1)
		if !ok {
			t.Skip()
		}
		best := s.most[w][i]
		n := len(s.at)
		for v := range s.ways {
			for w := range s.ways {
				for k := 0; k < n; k += 7 {
					for j := k + 1; j < n; j += 7 {
						if !s.holds[v][k] || !s.holds[w][j] || !s.slews(v, k, w, j) {
							continue
						}
						if sum := s.worthAlong(v, k, -1) + s.worthAlong(w, j, 1); sum > best+1e-6 {
							t.Fatalf("from way %d at %g s to way %d at %g s: %g s, the search has %g s", v, s.at[k], w, s.at[j], sum, best)
						}
					}
				}
			}
		}
	})
}

// worthAlong is how much is followed without a break from a sample on.
func (s *search) worthAlong(w, i, dir int) float64 {
	j := s.run1(w, i, dir)
	return s.worthBetween(s.at[min(i, j)], s.at[max(i, j)])
}
