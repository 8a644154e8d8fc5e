package station

import (
	"errors"
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

func site(lat, lon, alt float64) *Site {
	return &Site{Name: "Test Hill", Latitude: unit.Angle(lat) * unit.Degree, Longitude: unit.Angle(lon) * unit.Degree, Altitude: unit.Length(alt)}
}

func TestFrameOrigin(t *testing.T) {
	const b = EquatorialRadius * (1 - Flattening) // 6356752.3142 m in NIMA TR8350.2 table 3.3
	for _, c := range []struct {
		source string
		site   *Site
		want   orbit.Vec3
		tol    float64
	}{
		{"equator on the prime meridian: the semi-major axis, TR8350.2", site(0, 0, 0), orbit.Vec3{X: 6378137}, 1e-6},
		{"north pole: the semi-minor axis, TR8350.2, table 3.3, to its last digit", site(90, 40, 100), orbit.Vec3{Z: 6356752.3142 + 100}, 5e-5},
		{"south pole", site(-90, 0, 0), orbit.Vec3{Z: -b}, 1e-6},
		{"90° west", site(0, -90, 1000), orbit.Vec3{Y: -6379137}, 1e-6},
		{"45° N: N = a/sqrt(1-e²/2), worked with 20 digits apart from the code", site(45, 0, 0), orbit.Vec3{X: 4517590.878849, Z: 4487348.408866}, 2e-6},
	} {
		if d := c.site.Frame().Origin.Sub(c.want).Norm(); d > c.tol {
			t.Errorf("%s: got %.6f, want %.6f, %g m apart", c.source, c.site.Frame().Origin, c.want, d)
		}
	}
}

func TestFrameIsRightHanded(t *testing.T) {
	for _, s := range []*Site{site(0, 0, 0), site(58.4, -6.1, 42), site(90, 0, 0), site(-90, 17, 2800), site(-33, 180, 0)} {
		f := s.Frame()
		for name, v := range map[string]float64{
			"east·north": f.East.Dot(f.North), "north·up": f.North.Dot(f.Up), "up·east": f.Up.Dot(f.East),
			"|east|-1": f.East.Norm() - 1, "|up|-1": f.Up.Norm() - 1, "east×north-up": f.East.Cross(f.North).Sub(f.Up).Norm(),
		} {
			if math.Abs(v) > 1e-15 {
				t.Errorf("%v: %s is %g", s.Latitude.Degrees(), name, v)
			}
		}
	}
}

// up places a point by east, north and up from the site, in m.
func up(f Frame, e, n, u float64) orbit.Vec3 {
	return f.Origin.Add(f.East.Scale(e)).Add(f.North.Scale(n)).Add(f.Up.Scale(u))
}

func TestLookOfKnownDirections(t *testing.T) {
	s := site(58.4, -6.1, 42)
	f := s.Frame()
	for _, c := range []struct {
		name                                     string
		e, n, u                                  float64
		ve, vn, vu                               float64
		az, el, rng, rate, azRateDegS, elRateDeg float64
	}{
		// By plane trigonometry, worked by hand.
		{"due north on the horizon, receding", 0, 1e6, 0, 0, 1000, 0, 0, 0, 1e6, 1000, 0, 0},
		{"due north, moving east", 0, 1e6, 0, 1e4, 0, 0, 0, 0, 1e6, 0, 0.01 * 180 / math.Pi, 0},
		{"due east at 45°, rising", 1e6, 0, 1e6, 0, 0, 2000, 90, 45, 1e6 * math.Sqrt2, 2000 / math.Sqrt2, 0, 1e-3 * 180 / math.Pi},
		{"west, moving north", -1e6, 0, 0, 0, 1e4, 0, 270, 0, 1e6, 0, 0.01 * 180 / math.Pi, 0},
		{"zenith, moving", 0, 0, 5e5, 3000, 4000, 100, 0, 90, 5e5, 100, 0, -0.01 * 180 / math.Pi},
		{"nadir, moving", 0, 0, -5e5, 3000, 4000, 100, 0, -90, 5e5, -100, 0, 0.01 * 180 / math.Pi},
		{"at the site", 0, 0, 0, 3000, 4000, 0, 0, 0, 0, 5000, 0, 0},
	} {
		v := f.East.Scale(c.ve).Add(f.North.Scale(c.vn)).Add(f.Up.Scale(c.vu))
		l := f.Look(orbit.State{Position: up(f, c.e, c.n, c.u), Velocity: v})
		// 1e-8 m of rounding in the Earth-fixed position bounds all differences.
		for what, d := range map[string]float64{
			"azimuth":        math.Remainder(l.Azimuth.Degrees()-c.az, 360),
			"elevation":      l.Elevation.Degrees() - c.el,
			"range":          (l.Range.Metres() - c.rng) / 1e6,
			"range rate":     float64(l.RangeRate) - c.rate,
			"azimuth rate":   l.AzimuthRate.DegreesPerSecond() - c.azRateDegS,
			"elevation rate": l.ElevationRate.DegreesPerSecond() - c.elRateDeg,
		} {
			if !(math.Abs(d) < 1e-7) && !(c.name == "at the site" && what != "range") {
				t.Errorf("%s: %s is off by %g", c.name, what, d)
			}
		}
	}
}

// Rates must be the derivatives of the angles: central differences of a straight
// motion over ±1 ms, whose own error is under 1e-9 of the rates here.
func TestRatesAreDerivatives(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := site(rapid.Float64Range(-90, 90).Draw(t, "lat"), rapid.Float64Range(-180, 180).Draw(t, "lon"), rapid.Float64Range(-500, 9000).Draw(t, "alt"))
		f := s.Frame()
		component := rapid.Float64Range(-3e6, 3e6)
		p := up(f, component.Draw(t, "e"), component.Draw(t, "n"), component.Draw(t, "u"))
		speed := rapid.Float64Range(-8000, 8000)
		v := orbit.Vec3{X: speed.Draw(t, "vx"), Y: speed.Draw(t, "vy"), Z: speed.Draw(t, "vz")}
		l := f.Look(orbit.State{Position: p, Velocity: v})
		if l.Range < 1e5 || math.Cos(l.Elevation.Radians()) < 0.05 {
			t.Skip("too near to difference")
		}
		const h = 1e-3
		a, b := f.Look(orbit.State{Position: p.Sub(v.Scale(h))}), f.Look(orbit.State{Position: p.Add(v.Scale(h))})
		diff := func(x, y unit.Angle) float64 { return math.Remainder((y-x).Radians(), 2*math.Pi) / (2 * h) }
		if d := diff(a.Azimuth, b.Azimuth) - float64(l.AzimuthRate); math.Abs(d) > 1e-6 {
			t.Errorf("azimuth rate %g rad/s is %g off the difference", l.AzimuthRate, d)
		}
		if d := diff(a.Elevation, b.Elevation) - float64(l.ElevationRate); math.Abs(d) > 1e-6 {
			t.Errorf("elevation rate %g rad/s is %g off the difference", l.ElevationRate, d)
		}
		if d := float64(b.Range-a.Range)/(2*h) - float64(l.RangeRate); math.Abs(d) > 1e-3 {
			t.Errorf("range rate %g m/s is %g off the difference", l.RangeRate, d)
		}
		if d := f.SinElevation(p) - math.Sin(l.Elevation.Radians()); math.Abs(d) > 1e-12 {
			t.Errorf("sine of the elevation is off by %g", d)
		}
	})
}

