package station

import (
	"math"

	"slantwise/orbit/unit"
)

// LargestMismatch caps the polarisation loss: the formula gives infinity for perfect
// opposites, but no antenna is purer than about 30 dB on its axis (common practice),
// so that much always gets across.
const LargestMismatch unit.DB = 30

// Mismatch is the polarisation loss between two antennas.
type Mismatch struct {
	Loss  unit.DB // for the budget
	Best  unit.DB // at the kindest angle between the axes
	Basis string  // what Loss is: "worst angle between the axes", ...

	// NinetyPercent is the loss not exceeded at 90 % of the angles; only where both
	// are linear and the angle between them is not known. It is NaN otherwise.
	NinetyPercent unit.DB
	Capped        bool // Loss is LargestMismatch in place of the formula's
}

// Mismatch returns the polarisation loss between the wave of a and an antenna of b.
//
// Circular on either side: the worst angle between the major axes. Linear on both:
// at the tilts, or the mean of the power over all angles where a tilt is not known.
// Where a linear antenna has an axial ratio its hand is not known and the worse is
// taken. A missing axial ratio is a perfect circle or line. Source: ellipse formula
// of the textbooks (polarization efficiency from signed axial ratios).
func (a Polarization) Mismatch(b Polarization) Mismatch {
	m := Mismatch{NinetyPercent: unit.DB(math.NaN())}
	var loss float64
	switch {
	case a.Kind != Linear || b.Kind != Linear:
		m.Basis = "worst angle between the axes"
		loss = worstLoss(a, b, -1)
		m.Best = capped(bestLoss(a, b, 1))
	case a.Tilt != nil && b.Tilt != nil:
		m.Basis = "at the stated tilts"
		cos2d := math.Cos(2 * (*a.Tilt - *b.Tilt).Radians())
		loss = worstLoss(a, b, cos2d)
		m.Best = capped(bestLoss(a, b, cos2d))
	default:
		m.Basis = "mean power over all angles between the axes, the tilt not being known"
		loss = worstLoss(a, b, 0) // cos 2d vanishes in the mean
		m.Best = capped(bestLoss(a, b, 1))
		// d is uniform: nine in ten angles lie within 81° of alignment.
		m.NinetyPercent = capped(worstLoss(a, b, math.Cos(2*(81*unit.Degree).Radians())))
	}
	m.Loss = capped(loss)
	m.Capped = loss > float64(LargestMismatch)
	return m
}

func capped(loss float64) unit.DB { return min(unit.DB(loss), LargestMismatch) }

func worstLoss(a, b Polarization, cos2d float64) float64 {
	worst := 0.0
	for _, e := range efficiencies(a, b, cos2d) {
		worst = max(worst, lossOf(e))
	}
	return worst
}

func bestLoss(a, b Polarization, cos2d float64) float64 {
	best := math.Inf(1)
	for _, e := range efficiencies(a, b, cos2d) {
		best = min(best, lossOf(e))
	}
	return best
}

// lossOf keeps rounding from making a gain of a perfect match or a logarithm of a
// negative efficiency of a perfect mismatch.
func lossOf(efficiency float64) float64 {
	switch {
	case efficiency >= 1:
		return 0
	case efficiency <= 0:
		return math.Inf(1)
	}
	return -10 * math.Log10(efficiency)
}

// efficiencies gives the polarisation efficiency for each combination of hands that
// is possible. With the signed ellipticity q = 1/r of each and d between the axes it
// is 1/2 + (4 q1 q2 + (1-q1²)(1-q2²) cos 2d) / (2 (1+q1²)(1+q2²)).
func efficiencies(a, b Polarization, cos2d float64) []float64 {
	var out []float64
	for _, q1 := range a.ellipticities() {
		for _, q2 := range b.ellipticities() {
			s1, s2 := q1*q1, q2*q2
			out = append(out, 0.5+(4*q1*q2+(1-s1)*(1-s2)*cos2d)/(2*(1+s1)*(1+s2)))
		}
	}
	return out
}

// ellipticities returns the ratio of minor to major axis, positive for the right
// hand; both signs where the hand is not known.
func (a Polarization) ellipticities() []float64 {
	switch a.Kind {
	case RightHandCircular:
		return []float64{a.axisRatio(1)}
	case LeftHandCircular:
		return []float64{-a.axisRatio(1)}
	}
	q := a.axisRatio(0)
	if q == 0 {
		return []float64{0}
	}
	return []float64{q, -q}
}

func (a Polarization) axisRatio(without float64) float64 {
	if a.AxialRatio == nil {
		return without
	}
	return math.Pow(10, -float64(*a.AxialRatio)/20)
}

// String names the kind as the scenario writes it.
func (k PolarizationKind) String() string {
	return [...]string{"rhcp", "lhcp", "linear"}[k]
}
