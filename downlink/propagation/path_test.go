package propagation

import (
	"math"
	"sync"
	"testing"

	"slantwise/orbit/unit"
)

// climateAt returns an invented site's climate: rain, cloud and vapour of a middling
// size, so that every part of a path has something to do.
func climateAt(latitudeDeg, heightKm float64) Climate {
	rate, rainHeight, wet := RainRate(40), 4*unit.Kilometre, 60.0
	cloud, err := NewCurve("cloud", "kg/m2", Exceeded{1 * Percent, 1.2}, Exceeded{5 * Percent, 0.5}, Exceeded{50 * Percent, 0.02})
	if err != nil {
		panic(err)
	}
	vapour, err := NewCurve("vapour", "kg/m2", Exceeded{1 * Percent, 38}, Exceeded{5 * Percent, 30}, Exceeded{50 * Percent, 16})
	if err != nil {
		panic(err)
	}
	return Climate{Latitude: unit.Angle(latitudeDeg) * unit.Degree, Height: unit.Length(heightKm) * unit.Kilometre, Season: Summer,
		Vapour: vapour, Rate001: &rate, RainHeight: &rainHeight, CloudWater: cloud, WetRefractivity: &wet}
}

func dish(m float64) *Aperture { return &Aperture{Diameter: unit.Length(m), Efficiency: 0.6} }

// pathCases are paths that reach every part, branch and kink between them.
func pathCases() []struct {
	name string
	spec PathSpec
} {
	low := climateAt(52, 0.1)
	low.LowPath = &LowPath{GradientExceeded: 10 * Percent}
	return []struct {
		name string
		spec PathSpec
	}{
		{"X band", PathSpec{Frequency: 8.2 * unit.Gigahertz, Climate: climateAt(58, 0.05), Exceedance: 1 * Percent, Tilt: 45 * unit.Degree, Aperture: dish(3.7)}},
		{"Ka band, tropics, rare", PathSpec{Frequency: 26.25 * unit.Gigahertz, Climate: climateAt(3, 0.2), Exceedance: 0.01 * Percent, Tilt: 45 * unit.Degree, Aperture: dish(5)}},
		{"Ka band, large dish", PathSpec{Frequency: 32 * unit.Gigahertz, Climate: climateAt(-35, 1.1), Exceedance: 0.1 * Percent, Aperture: dish(34)}},
		{"oxygen band", PathSpec{Frequency: 58 * unit.Gigahertz, Climate: climateAt(30, 0), Exceedance: 5 * Percent, Aperture: dish(0.5)}},
		{"UHF", PathSpec{Frequency: 437 * unit.Megahertz, Climate: climateAt(48, 0.4), Exceedance: 10 * Percent, Tilt: 45 * unit.Degree, Aperture: dish(2)}},
		{"S band, mountain, older editions", PathSpec{Frequency: 2.2 * unit.Gigahertz, Climate: climateAt(40, 2.5), Exceedance: 1 * Percent,
			Editions: Editions{P618: 13, P676: 13, P840: 8}, Aperture: dish(13)}},
		{"low elevations by P.618 §2.4.2", PathSpec{Frequency: 20 * unit.Gigahertz, Climate: low, Exceedance: 0.5 * Percent, Aperture: dish(2.4)}},
		{"satellite at 500 km", PathSpec{Frequency: 8.2 * unit.Gigahertz, Climate: climateAt(58, 0.05), Exceedance: 1 * Percent, Aperture: dish(3.7), SatelliteHeight: 500 * unit.Kilometre}},
	}
}

// elevationsOf returns elevations from the path's horizon to 90°, dense at the
// bottom, and both sides of every break.
func elevationsOf(p *Path) []unit.Angle {
	lowest := p.Lowest().Degrees()
	var degs []float64
	count := 240
	if testing.Short() {
		count = 40
	}
	for i := range count + 1 {
		u := float64(i) / float64(count)
		degs = append(degs, lowest+(90-lowest)*u*u)
	}
	for _, b := range p.model.breaks() {
		degs = append(degs, b, math.Max(lowest, b-1e-6), math.Min(90, b+1e-6))
	}
	var els []unit.Angle
	for _, d := range degs {
		els = append(els, unit.Angle(d)*unit.Degree)
	}
	return els
}

