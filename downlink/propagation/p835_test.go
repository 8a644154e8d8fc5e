package propagation

import (
	"errors"
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

// The mean annual global profile is the U.S. Standard Atmosphere 1976; values are
// from its Table I (NOAA-S/T 76-1562), geometric heights, printed digits.
func TestGlobalAtmosphereIsTheStandardOne(t *testing.T) {
	for _, c := range []struct{ km, tK, hPa, tolT, tolP float64 }{
		{0, 288.150, 1013.25, 5e-4, 5e-3}, {5, 255.676, 540.48, 5e-4, 5e-2}, {11, 216.774, 226.99, 5e-4, 5e-2},
		{20, 216.650, 55.293, 5e-4, 5e-3}, {50, 270.650, 0.79779, 5e-4, 5e-5}, {80, 198.639, 0.010524, 5e-4, 5e-6}, {90, 186.87, 0.0018359, 5e-3, 2e-6},
	} {
		a := globalAir(c.km, 7.5)
		if math.Abs(a.tK-c.tK) > c.tolT || math.Abs(a.hPa-c.hPa) > c.tolP {
			t.Errorf("%g km: %.4f K, %.6g hPa, want %.3f K, %.6g hPa", c.km, a.tK, a.hPa, c.tK, c.hPa)
		}
	}
}

// Surface values are the constants of the printed formulas, P.835-6 Annex 1 §2 to §4.
func TestReferenceAtmospheresByLatitude(t *testing.T) {
	for _, c := range []struct {
		lat              float64
		season           Season
		name             string
		tK, hPa, density float64
	}{
		{10, Winter, "low latitude", 300.4222, 1012.0306, 19.6542},
		{-30, Summer, "middle latitude, summer", 294.9838, 1012.8186, 14.3542},
		{30, Winter, "middle latitude, winter", 272.7241, 1018.8627, 3.4742},
		{60, Summer, "high latitude, summer", 286.8374, 1008.0278, 8.988},
		{-60, Winter, "high latitude, winter", 257.4345, 1010.8828, 1.2319},
		{60, Year, "high latitude, mean of summer and winter", (286.8374 + 257.4345) / 2, (1008.0278 + 1010.8828) / 2, (8.988 + 1.2319) / 2},
	} {
		a, err := ReferenceAtmosphere(unit.Angle(c.lat)*unit.Degree, c.season)
		if err != nil {
			t.Fatal(err)
		}
		got := a.at(0)
		if math.Abs(got.tK-c.tK) > 1e-9 || math.Abs(got.hPa-c.hPa) > 1e-9 || math.Abs(got.rho-c.density) > 1e-9 || !strings.HasSuffix(a.Name(), c.name) {
			t.Errorf("%g deg, %v: %s with %v", c.lat, c.season, a.Name(), got)
		}
	}
}

// The pieces of each profile meet: temperature to a kelvin, pressure to 0.1 %, as the
// Recommendation's rounded coefficients leave them. Its summer air of middle
// latitudes falls by 19 K at 80 km, where a hundred-thousandth of the air is left.
func TestReferenceAtmospheresAreContinuous(t *testing.T) {
	for name, at := range map[string]func(float64) air{"low": lowLatitude.at, "middle summer": middleSummer.at, "middle winter": middleWinter.at,
		"high summer": highSummer.at, "high winter": highWinter.at, "global": globalReference} {
		before := at(-0.5)
		for h := -0.5; h <= topKm; h += 1e-3 {
			a := at(h)
			jump := 1.0
			if name == "middle summer" && math.Abs(h-80) < 1e-3 {
				jump = 19
			}
			if math.Abs(a.tK-before.tK) > jump || math.Abs(a.hPa/before.hPa-1) > 1e-3 || a.rho < 0 {
				t.Errorf("%s at %.3f km: %v after %v", name, h, a, before)
			}
			before = a
		}
	}
}

// P.618-14 §7: the refraction of a tropical maritime and of a polar continental air
// at 1°, 3° and 5°, "about" and in two digits (so 0.02°); other climates lie between.
func TestRefractionLiesBetweenClimates(t *testing.T) {
	for _, lat := range []float64{10, 35, 60} {
		a, err := ReferenceAtmosphere(unit.Angle(lat)*unit.Degree, Year)
		if err != nil {
			t.Fatal(err)
		}
		l, err := NewLayers(a, 0)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []struct{ geometric, polar, tropical float64 }{{1, 0.44, 0.65}, {3, 0.25, 0.35}, {5, 0.17, 0.25}} {
			apparent, err := l.Apparent(unit.Angle(c.geometric) * unit.Degree)
			if err != nil {
				t.Fatal(err)
			}
			if lift := apparent.Degrees() - c.geometric; lift < c.polar-0.02 || lift > c.tropical+0.02 {
				t.Errorf("latitude %g: lifted by %.3f deg at %g deg, want %g to %g deg", lat, lift, c.geometric, c.polar, c.tropical)
			}
		}
	}
}

// The closed fit of P.834-9 against the layered ray in the mean annual global air: two
// ways to one quantity. The bounds are what was found, rounded up.
func TestClosedRefractionNearTheRay(t *testing.T) {
	a, err := MeanAnnualGlobal(7.5 * GramPerCubicMetre)
	if err != nil {
		t.Fatal(err)
	}
	for _, km := range []float64{0, 1, 3} {
		l, err := NewLayers(a, unit.Length(km)*unit.Kilometre)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []struct{ el, tolerance float64 }{{0, 0.05}, {1, 0.03}, {2, 0.02}, {5, 0.02}, {10, 0.02}} {
			ray, err := l.Apparent(unit.Angle(c.el) * unit.Degree)
			if err != nil {
				t.Fatal(err)
			}
			fit := apparentElevation(c.el, km)
			if d := math.Abs(ray.Degrees() - fit); d > c.tolerance {
				t.Errorf("%g km, %g deg: ray %.4f deg, fit %.4f deg", km, c.el, ray.Degrees(), fit)
			}
		}
	}
}

func TestRaysUnderTheHorizon(t *testing.T) {
	a, err := MeanAnnualGlobal(7.5 * GramPerCubicMetre)
	if err != nil {
		t.Fatal(err)
	}
	l, err := NewLayers(a, 3*unit.Kilometre)
	if err != nil {
		t.Fatal(err)
	}
	at := func(deg float64) float64 {
		t.Helper()
		db, _, err := l.GasAttenuation(28*unit.Gigahertz, unit.Angle(deg)*unit.Degree)
		if err != nil {
			t.Fatal(err)
		}
		return float64(db)
	}
	// Both methods meet at the horizontal, to the difference of their shells (2e-3, TestLayersNearFineLimit).
	if above, below := at(0), at(-1e-5); math.Abs(below/above-1) > 2e-3 {
		t.Errorf("just above the horizontal %g dB, just below %g dB", above, below)
	}
	if a, b := at(-0.5), at(-1.5); !(b > a && a > at(0)) {
		t.Errorf("%g dB at -0.5 deg, %g dB at -1.5 deg, %g dB at 0 deg", a, b, at(0))
	}
	var blocked *BlockedRayError
	if _, _, err := l.GasAttenuation(28*unit.Gigahertz, -1.6*unit.Degree); !errors.As(err, &blocked) {
		t.Fatalf("under the Earth's edge: got %v, want a *BlockedRayError", err)
	}
	// Without air the edge of a sphere of 6371 km lies acos(6371/6374) = 1.758° under the horizontal; the ray lifts it.
	if least := blocked.Least.Degrees(); !(least > -1.758 && least < -1.4) {
		t.Errorf("least elevation %.4f deg", least)
	}
}

func TestMeasuredProfile(t *testing.T) {
	var levels []Level
	for _, km := range []float64{0, 0.5, 1, 2, 4, 7, 11, 15, 20} {
		s := globalReference(km)
		levels = append(levels, Level{unit.Length(km) * unit.Kilometre, unit.Temperature(s.tK), Pressure(s.hPa) * Hectopascal, VapourDensity(s.rho) * GramPerCubicMetre})
	}
	measured, err := MeasuredProfile(levels)
	if err != nil {
		t.Fatal(err)
	}
	for _, km := range []float64{0, 1.3, 6, 20, 40} {
		got, want := measured.at(km), globalReference(km)
		if math.Abs(got.tK-want.tK) > 0.5 || math.Abs(got.hPa/want.hPa-1) > 0.01 || math.Abs(got.rho/want.rho-1) > 0.02 {
			t.Errorf("%g km: %v, sampled from %v", km, got, want)
		}
	}
	if _, err := MeasuredProfile(levels[:1]); err == nil {
		t.Error("one level: no error")
	}
	if _, err := MeasuredProfile([]Level{levels[1], levels[0]}); err == nil {
		t.Error("falling heights: no error")
	}
	high, err := MeasuredProfile(levels[2:])
	if err != nil {
		t.Fatal(err)
	}
	if _, err := NewLayers(high, 0); err == nil || !strings.Contains(err.Error(), "let the profile start at or under the station") {
		t.Errorf("a station under the profile: got %v", err)
	}
}

func TestSurfaceAndColumnAreMet(t *testing.T) {
	base, err := ReferenceAtmosphere(50*unit.Degree, Year)
	if err != nil {
		t.Fatal(err)
	}
	tK, p, rho := unit.Temperature(291), 930*Hectopascal, 11*GramPerCubicMetre
	a, err := base.WithSurface(800*unit.Metre, Surface{&tK, &p, &rho})
	if err != nil {
		t.Fatal(err)
	}
	if got := a.at(0.8); math.Abs(got.tK-291) > 1e-9 || math.Abs(got.hPa-930) > 1e-9 || math.Abs(got.rho-11) > 1e-9 {
		t.Errorf("surface: %v", got)
	}
	if a, err = a.WithColumn(800*unit.Metre, 25*KilogramPerSquareMetre); err != nil {
		t.Fatal(err)
	}
	if got := a.column(0.8); math.Abs(got-25) > 1e-9 {
		t.Errorf("column: %g kg/m2", got)
	}
	// 7.5 g/m³ with a scale height of 2 km hold 15 kg/m², P.835-6 Annex 1 §1.2; the floor of 2e-6 adds under 0.1.
	global, err := MeanAnnualGlobal(7.5 * GramPerCubicMetre)
	if err != nil {
		t.Fatal(err)
	}
	if got := global.column(0); got < 15 || got > 15.1 {
		t.Errorf("column of the global air: %g kg/m2", got)
	}
}
