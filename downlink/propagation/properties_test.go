package propagation

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
)

func TestSpecificAttenuationsAreFiniteAndNotNegative(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := math.Pow(10, rapid.Float64Range(0, 3).Draw(t, "log10 GHz"))
		tK := rapid.Float64Range(170, 330).Draw(t, "K")
		p := math.Pow(10, rapid.Float64Range(-4, 3.04).Draw(t, "log10 hPa"))
		rho := rapid.Float64Range(0, 40).Draw(t, "g/m3")
		for what, g := range map[string]float64{"oxygen": oxygenSpecific(f, p, tK, rho), "vapour": vapourSpecific(f, p, tK, rho)} {
			if !(g >= 0) || math.IsInf(g, 0) {
				t.Errorf("%s at %g GHz, %g hPa, %g K, %g g/m3: %g dB/km", what, f, p, tK, rho, g)
			}
		}
		el, tilt := rapid.Float64Range(0, 90).Draw(t, "elevation"), rapid.Float64Range(-90, 90).Draw(t, "tilt")
		g, err := rainSpecific(rapid.Float64Range(0, 250).Draw(t, "mm/h"), f, el, tilt)
		if err != nil || !(g >= 0) || math.IsInf(g, 0) {
			t.Errorf("rain at %g GHz, %g deg: %g dB/km, %v", f, el, g, err)
		}
		if k := cloudMassAbsorption(math.Min(f, 200), 9); !(k > 0) {
			t.Errorf("cloud at %g GHz: %g dB per kg/m2", f, k)
		}
	})
}

func drawAtmosphere(t *rapid.T) Atmosphere {
	a, err := ReferenceAtmosphere(unit.Angle(rapid.Float64Range(-90, 90).Draw(t, "latitude"))*unit.Degree, Season(rapid.IntRange(0, 2).Draw(t, "season")))
	if err != nil {
		t.Fatal(err)
	}
	return a
}

func TestGasAndCloudGrowAsElevationFalls(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		l, err := NewLayers(drawAtmosphere(t), unit.Length(rapid.Float64Range(0, 5).Draw(t, "km"))*unit.Kilometre)
		if err != nil {
			t.Fatal(err)
		}
		f := math.Pow(10, rapid.Float64Range(0, 2.5).Draw(t, "log10 GHz"))
		g := l.absorption(f)
		low := rapid.Float64Range(0, 89).Draw(t, "lower elevation")
		high := rapid.Float64Range(low+0.1, 90).Draw(t, "higher elevation")
		if a, b := l.attenuation(g, low), l.attenuation(g, high); !(a > b) {
			t.Errorf("gas at %g GHz: %g dB at %g deg, %g dB at %g deg", f, a, low, b, high)
		}
		if a, b := cloudSlant(low), cloudSlant(high); !(a > b) {
			t.Errorf("cloud: %g at %g deg, %g at %g deg", a, low, b, high)
		}
	})
}

func TestRainGrowsWithTheRate(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rainSite{latDeg: rapid.Float64Range(-70, 70).Draw(t, "latitude"), stationKm: rapid.Float64Range(0, 2).Draw(t, "km"),
			rainKm: rapid.Float64Range(2.5, 5.5).Draw(t, "rain height"), rateMmH: rapid.Float64Range(1, 150).Draw(t, "mm/h")}
		f, el := rapid.Float64Range(4, 55).Draw(t, "GHz"), rapid.Float64Range(5, 90).Draw(t, "elevation")
		more := s
		more.rateMmH *= 1.1
		var n notes
		a, err := rainAttenuationChecked(s, f, el, 45, 0.01, &n)
		if err != nil {
			t.Fatal(err)
		}
		b, err := rainAttenuationChecked(more, f, el, 45, 0.01, &n)
		if err != nil {
			t.Fatal(err)
		}
		if !(b > a) {
			t.Errorf("%g GHz, %g deg: %g dB at %g mm/h, %g dB at %g mm/h", f, el, a, s.rateMmH, b, more.rateMmH)
		}
	})
}

