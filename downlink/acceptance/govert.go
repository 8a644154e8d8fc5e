package acceptance

import (
	"math"

	"slantwise/orbit/unit"
)

// Quantity is a value with its standard uncertainty, both in the value's own unit.
type Quantity struct{ Value, Sigma float64 }

// Readings are what was measured, and of what.
type Readings struct {
	Frequency unit.Frequency
	// YDB are readings of the noise on the source over the noise of the cold sky, dB, at
	// least one, each greater than 0.
	YDB []float64
	// YSigmaDB is what all readings share: linearity of the detector, drift; dB, 0 or more.
	YSigmaDB float64

	Flux        Quantity // of the source, both polarisations together, W/(m² Hz)
	DiameterDeg Quantity // of the source, evenly bright; 0: a point
	BeamDeg     Quantity // half-power beamwidth, greater than 0
	Attenuation Quantity // of the air in front of the source, dB
	PointingDB  Quantity // loss by not pointing at its middle, dB
}

// Term is one line of the uncertainty budget.
type Term struct {
	Name        string
	Value       float64 // as it entered
	Unit        string
	Sigma       float64 // standard uncertainty, in Unit
	Sensitivity float64 // dB of G/T per Unit
	DB          float64 // what it does to G/T: |Sensitivity| Sigma, dB
}

// Result is the measured G/T.
type Result struct {
	DBK      float64 // G/T, dB/K
	Sigma    float64 // standard uncertainty, dB
	Terms    []Term  // in the order of Readings; squares of DB add up to that of Sigma
	YDB      float64 // mean of the readings
	Beam     float64 // correction for the extent of the source, a factor of 1 and more
	RiseOver float64 // Y - 1, the source over the system noise
}

// Coverage is the factor of the expanded uncertainty, about 95 % of a normal law.
const Coverage = 2

// Expanded returns Coverage times the standard uncertainty, dB.
func (r *Result) Expanded() float64 { return Coverage * r.Sigma }

// Measure returns the G/T of readings. It fails with every fault of the readings.
//
//	G/T = 8 π k (Y - 1) / (λ² S) K1 K2 K3
//
// with Y the linear ratio, S the flux density in both polarisations, K1 the attenuation of
// the air, K2 the extent of the source in the beam, K3 the pointing loss, all as factors
// of 1 and more. Source: Rec. ITU-R S.733-2.
func Measure(m *Readings) (*Result, error) {
	if err := m.check(); err != nil {
		return nil, err
	}
	mean, spread := meanOf(m.YDB)
	at := point{mean, m.Flux.Value, m.DiameterDeg.Value, m.BeamDeg.Value, m.Attenuation.Value, m.PointingDB.Value}
	lambda := m.Frequency.Wavelength().Metres()
	g := func(p point) float64 { return p.gOverT(lambda) }
	r := &Result{DBK: g(at), YDB: mean, Beam: ExtentFactor(at.diameter, at.beam), RiseOver: math.Pow(10, mean/10) - 1}
	add := func(name, unit string, value, sigma float64, moved func(*point, float64)) {
		slope := 0.0
		if sigma > 0 {
			up, down := at, at
			moved(&up, sigma/2)
			moved(&down, -sigma/2)
			slope = (g(up) - g(down)) / sigma
		}
		r.Terms = append(r.Terms, Term{name, value, unit, sigma, slope, math.Abs(slope) * sigma})
	}
	add("noise ratio, spread of the readings", "dB", mean, spread/math.Sqrt(float64(len(m.YDB))), func(p *point, d float64) { p.y += d })
	add("noise ratio, common to the readings", "dB", mean, m.YSigmaDB, func(p *point, d float64) { p.y += d })
	add("flux density of the source", "W/(m2 Hz)", m.Flux.Value, m.Flux.Sigma, func(p *point, d float64) { p.flux += d })
	add("diameter of the source", "deg", at.diameter, m.DiameterDeg.Sigma, func(p *point, d float64) { p.diameter += d })
	add("half-power beamwidth", "deg", at.beam, m.BeamDeg.Sigma, func(p *point, d float64) { p.beam += d })
	add("attenuation of the air", "dB", at.attenuation, m.Attenuation.Sigma, func(p *point, d float64) { p.attenuation += d })
	add("pointing loss on the source", "dB", at.pointing, m.PointingDB.Sigma, func(p *point, d float64) { p.pointing += d })
	for _, t := range r.Terms {
		r.Sigma = math.Hypot(r.Sigma, t.DB)
	}
	return r, nil
}

// point is one set of values of what enters.
type point struct{ y, flux, diameter, beam, attenuation, pointing float64 }

func (p *point) gOverT(lambda float64) float64 {
	rise := math.Pow(10, p.y/10) - 1
	ratio := 8 * math.Pi * unit.Boltzmann * rise / (lambda * lambda * p.flux) * ExtentFactor(p.diameter, p.beam)
	return 10*math.Log10(ratio) + p.attenuation + p.pointing
}

// ExtentFactor returns by how much more of a source's flux a beam would take in if the
// source were a point: x/(1 - exp(-x)), x = ln 2 (W/B)² for an evenly bright disc of
// diameter W in the middle of a Gaussian beam of half-power width B (the mean of the beam over
// the disc). Both in the same unit, W 0 or more, B greater than 0; 1 for a point. The
// approximation 1 + 0.38 (W/B)² that notes on Rec. ITU-R S.733-2 give is within 1 % up to W = 0.7 B.
func ExtentFactor(diameter, beam float64) float64 {
	x := math.Ln2 * (diameter / beam) * (diameter / beam)
	if x < 1e-12 {
		return 1
	}
	return -x / math.Expm1(-x)
}

// meanOf returns the mean of readings and their sample standard deviation, 0 for one.
func meanOf(v []float64) (mean, sigma float64) {
	for _, x := range v {
		mean += x / float64(len(v))
	}
	if len(v) < 2 {
		return mean, 0
	}
	for _, x := range v {
		sigma += (x - mean) * (x - mean) / float64(len(v)-1)
	}
	return mean, math.Sqrt(sigma)
}

// KeptWith returns the probability that the G/T is at least a promised one, if the error
// is normal. With no uncertainty it is 0 or 1.
func (r *Result) KeptWith(promisedDBK float64) float64 {
	if r.Sigma == 0 {
		if r.DBK >= promisedDBK {
			return 1
		}
		return 0
	}
	return 0.5 * math.Erfc((promisedDBK-r.DBK)/(r.Sigma*math.Sqrt2))
}
