package orbit

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"
)

// tabulated returns the states of an element set as a segment, every step from one
// time to another in s after the start.
func tabulated(t testing.TB, el Elements, f Frame, start time.Time, from, to, step float64, how Interpolation, earth ...EarthOrientation) TrajectorySegment {
	t.Helper()
	o := EarthOrientation{}
	if len(earth) > 0 {
		o = earth[0]
	}
	e, err := NewEphemeris(el, start, start.Add(time.Duration(to+1)*time.Second), o)
	if err != nil {
		t.Fatal(err)
	}
	k := turner(t, o)
	s := TrajectorySegment{Frame: f, Interpolation: how}
	for at := from; at <= to; at += step {
		now := e.Time(at)
		// The derivative of the positions, as a file of a numerical orbit holds it.
		pos, vel := e.TrackAt(at)
		p, v := k.FromEarthFixed(f, State{pos, vel}, now)
		s.States = append(s.States, TimedState{Time: now, Position: p, Velocity: v})
	}
	s.From, s.To = s.States[0].Time, s.States[len(s.States)-1].Time
	return s
}

func lowOrbit(t testing.TB) Elements {
	return twoLines(t, "1 28057U 03049A   06177.78615833  .00000060  00000-0  35940-4 0  1836",
		"2 28057  98.4283 247.6961 0000884  88.1964 271.9322 14.35478080140550")
}