func TestSiteValidate(t *testing.T) {
	for _, s := range []*Site{site(90, 180, 0), site(-90, -180, -430), site(0, 0, 9000)} {
		if err := s.Validate(); err != nil {
			t.Errorf("%v: %v", s, err)
		}
	}
	bad := func(change func(*Site)) *Site { s := site(1, 2, 3); change(s); return s }
	nan := unit.Angle(math.NaN())
	for name, s := range map[string]*Site{
		"latitude":          bad(func(s *Site) { s.Latitude = 91 * unit.Degree }),
		"longitude":         bad(func(s *Site) { s.Longitude = 181 * unit.Degree }),
		"altitude":          bad(func(s *Site) { s.Altitude = 10000 }),
		"geoid height":      bad(func(s *Site) { s.GeoidHeight = 130 }),
		"minimum elevation": bad(func(s *Site) { s.MinimumElevation = nan }),
		"merge gap":         bad(func(s *Site) { s.MergeGap = -time.Second }),
	} {
		var re *unit.RangeError
		if err := s.Validate(); !errors.As(err, &re) || re.Quantity != name {
			t.Errorf("%s: got %v", name, err)
		}
	}
	err := bad(func(s *Site) { s.Longitude = 190 * unit.Degree }).Validate()
	want := `station "Test Hill": longitude: 190 deg is not allowed; it must be -180 to 180 deg; give degrees east of Greenwich; west is negative`
	if err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
}

func BenchmarkSinElevation(b *testing.B) {
	f := site(58.4, -6.1, 42).Frame()
	p := up(f, 1e6, 1e6, 1e6)
	b.ReportAllocs()
	for b.Loop() {
		f.SinElevation(p)
	}
}

func BenchmarkLook(b *testing.B) {
	f := site(58.4, -6.1, 42).Frame()
	s := orbit.State{Position: up(f, 1e6, 1e6, 1e6), Velocity: orbit.Vec3{X: 7000}}
	b.ReportAllocs()
	for b.Loop() {
		f.Look(s)
	}
}