// The shells of P.676-13 against ten times as many. At the horizon the first shells'
// refraction is what differs.
func TestLayersNearFineLimit(t *testing.T) {
	for _, c := range []struct{ height, apparent, tolerance float64 }{
		{0, 90, 2e-5}, {0, 30, 2e-5}, {0, 5, 2e-5}, {0, 1, 2e-5}, {0, 0.1, 2e-4}, {0, 0, 2e-3}, {2, 90, 2e-5}, {2, 5, 2e-5}, {2, 0, 2e-3},
	} {
		a, err := ReferenceAtmosphere(50*unit.Degree, Summer)
		if err != nil {
			t.Fatal(err)
		}
		usual, err := newLayers(a, c.height, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		fine, err := newLayers(a, c.height, 0.001)
		if err != nil {
			t.Fatal(err)
		}
		got, want := usual.attenuation(usual.absorption(26), c.apparent), fine.attenuation(fine.absorption(26), c.apparent)
		if d := math.Abs(got/want - 1); d > c.tolerance {
			t.Errorf("%g km, %g deg: %g dB, fine limit %g dB, relative difference %.2g over %g", c.height, c.apparent, got, want, d, c.tolerance)
		}
	}
}

func TestVacuumGivesNothing(t *testing.T) {
	vacuum := Atmosphere{"vacuum", func(float64) air { return air{tK: 200} }}
	l, err := NewLayers(vacuum, 0)
	if err != nil {
		t.Fatal(err)
	}
	for _, el := range []float64{0, 1, 45, 90} {
		if a := l.attenuation(l.absorption(60), el); a != 0 {
			t.Errorf("%g deg: %g dB", el, a)
		}
		if d := math.Abs(l.geometricDeg(el, math.Inf(1)) - el); d > 1e-9 {
			t.Errorf("%g deg: bent by %g deg", el, d)
		}
	}
	empty, err := newRain([12]float64{}, [12]float64{})
	if err != nil {
		t.Fatal(err)
	}
	if r, err := empty.rate(0.01); err != nil || r != 0 {
		t.Errorf("no rainfall: %g mm/h, %v", r, err)
	}
}

func TestNoiseKeepsAboveTheCosmicBackground(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		medium := rapid.Float64Range(180, 320).Draw(t, "medium")
		behind := CosmicBackground.Kelvins() + rapid.Float64Range(0, 1e4).Draw(t, "background")
		a := rapid.Float64Range(0, 200).Draw(t, "dB")
		more := a + rapid.Float64Range(0, 50).Draw(t, "more dB")
		thin, thick := brightness(a, medium, behind), brightness(more, medium, behind)
		if thin < CosmicBackground.Kelvins() || thick < CosmicBackground.Kelvins() {
			t.Errorf("%g K and %g K are under the cosmic background", thin, thick)
		}
		if behind <= medium && thick < thin-1e-9 { // a cold sky
			t.Errorf("%g dB: %g K, %g dB: %g K in front of %g K", a, thin, more, thick, behind)
		}
	})
}

// Apparent inverts Geometric, and refraction lifts. A ray is known by the cosine of its
// elevation, which near the horizon resolves no more than sqrt(2 eps), 1.5e-8 rad.
func TestRefractionInverts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		l, err := NewLayers(drawAtmosphere(t), unit.Length(rapid.Float64Range(-0.4, 5).Draw(t, "km"))*unit.Kilometre)
		if err != nil {
			t.Fatal(err)
		}
		apparent := unit.Angle(rapid.Float64Range(0, 90).Draw(t, "apparent")) * unit.Degree
		g, err := l.Geometric(apparent)
		if err != nil {
			t.Fatal(err)
		}
		back, err := l.Apparent(g)
		if err != nil {
			t.Fatal(err)
		}
		if d := math.Abs(float64(back - apparent)); d > 2e-8 {
			t.Errorf("%.9f deg came back as %.9f deg", apparent.Degrees(), back.Degrees())
		}
		if g > apparent+1e-9*unit.Degree {
			t.Errorf("geometric %.9f deg lies above apparent %.9f deg", g.Degrees(), apparent.Degrees())
		}
	})
}
