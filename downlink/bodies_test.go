package downlink

import (
	"math"
	"testing"
	"time"

	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func sunLink(t testing.TB, bodies *Bodies, kind station.AntennaKind) (*Link, *station.Frame) {
	t.Helper()
	site := station.Site{Name: "hill", Latitude: 50 * unit.Degree, Longitude: 5 * unit.Degree}
	frame := site.Frame()
	sun := propagation.Disc{Brightness: 12000, Diameter: propagation.SunDiameter}
	a := &station.Antenna{Name: "dish", Kind: kind, Gain: station.Constant(44), Beamwidth: 1 * unit.Degree, Boresight: station.Direction{Elevation: 90 * unit.Degree},
		Noise: &station.Noise{AntennaTemperature: station.Constant(50), Chain: []station.Stage{{Name: "amplifier", Gain: 40, NoiseTemperature: kelvinp(60)}}}}
	l, err := NewLink(LinkSpec{Transmitter: Transmitter{Name: "beacon", Frequency: 8.2 * unit.Gigahertz, EIRP: levelp(10)},
		Frame: &frame, Antenna: a, Bodies: bodies, Sun: &sun, Moon: &propagation.Moon})
	if err != nil {
		t.Fatal(err)
	}
	return l, &frame
}

// towards returns where a body stands in the sky of a frame.
func towards(f *station.Frame, body orbit.Vec3) Geometry {
	az, el, _ := f.Direction(body)
	return Geometry{Azimuth: az, Elevation: el, Range: 1000 * unit.Kilometre}
}

// A beam at the Sun takes in what AntennaRise says, half a beamwidth beside it about
// half, and nothing at night; the angle is the one that the directions give.
func TestSunInTheBeam(t *testing.T) {
	noon := time.Date(2026, 6, 21, 11, 45, 0, 0, time.UTC)
	bodies := NewBodies(noon.Add(-time.Hour), noon.Add(24*time.Hour), orbit.EarthOrientation{})
	l, frame := sunLink(t, bodies, station.Directive)
	g := towards(frame, orbit.SunPosition(noon, orbit.EarthOrientation{}))
	g.Time = noon
	part := func(g Geometry, name string) (float64, *Budget) {
		b, err := l.At(g)
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range b.NoiseParts {
			if p.Name == name {
				return p.Temperature.Kelvins(), b
			}
		}
		t.Fatalf("no part %q in %+v", name, b.NoiseParts)
		return 0, nil
	}
	want, err := propagation.AntennaRise(*l.spec.Sun, 44, 1*unit.Degree, 0)
	if err != nil {
		t.Fatal(err)
	}
	got, b := part(g, "Sun")
	if math.Abs(got/want.Kelvins()-1) > 1e-3 || b.Sun > 0.001*unit.Degree {
		t.Errorf("on the Sun: %g K at %v deg off, want %v", got, b.Sun.Degrees(), want)
	}
	beside := g
	beside.Elevation += 0.5 * unit.Degree
	want, err = propagation.AntennaRise(*l.spec.Sun, 44, 1*unit.Degree, 0.5*unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	if got, b := part(beside, "Sun"); math.Abs(got/want.Kelvins()-1) > 2e-3 || math.Abs(b.Sun.Degrees()-0.5) > 0.001 {
		t.Errorf("half a degree beside: %g K at %g deg, want %v", got, b.Sun.Degrees(), want)
	}
	night := noon.Add(12 * time.Hour)
	g = towards(frame, orbit.SunPosition(night, orbit.EarthOrientation{}))
	g.Time = night
	if got, _ := part(g, "Sun"); got != 0 || g.Elevation > 0 {
		t.Errorf("the Sun at %g deg adds %g K", g.Elevation.Degrees(), got)
	}
	g.Time = time.Time{}
	if got, b := part(g, "Sun"); got != 0 || !math.IsNaN(float64(b.Sun)) {
		t.Errorf("without a time: %g K at %v", got, b.Sun)
	}
}

// Outside its span the bodies are the same, and a fixed antenna's beam stays where it is.
func TestBodiesOutsideTheSpan(t *testing.T) {
	from := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	inside := NewBodies(from, from.Add(48*time.Hour), orbit.EarthOrientation{})
	outside := NewBodies(from.Add(-48*time.Hour), from.Add(-24*time.Hour), orbit.EarthOrientation{})
	at := from.Add(13*time.Hour + 7*time.Second)
	s1, m1 := inside.positions(at)
	s2, m2 := outside.positions(at)
	if s1.Sub(s2).Norm() > 1e-8*s2.Norm() || m1.Sub(m2).Norm() > 1e-7*m2.Norm() {
		t.Errorf("Sun %v and %v, Moon %v and %v", s1, s2, m1, m2)
	}
	l, frame := sunLink(t, inside, station.Fixed)
	g := Geometry{Time: at, Azimuth: 1, Elevation: 0.3, Range: 1000 * unit.Kilometre}
	_, el, _ := frame.Direction(s2)
	if got := l.lookAtBodies(&g).sun; math.Abs((got + el - 90*unit.Degree).Degrees()) > 1e-4 {
		t.Errorf("the Sun at %g deg stands %g deg from the zenith", el.Degrees(), got.Degrees())
	}
}

// TestRiseCurve bounds the cubic by the integral itself.
func TestRiseCurve(t *testing.T) {
	for _, width := range []float64{0.2, 0.7, 4, 60} {
		w := unit.Angle(width) * unit.Degree
		d := propagation.Disc{Brightness: 1e4, Diameter: propagation.SunDiameter}
		c, err := newRiseCurve(d, w)
		if err != nil {
			t.Fatal(err)
		}
		axis := c.at(0)
		for i := range 200 {
			off := c.last * unit.Angle(i) / 200
			want, err := propagation.AntennaRise(d, 0, w, off)
			if err != nil {
				t.Fatal(err)
			}
			if diff := math.Abs(c.at(off) - want.Kelvins()); diff > 1e-4*axis {
				t.Errorf("width %g deg, %g deg off: %g K, want %v, %.2g of the axis", width, off.Degrees(), c.at(off), want, diff/axis)
			}
		}
	}
}

// The interval of the Sun in the beam ends where the angle crosses the bound.
func TestWithin(t *testing.T) {
	nan := math.NaN()
	start := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	p := &Profile{Start: start, Seconds: []float64{0, 10, 20, 30, 40, 50}}
	for _, c := range []struct {
		what   string
		column []float64
		want   [][2]float64
	}{
		{"a dip", []float64{5, 3, 1, 1, 3, 5}, [][2]float64{{15, 35}}},
		{"from the start", []float64{0, 1, 3, 5, 5, 5}, [][2]float64{{0, 15}}},
		{"to the end", []float64{5, 5, 5, 3, 1, 0}, [][2]float64{{35, 50}}},
		{"never", []float64{5, 5, 5, 5, 5, 5}, nil},
		{"not known", []float64{nan, nan, nan, nan, nan, nan}, nil},
		{"twice", []float64{1, 3, 1, 1, 3, 1}, [][2]float64{{0, 5}, {15, 35}, {45, 50}}},
	} {
		got := p.within(c.column, 2)
		if len(got) != len(c.want) {
			t.Errorf("%s: %v, want %v", c.what, got, c.want)
			continue
		}
		for i, w := range c.want {
			if got[i].From.Sub(start).Seconds() != w[0] || got[i].To.Sub(start).Seconds() != w[1] {
				t.Errorf("%s: %v, want %v", c.what, got, c.want)
			}
		}
	}
}