// An orbit through its own states every minute is the orbit: to the error of the
// polynomial, in any frame. Lagrange of degree 7 at 60 s leaves (180 s ω)^8/8! of the
// radius and less; SGP4 was interpolated itself, 0.3 m.
func TestTrajectoryIsTheOrbit(t *testing.T) {
	el := lowOrbit(t)
	start := el.Epoch.Add(time.Hour)
	want, err := NewEphemeris(el, start, start.Add(24*time.Hour), EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range frameColumns {
		for _, how := range []Interpolation{{Hermite, 7}, {Lagrange, 7}, {Hermite, 3}, {Lagrange, 9}, {Hermite, 11}} {
			tr := &Trajectory{Name: "it", Segments: []TrajectorySegment{tabulated(t, el, f, start, 0, 86400, 60, how)}}
			var got Ephemeris
			if err := got.Follow(tr, Shift{}, start, start.Add(24*time.Hour), EarthOrientation{}); err != nil {
				t.Fatal(err)
			}
			worst, worstV := 0.0, 0.0
			for s := 0.0; s <= 86400; s += 13.7 {
				a, b := got.StateAt(s), want.StateAt(s)
				p, _ := want.TrackAt(s)
				worst = math.Max(worst, a.Position.Sub(p).Norm())
				worstV = math.Max(worstV, a.Velocity.Sub(b.Velocity).Norm())
			}
			// The velocity: of the positions here, SGP4's there, 5 mm/s apart.
			if worst > 0.5 || worstV > 0.03 || got.Bend() > closeEnough {
				t.Errorf("%v, %v: %.3f m, %.4f m/s, bend %.3f m, step %g s", f, how, worst, worstV, got.Bend().Metres(), got.Step())
			}
		}
	}
}

func TestTrajectoryKeepsItsGaps(t *testing.T) {
	el := lowOrbit(t)
	start := el.Epoch
	seg := func(from, to float64) TrajectorySegment {
		return tabulated(t, el, GCRF, start, from, to, 60, Interpolation{Hermite, 7})
	}
	a, b, c := seg(600, 6000), seg(6000, 12000), seg(18000, 24000)
	c.From, c.To = c.From.Add(10*time.Minute), c.To.Add(-10*time.Minute) // usable
	tr := &Trajectory{Name: "gapped", Segments: []TrajectorySegment{a, b, c}}
	var e Ephemeris
	if err := e.Follow(tr, Shift{}, start, start.Add(10*time.Hour), EarthOrientation{}); err != nil {
		t.Fatal(err)
	}
	if got, want := e.Reference(), start.Add(600*time.Second).UTC(); !got.Equal(want) {
		t.Errorf("reference %v, want %v", got, want)
	}
	spans := e.Spans()
	if len(spans) != 2 || spans[0] != (Span{0, 11400}) || spans[1] != (Span{18000, 22800}) || e.Span() != 22800 {
		t.Errorf("spans %v to %g", spans, e.Span())
	}
	var gaps []string
	for _, g := range e.Gaps() {
		gaps = append(gaps, g.To.Sub(g.From).String()+" "+g.Reason)
	}
	if got, want := strings.Join(gaps, "; "), "10m0s the ephemeris begins only then; 1h50m0s there is a gap in the ephemeris; 3h30m0s the ephemeris has ended"; got != want {
		t.Errorf("gaps %q, want %q", got, want)
	}
	want, err := NewEphemeris(el, e.Reference(), start.Add(10*time.Hour), EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	for s := 0.0; s <= e.Span(); s += 7.3 {
		at := e.Time(s)
		st, err := e.At(at)
		in := e.Covers(s)
		if in != (s <= 11400 || s >= 18000) || in != (err == nil) {
			t.Fatalf("%g s: covered %v, error %v", s, in, err)
		}
		var out *SpanError
		if !in {
			if !errors.As(err, &out) || len(out.Spans) != 2 {
				t.Fatalf("in a gap: %v", err)
			}
			continue
		}
		if d := st.Position.Sub(want.PositionAt(s)).Norm(); d > 0.5 {
			t.Fatalf("%g s: %.2f m off", s, d)
		}
	}
	// Wholly in the gap, and beyond.
	for _, h := range []float64{3.6, 9} {
		from := start.Add(time.Duration(h * float64(time.Hour)))
		err := e.Follow(tr, Shift{}, from, from.Add(20*time.Minute), EarthOrientation{})
		var out *SpanError
		if !errors.As(err, &out) || len(out.Spans) != 2 || !strings.Contains(err.Error(), "gapped") {
			t.Errorf("at %g h: %v", h, err)
		}
	}
}

// Late: the orbit stands still in space. Slipped: the track over the ground is the same.
// Elements and trajectories are moved alike.
func TestShifts(t *testing.T) {
	el := lowOrbit(t)
	start := el.Epoch
	earth := EarthOrientation{UT1MinusUTC: -300 * time.Millisecond}
	plain, err := NewEphemeris(el, start, start.Add(12*time.Hour), earth)
	if err != nil {
		t.Fatal(err)
	}
	k := turner(t, earth)
	tr := &Trajectory{Segments: []TrajectorySegment{tabulated(t, el, EarthFixed, start, 0, 43200, 60, Interpolation{Hermite, 7}, earth)}}
	inertial := &Trajectory{Segments: []TrajectorySegment{tabulated(t, el, GCRF, start, 0, 43200, 60, Interpolation{Hermite, 7})}}
	for _, shift := range []Shift{{Late: 95 * time.Second}, {Slip: 11 * time.Minute}, {Late: -40 * time.Second, Slip: -25 * time.Minute}} {
		from := start.Add(2 * time.Hour)
		moved, err := NewEphemeris(shift.Of(el, earth), from, from.Add(6*time.Hour), earth)
		if err != nil {
			t.Fatal(err)
		}
		var followed Ephemeris
		if err := followed.Follow(tr, shift, from, from.Add(6*time.Hour), earth); err != nil {
			t.Fatal(err)
		}
		for s := 0.0; s < 6*3600; s += 101 {
			at := from.Add(time.Duration(s * float64(time.Second)))
			old := at.Add(-shift.Late - shift.Slip)
			st, err := plain.At(old)
			if err != nil {
				t.Fatal(err)
			}
			// From the Earth at the old time into space, and back where the slip has turned it.
			p, v := k.FromEarthFixed(TEME, st, old)
			want := k.ToEarthFixed(TEME, p, v, at.Add(-shift.Slip))
			if d := moved.PositionAt(s).Sub(want.Position).Norm(); d > 0.5 {
				t.Fatalf("%+v at %g s: elements %.3f m off", shift, s, d)
			}
			if d := followed.PositionAt(s).Sub(want.Position).Norm(); d > 0.5 {
				t.Fatalf("%+v at %g s: trajectory %.3f m off", shift, s, d)
			}
		}
		if shift.Late == 0 {
			continue
		}
		// A file in an inertial frame, read with the same UT1, is moved alike.
		var other Ephemeris
		if err := other.Follow(inertial, shift, from, from.Add(time.Hour), EarthOrientation{}); err != nil {
			t.Fatal(err)
		}
		plainly, err := NewEphemeris(shift.Of(el, EarthOrientation{}), from, from.Add(time.Hour), EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		for s := 0.0; s < 3600; s += 101 {
			if d := other.PositionAt(s).Sub(plainly.PositionAt(s)).Norm(); d > 0.5 {
				t.Fatalf("%+v at %g s, inertial: %.3f m off", shift, s, d)
			}
		}
	}
}

// Straight lines bend at their states; what is left is told.
func TestLinearTellsItsBend(t *testing.T) {
	el := lowOrbit(t)
	tr := &Trajectory{Segments: []TrajectorySegment{tabulated(t, el, TEME, el.Epoch, 0, 3600, 60, Interpolation{Linear, 1})}}
	var e Ephemeris
	if err := e.Follow(tr, Shift{}, el.Epoch, el.Epoch.Add(time.Hour), EarthOrientation{}); err != nil {
		t.Fatal(err)
	}
	if e.Bend() < 1 || e.BendNote() == "" {
		t.Errorf("bend %v, note %q", e.Bend(), e.BendNote())
	}
	// Between the states a line stays 8 m/s² × (60 s)²/8 = 3.6 km inside the orbit.
	p, err := NewEphemeris(el, el.Epoch, el.Epoch.Add(time.Hour), EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	if d := p.PositionAt(1830).Norm() - e.PositionAt(1830).Norm(); d < 3000 || d > 4000 {
		t.Errorf("%.0f m inside the orbit midway, want 3.6 km", d)
	}
}

func BenchmarkFollowWeek(b *testing.B) {
	el := lowOrbit(b)
	tr := &Trajectory{Segments: []TrajectorySegment{tabulated(b, el, GCRF, el.Epoch, 0, 7*86400, 60, Interpolation{Hermite, 7})}}
	var e Ephemeris
	b.ReportAllocs()
	for b.Loop() {
		if err := e.Follow(tr, Shift{}, el.Epoch, el.Epoch.Add(7*24*time.Hour), EarthOrientation{}); err != nil {
			b.Fatal(err)
		}
	}
}
