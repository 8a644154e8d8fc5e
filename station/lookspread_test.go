package station

import (
	"math"
	"testing"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// overhead is a spacecraft 500 km over a site on the equator, flying north on a
// circular orbit.
func overhead(t *testing.T) (Frame, orbit.State) {
	t.Helper()
	site := Site{Name: "equator"}
	r := 6378137.0 + 500e3
	return site.Frame(), orbit.State{Position: orbit.Vec3{X: r}, Velocity: orbit.Vec3{Y: -7.292115e-5 * r, Z: math.Sqrt(earthGravity / r)}}
}

// Closed form: 3 km at right angles to a sight of 500 km are atan(3/500) = 0.3438 deg,
// and twice that over the sum of squares of two axes.
func TestLookSpreadOverhead(t *testing.T) {
	f, state := overhead(t)
	l := f.LookSpread(state, orbit.Spread{Along: 3 * unit.Kilometre})
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"along, deg", l.Along.Degrees() * math.Cos(math.Atan2(7.292115e-5*6878137, 7613)), 0.34378},
		{"total, deg", l.Total().Degrees(), 0.34378},
		{"major, deg", l.Major.Degrees(), 0.34378},
		{"minor, deg", l.Minor.Degrees(), 0},
	} {
		// The apparent motion is not quite the orbit's: the Earth turns 0.5 km/s eastward. The
		// total does not depend on it.
		tolerance := 1e-4
		if c.name == "along, deg" {
			tolerance = 2e-3
		}
		if math.Abs(c.got-c.want) > tolerance {
			t.Errorf("%s: got %.5f, want %.5f, tolerance %g", c.name, c.got, c.want, tolerance)
		}
	}
	if l.Range > 1e-6 {
		t.Errorf("range: got %v m, want 0: overhead the sight is at right angles to the track", l.Range)
	}
	// Radially: all in the range, nothing in the direction.
	l = f.LookSpread(state, orbit.Spread{Radial: 1 * unit.Kilometre})
	if math.Abs(l.Range.Metres()-1000) > 1e-6 || l.Total() > 1e-12 {
		t.Errorf("radially: got %v m in range and %v rad in direction, want 1000 m and 0", l.Range.Metres(), l.Total())
	}
	// A published beam: 3.7 m at 8.2 GHz is 0.7 deg wide; one standard deviation of 3 km
	// takes it to half its width.
	w := DishBeamwidth(3.7, 8.2*unit.Gigahertz, DefaultBeamwidthFactor)
	if math.Abs(w.Degrees()-0.7) > 0.01 {
		t.Errorf("beamwidth of 3.7 m at 8.2 GHz: got %.4f deg, want 0.7 deg", w.Degrees())
	}
}

// Doppler of a spacecraft off along the track, closed form: overhead the range rate
// passes 0 and changes by ρ̈ = (v² - g ρ ...)/ρ; here by central differences of the same
// circular orbit flown earlier and later over an Earth that does not turn back.
func TestRangeRateSpreadAlong(t *testing.T) {
	f, _ := overhead(t)
	r := 6378137.0 + 500e3
	n := math.Sqrt(earthGravity / (r * r * r))
	const spin = 7.292115e-5
	at := func(phase, lead float64) orbit.State {
		// An orbit inclined by 50 deg; the Earth has turned by spin times the time.
		u := phase + lead
		sinI, cosI := math.Sincos(50 * math.Pi / 180)
		sin, cos := math.Sincos(u)
		p := orbit.Vec3{X: r * cos, Y: r * sin * cosI, Z: r * sin * sinI}
		v := orbit.Vec3{X: -n * r * sin, Y: n * r * cos * cosI, Z: n * r * cos * sinI}
		s, c := math.Sincos(spin * phase / n)
		turn := func(a orbit.Vec3) orbit.Vec3 { return orbit.Vec3{X: c*a.X + s*a.Y, Y: c*a.Y - s*a.X, Z: a.Z} }
		q := turn(p)
		return orbit.State{Position: q, Velocity: turn(v).Sub(orbit.Vec3{Z: spin}.Cross(q))}
	}
	for _, phase := range []float64{-0.25, -0.05, 0.01, 0.12, 0.3} {
		const off = 100.0 // m
		before, after := f.Look(at(phase, -off/r)), f.Look(at(phase, off/r))
		want := math.Abs(float64(after.RangeRate-before.RangeRate)) / 2
		got := float64(f.LookSpread(at(phase, 0), orbit.Spread{Along: off}).RangeRate)
		if math.Abs(got-want) > 1e-4*want {
			t.Errorf("phase %g rad: got %.6f m/s, want %.6f m/s", phase, got, want)
		}
	}
}

// The distribution of Rayleigh where both axes are alike, and that of one normal
// number where the other is 0: tables of the standard normal distribution give 1.95996
// at 95 % two-sided. Between them against draws on a fine grid of angles.
func TestErrorQuantile(t *testing.T) {
	for _, p := range []float64{0.5, 0.95, 0.99} {
		q, err := NewErrorQuantile(p)
		if err != nil {
			t.Fatal(err)
		}
		if got, want := q.Of(1, 1).Radians(), math.Sqrt(-2*math.Log(1-p)); math.Abs(got-want) > 1e-6 {
			t.Errorf("%g, alike: got %.7f, want %.7f", p, got, want)
		}
		if got, want := q.Of(0, 1).Radians(), math.Sqrt2*math.Erfinv(p); math.Abs(got-want) > 1e-6 {
			t.Errorf("%g, one axis: got %.7f, want %.7f", p, got, want)
		}
		for _, minor := range []float64{0.03, 0.1, 0.37, 0.8} {
			// In polar form the radius leaves: 1 - P = mean over the angle of
			// exp(-r²/2 g)/(g σ1 σ2), g = cos²/σ1² + sin²/σ2².
			r := q.Of(1, unit.Angle(minor)).Radians()
			beyond := 0.0
			const n = 200000
			for i := range n {
				s, c := math.Sincos(2 * math.Pi * (float64(i) + 0.5) / n)
				g := c*c + s*s/(minor*minor)
				beyond += math.Exp(-r*r/2*g) / (g * minor) / n
			}
			if math.Abs(1-beyond-p) > 5e-4*(1-p)+2e-5 {
				t.Errorf("%g, minor %g: %.6f of the errors stay below the quantile", p, minor, 1-beyond)
			}
		}
	}
	if _, err := NewErrorQuantile(1); err == nil {
		t.Error("a probability of 1 was taken")
	}
}

func BenchmarkLookSpread(b *testing.B) {
	site := Site{Name: "equator"}
	f := site.Frame()
	state := orbit.State{Position: orbit.Vec3{X: 6.878e6, Y: 4e5, Z: 3e5}, Velocity: orbit.Vec3{Y: 100, Z: 7600}}
	spread := orbit.Spread{Radial: 300, Along: 2000, Across: 400}
	b.ReportAllocs()
	for b.Loop() {
		_ = f.LookSpread(state, spread)
	}
}