// The oracle is the evaluation without tables; the bound is the one that Path states.
func TestPathTablesAgreeWithDirect(t *testing.T) {
	for _, c := range pathCases() {
		t.Run(c.name, func(t *testing.T) {
			p, err := NewPath(c.spec)
			if err != nil {
				t.Fatal(err)
			}
			var worst float64
			for _, el := range elevationsOf(p) {
				got, err := p.At(el)
				if err != nil {
					t.Fatal(err)
				}
				want, err := p.Direct(el)
				if err != nil {
					t.Fatal(err)
				}
				worst = math.Max(worst, compareSamples(t, el, got, want))
			}
			t.Logf("worst difference %.2g dB; horizon %.3f deg", worst, p.Lowest().Degrees())
		})
	}
}

func TestPathIsSafeForManyGoroutines(t *testing.T) {
	p, err := NewPath(kaPath())
	if err != nil {
		t.Fatal(err)
	}
	want, err := p.At(17 * unit.Degree)
	if err != nil {
		t.Fatal(err)
	}
	var group sync.WaitGroup
	for range 4 {
		group.Go(func() {
			for range 100 {
				if got, err := p.At(17 * unit.Degree); err != nil || got != want {
					t.Errorf("got %v, %v, want %v", got, err, want)
				}
				if _, err := p.Sky(17 * unit.Degree); err != nil {
					t.Error(err)
				}
			}
		})
	}
	group.Wait()
}

// Rays from under the horizontal have layers of their own, and each direct one costs
// milliseconds.
func TestPathBelowTheHorizontal(t *testing.T) {
	spec := PathSpec{Frequency: 8.2 * unit.Gigahertz, Climate: climateAt(40, 2.5), Exceedance: 1 * Percent, Aperture: dish(3)}
	above, err := NewPath(spec)
	if err != nil {
		t.Fatal(err)
	}
	spec.BelowHorizontal = true
	p, err := NewPath(spec)
	if err != nil {
		t.Fatal(err)
	}
	if !(p.Lowest() < above.Lowest()-1*unit.Degree) {
		t.Errorf("lowest %.3f deg, without these rays %.3f deg", p.Lowest().Degrees(), above.Lowest().Degrees())
	}
	for _, el := range []unit.Angle{p.Lowest(), -2.5 * unit.Degree, -1.7 * unit.Degree, -1 * unit.Degree, above.Lowest() - 1e-6, above.Lowest(), 3 * unit.Degree} {
		got, err := p.At(el)
		if err != nil {
			t.Fatal(err)
		}
		want, err := p.Direct(el)
		if err != nil {
			t.Fatal(err)
		}
		compareSamples(t, el, got, want)
	}
}

func compareSamples(t *testing.T, el unit.Angle, got, want Sample) (worst float64) {
	t.Helper()
	for _, q := range []struct {
		part      string
		got, want unit.DB
	}{
		{"gas", got.Gas, want.Gas}, {"clear gas", got.ClearGas, want.ClearGas}, {"cloud", got.Cloud, want.Cloud}, {"rain", got.Rain, want.Rain},
		{"scintillation", got.Scintillation, want.Scintillation}, {"combination", got.Combination, want.Combination}, {"total", got.Total, want.Total},
	} {
		d := math.Abs(float64(q.got - q.want))
		bound := 1e-4 + math.Max(0, float64(q.want)-100)*1e-6
		if !(d <= bound) {
			t.Errorf("%s at %.7f deg: table %.7f dB, direct %.7f dB, difference %.2g over %.2g", q.part, el.Degrees(), q.got, q.want, d, bound)
		}
		worst = math.Max(worst, d)
	}
	return worst
}
