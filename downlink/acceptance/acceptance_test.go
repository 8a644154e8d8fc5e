package acceptance

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.9g, want %.9g, off by %.3g, more than %g", what, got, want, got-want, tolerance)
	}
}

func readings() Readings {
	return Readings{Frequency: 8180 * unit.Megahertz, YDB: []float64{14.0, 14.2, 13.9, 14.1}, YSigmaDB: 0.1,
		Flux: Quantity{280e-22, 280e-22 * 0.05}, DiameterDeg: Quantity{0.55, 0.03}, BeamDeg: Quantity{0.69, 0.03},
		Attenuation: Quantity{0.12, 0.05}, PointingDB: Quantity{0.05, 0.05}}
}

// TestPublishedExample: a published step-by-step calculation (894560.com, "Come calcolare
// G/T", seen; its rise of 7.5 is used as a ratio, though it is called decibels): wavelength 0.25 m, flux
// 7.5e-21 W/(m² Hz), k = 1.38e-23 give 4.809.
func TestPublishedExample(t *testing.T) {
	m := Readings{Frequency: unit.Frequency(unit.SpeedOfLight / 0.25), YDB: []float64{10 * math.Log10(7.5)}, Flux: Quantity{Value: 7.5e-21}, BeamDeg: Quantity{Value: 20}}
	r, err := Measure(&m)
	if err != nil {
		t.Fatal(err)
	}
	// Its steps are rounded to three digits, Boltzmann's constant too (1.380649 against 1.38).
	near(t, "G/T", math.Pow(10, r.DBK/10), 4.809, 4.809*1e-3)
}

// TestAgainstTheRise goes the other way round: the rise of the antenna temperature that the
// noise model integrates over the disc gives the ratio from which the same G/T is measured.
func TestAgainstTheRise(t *testing.T) {
	const f, flux, gain, system = 8180 * unit.Megahertz, 280e-22, 47.0, 150.0
	for _, beam := range []float64{5, 1.5, 0.69, 0.4} {
		sun, err := propagation.SunOfFlux(f, flux)
		if err != nil {
			t.Fatal(err)
		}
		rise, err := propagation.AntennaRise(sun, gain, unit.Angle(beam)*unit.Degree, 0)
		if err != nil {
			t.Fatal(err)
		}
		m := Readings{Frequency: f, YDB: []float64{10 * math.Log10(1+float64(rise)/system)}, Flux: Quantity{Value: flux},
			DiameterDeg: Quantity{Value: propagation.SunDiameter.Degrees()}, BeamDeg: Quantity{Value: beam}}
		r, err := Measure(&m)
		if err != nil {
			t.Fatal(err)
		}
		// That beam falls by 12 dB (θ/B)², this one by 10 log10(16) = 12.04.
		near(t, "G/T", r.DBK, gain-10*math.Log10(system), 0.01)
	}
}

// TestExtentFactor holds the factor to the approximation 1 + 0.38 (W/B)² of notes on Rec.
// ITU-R S.733-2 (seen) and to its limits.
func TestExtentFactor(t *testing.T) {
	for _, x := range []float64{0.1, 0.3, 0.5, 0.7} {
		near(t, "factor", ExtentFactor(x, 1), 1+0.38*x*x, 0.01*ExtentFactor(x, 1))
	}
	near(t, "point", ExtentFactor(0, 1), 1, 0)
	near(t, "wide source", ExtentFactor(10, 1), math.Ln2*100, 1e-9)
}

// TestUncertaintyAgainstDraws draws every input from a normal law: mean and spread of the
// results are those of the budget.
func TestUncertaintyAgainstDraws(t *testing.T) {
	m := readings()
	r, err := Measure(&m)
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, term := range r.Terms {
		sum += term.DB * term.DB
	}
	near(t, "squares", math.Sqrt(sum), r.Sigma, 1e-12)
	rng := rand.New(rand.NewPCG(1, 2))
	draw := func(q Quantity) float64 { return q.Value + q.Sigma*rng.NormFloat64() }
	const n = 40_000
	var mean, square float64
	yMean, ySpread := meanOf(m.YDB)
	for range n {
		p := point{
			yMean + rng.NormFloat64()*ySpread/2 + rng.NormFloat64()*m.YSigmaDB, draw(m.Flux), draw(m.DiameterDeg), draw(m.BeamDeg), draw(m.Attenuation), draw(m.PointingDB),
		}
		v := p.gOverT(m.Frequency.Wavelength().Metres())
		mean, square = mean+v/n, square+v*v/n
	}
	sigma := math.Sqrt(square - mean*mean)
	near(t, "mean", mean, r.DBK, 4*r.Sigma/math.Sqrt(n)+0.01) // the second order, 0.01 dB
	near(t, "sigma", sigma, r.Sigma, 0.02*r.Sigma)
	// Sensitivities in closed form.
	y := math.Pow(10, r.YDB/10)
	near(t, "dB per dB of the ratio", r.Terms[1].Sensitivity, y/(y-1), 1e-4)
	near(t, "dB per share of flux", r.Terms[2].DB, 10*math.Log10E*0.05, 1e-3)
}

// TestKeptWith: half where promise and measurement agree, and the normal law around.
func TestKeptWith(t *testing.T) {
	r := Result{DBK: 25, Sigma: 0.5}
	near(t, "agree", r.KeptWith(25), 0.5, 1e-12)
	near(t, "one sigma under", r.KeptWith(24.5), 0.841344746, 1e-9) // tables of the normal law
	exact := Result{DBK: 25}
	if exact.KeptWith(25) != 1 || exact.KeptWith(25.1) != 0 {
		t.Error("without uncertainty")
	}
}

// TestFaults come all at once.
func TestFaults(t *testing.T) {
	m := Readings{Frequency: -1, YDB: []float64{0}, YSigmaDB: -1, Flux: Quantity{0, 1}, DiameterDeg: Quantity{9, 0}, Attenuation: Quantity{-1, math.NaN()}, PointingDB: Quantity{0, -1}}
	_, err := Measure(&m)
	for _, want := range []string{"frequency", "noise ratio 1", "uncertainty of the noise ratio", "flux density", "diameter", "beamwidth", "attenuation of the air", "uncertainty of the attenuation", "uncertainty of the pointing loss"} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is missing in %v", want, err)
		}
	}
	m = readings()
	m.YDB, m.YSigmaDB = []float64{0.1}, 0.4
	if _, err := Measure(&m); err == nil || !strings.Contains(err.Error(), "no rise at all") {
		t.Errorf("a rise within its uncertainty: %v", err)
	}
}
