package mount

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestXYAngles holds the angles of a Y over X mount to the closed forms of that mount
// (X axis north-south: tan X = sin az / tan el, sin Y = cos el cos az; X axis east-west:
// tan X = -cos az / tan el, sin Y = cos el sin az; spherical trigonometry, common practice).
func TestXYAngles(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		az, el := rapid.Float64Range(0, 360).Draw(t, "az")*degree, rapid.Float64Range(0.5, 89.5).Draw(t, "el")*degree
		for _, c := range []struct{ axisDeg, x, y float64 }{
			{0, math.Atan2(math.Sin(az), math.Tan(el)), math.Asin(math.Cos(el) * math.Cos(az))},
			{90, math.Atan2(-math.Cos(az), math.Tan(el)), math.Asin(math.Cos(el) * math.Sin(az))},
		} {
			m := station.Mount{Kind: station.YOverX, XAxisAzimuth: unit.Angle(c.axisDeg) * unit.Degree}
			f := newFrame(&m)
			a := f.angles(vector(station.Direction{Azimuth: unit.Angle(az), Elevation: unit.Angle(el)}))
			if math.Abs(float64(a.Lower)-c.x) > 1e-9 || math.Abs(float64(a.Upper)-c.y) > 1e-7 {
				t.Fatalf("axis %g deg, az %g el %g rad: got %v, want X %g Y %g", c.axisDeg, az, el, a, c.x, c.y)
			}
		}
	})
}

// TestTiltMovesThePole leans a mount: its keyhole stands where it leans to, and what
// lies across the lean stays level.
func TestTiltMovesThePole(t *testing.T) {
	m := station.Mount{TiltAzimuth: 70 * unit.Degree, TiltAngle: 20 * unit.Degree}
	f := newFrame(&m)
	pole := directionOf(f.pole)
	near(t, "azimuth of the pole", pole.Azimuth.Degrees(), 70, 1e-9)
	near(t, "elevation of the pole", pole.Elevation.Degrees(), 70, 1e-9)
	a := f.angles(vector(station.Direction{Azimuth: 160 * unit.Degree}))
	near(t, "across the lean: azimuth", a.Lower.Degrees(), 160, 1e-9)
	near(t, "across the lean: elevation", a.Upper.Degrees(), 0, 1e-9)
	a = f.angles(vector(station.Direction{Azimuth: 70 * unit.Degree, Elevation: 30 * unit.Degree}))
	near(t, "along the lean: elevation", a.Upper.Degrees(), 50, 1e-9) // 60 deg from zenith, 40 from the pole
	near(t, "along the lean: azimuth", a.Lower.Degrees(), 70, 1e-9)
}

// TestAnglesGoBothWays turns axis angles into a direction and back, for both kinds and
// any tilt, and the rates into differences.
func TestAnglesGoBothWays(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := station.Mount{
			Kind:         rapid.SampledFrom([]station.MountKind{station.ElevationOverAzimuth, station.YOverX}).Draw(t, "kind"),
			XAxisAzimuth: unit.Angle(rapid.Float64Range(-6, 6).Draw(t, "x axis")),
			TiltAzimuth:  unit.Angle(rapid.Float64Range(-6, 6).Draw(t, "tilt azimuth")),
			TiltAngle:    unit.Angle(rapid.Float64Range(0, 1.5).Draw(t, "tilt")),
		}
		f := newFrame(&m)
		want := station.AxisAngles{Lower: unit.Angle(rapid.Float64Range(-3.1, 3.1).Draw(t, "lower")), Upper: unit.Angle(rapid.Float64Range(-1.5, 1.5).Draw(t, "upper"))}
		d := f.direction(want)
		got := f.angles(d)
		if math.Abs(float64(got.Lower-want.Lower)) > 1e-9 || math.Abs(float64(got.Upper-want.Upper)) > 1e-9 {
			t.Fatalf("%v came back as %v", want, got)
		}
		over := station.AxisAngles{Lower: want.Lower + math.Pi, Upper: math.Pi - want.Upper}
		if off := between(f.direction(over), d); off > 1e-12 {
			t.Fatalf("over the top %v looks %g rad elsewhere", over, off)
		}
		v := orbit.Vec3{X: 0.3, Y: -0.2, Z: 0.4}
		v = v.Sub(d.Scale(v.Dot(d)))
		lower, upper := f.rates(d, v)
		const h = 1e-6
		a, b := f.angles(d.Sub(v.Scale(h)).Unit()), f.angles(d.Add(v.Scale(h)).Unit())
		if math.Abs(float64(b.Lower-a.Lower)/(2*h)-lower) > 1e-5*(1+math.Abs(lower)/math.Cos(float64(want.Upper))) || math.Abs(float64(b.Upper-a.Upper)/(2*h)-upper) > 1e-5 {
			t.Fatalf("rates %g %g, differences %g %g", lower, upper, float64(b.Lower-a.Lower)/(2*h), float64(b.Upper-a.Upper)/(2*h))
		}
	})
}

// TestRatesAsLookAngles holds the rates of a level mount to those of the look angles,
// and at the culmination to the closed form ω/cos el.
func TestRatesAsLookAngles(t *testing.T) {
	site := station.Site{Latitude: 58 * unit.Degree, Longitude: -6 * unit.Degree}
	f := site.Frame()
	at := f.Origin.Add(f.Up.Scale(500e3)).Add(f.East.Scale(30e3)).Add(f.North.Scale(10e3))
	s := orbit.State{Position: at, Velocity: f.North.Scale(7500).Add(f.East.Scale(-1000))}
	look := f.Look(s)
	d, v := sight(&f, s)
	m := station.Mount{}
	mf := newFrame(&m)
	lower, upper := mf.rates(d, v)
	near(t, "azimuth rate", lower, float64(look.AzimuthRate), 1e-12)
	near(t, "elevation rate", upper, float64(look.ElevationRate), 1e-12)

	c := circle(2, 30, 0.8, 200)
	d, v = c.at(100)
	lower, upper = mf.rates(d, v)
	near(t, "azimuth rate at the culmination", lower, float64(LowerRate(unit.AngularRate(0.8*degree), 88*unit.Degree)), 1e-12)
	near(t, "elevation rate at the culmination", upper, 0, 1e-12)
}

// TestRefractedCourse holds the apparent course to the refraction itself and its rate to
// differences.
func TestRefractedCourse(t *testing.T) {
	r, err := station.NewRefraction(0)
	if err != nil {
		t.Fatal(err)
	}
	for _, el := range []float64{1, 5, 30, 80, 89.9} {
		d := vector(station.Direction{Azimuth: 1, Elevation: unit.Angle(el) * unit.Degree})
		v := orbit.Vec3{X: 0.003, Y: 0.01, Z: -0.004}
		v = v.Sub(d.Scale(d.Dot(v)))
		got, rate := bent(d, v, r)
		want, _ := r.Apparent(unit.Angle(el) * unit.Degree)
		near(t, "apparent elevation", directionOf(got).Elevation.Degrees(), want.Degrees(), 1e-9)
		near(t, "azimuth", directionOf(got).Azimuth.Radians(), 1, 1e-12)
		const h = 1e-3
		a, _ := bent(d.Sub(v.Scale(h)).Unit(), v, r)
		b, _ := bent(d.Add(v.Scale(h)).Unit(), v, r)
		near(t, "rate", b.Sub(a).Scale(1/(2*h)).Sub(rate).Norm(), 0, 2e-5)
	}
}
