package orbit

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Covariance is the covariance of a position and a velocity in m², m²/s and m²/s²:
// radial, along and across as Spread has them, then the inertial velocity along the
// same axes (the frame RTN of CCSDS 502.0-B, where the axes stand still at the
// instant). It is symmetric; only the lower triangle is read.
type Covariance [6][6]float64

// covarianceNames name the rows, as errors do.
var covarianceNames = [6]string{"radial position", "position along", "position across", "radial velocity", "velocity along", "velocity across"}

// CovarianceError says that a covariance is none.
type CovarianceError struct {
	Row    string  // in plain words
	Number int     // of the row, from 1
	Pivot  float64 // what is left of the row's variance when the rows before it are known, in m² or m²/s²
	Detail string  // in place of the pivot where that is not the fault
}

// Error names the row and its pivot.
func (e *CovarianceError) Error() string {
	if e.Detail != "" {
		return fmt.Sprintf("covariance: row %d (%s): %s", e.Number, e.Row, e.Detail)
	}
	square := "m²"
	if e.Number > 3 {
		square = "m²/s²"
	}
	return fmt.Sprintf("covariance: row %d (%s): its pivot is %.3g %s, and a covariance has none below 0: the matrix is not positive; check signs, units and the order of the rows",
		e.Number, e.Row, e.Pivot, square)
}

// pivotDoubt is how far a pivot may fall below 0 by the rounding of printed figures,
// as a share of its row's variance: OEM files carry seven digits and more.
const pivotDoubt = 1e-6

// Validate returns nil, or a *CovarianceError for the first row that is not finite,
// claims a spread of more than 10000 km, or has a negative pivot in Cholesky's
// decomposition: the matrix then is not positive. A pivot of 0 is let through: one
// direction is known exactly, or is tied to the others.
func (c *Covariance) Validate() error {
	var l [6][6]float64
	for i := range 6 {
		for j := range i + 1 {
			if math.IsNaN(c[i][j]) || math.IsInf(c[i][j], 0) {
				return &CovarianceError{Row: covarianceNames[i], Number: i + 1, Detail: fmt.Sprintf("number %d is not finite", j+1)}
			}
		}
		if i < 3 && c[i][i] > float64(mostSpread*mostSpread) {
			return &CovarianceError{Row: covarianceNames[i], Number: i + 1, Detail: fmt.Sprintf("a standard deviation of %.3g km is not allowed; it must be at most 10000 km", math.Sqrt(c[i][i])/1000)}
		}
		for j := range i {
			v := c[i][j]
			for k := range j {
				v -= l[i][k] * l[j][k]
			}
			switch {
			case l[j][j] > 0:
				l[i][j] = v / l[j][j]
			case v*v > pivotDoubt*c[i][i]*c[j][j]:
				return &CovarianceError{Row: covarianceNames[i], Number: i + 1,
					Detail: fmt.Sprintf("it goes with the %s, which has no variance of its own; the matrix is not positive", covarianceNames[j])}
			}
		}
		pivot := c[i][i]
		for k := range i {
			pivot -= l[i][k] * l[i][k]
		}
		if pivot < -pivotDoubt*math.Abs(c[i][i]) || c[i][i] < 0 {
			return &CovarianceError{Row: covarianceNames[i], Number: i + 1, Pivot: pivot}
		}
		if pivot > 1e-15*c[i][i] {
			l[i][i] = math.Sqrt(pivot)
		}
	}
	return nil
}

// at returns an element of the symmetric matrix.
func (c *Covariance) at(i, j int) float64 {
	if j > i {
		return c[j][i]
	}
	return c[i][j]
}

// Spread returns the standard deviations of the position.
func (c *Covariance) Spread() Spread {
	sigma := func(i int) unit.Length { return unit.Length(math.Sqrt(max(0, c[i][i]))) }
	s := Spread{Radial: sigma(0), Along: sigma(1), Across: sigma(2)}
	if p := float64(s.Radial * s.Along); p > 0 {
		s.RadialAlong = max(-1, min(1, c[1][0]/p))
	}
	return s
}

// Propagated returns the covariance seconds later (or earlier), for an orbit of the
// mean motion n in rad/s, by the linear motion about a circular orbit: Φ C Φᵀ. It holds
// for nearly circular orbits (MostHillEccentricity) and knows neither drag nor the
// Earth's shape, which move the orbit and its neighbours alike to first order.
//
// Source: Clohessy and Wiltshire, J. Aerospace Sci. 27, 653 (1960), the equations of
// Hill; here for velocities on axes that stand still.
func (c *Covariance) Propagated(n, seconds float64) Covariance {
	phi := hillTransition(n, seconds)
	var half, out Covariance
	for i := range 6 {
		for j := range 6 {
			for k := range 6 {
				half[i][j] += phi[i][k] * c.at(k, j)
			}
		}
	}
	for i := range 6 {
		for j := range i + 1 {
			for k := range 6 {
				out[i][j] += half[i][k] * phi[j][k]
			}
			out[j][i] = out[i][j]
		}
	}
	return out
}

// MostHillEccentricity is the eccentricity up to which Propagated is taken for good:
// its standard deviations are then within 10 % of the whole of two-body motion over a day
// (TestPropagatedAgainstTwoBody).
const MostHillEccentricity = 0.02

// hillTransition is the transition matrix of position and inertial velocity over t
// seconds: the solution of Clohessy and Wiltshire between two changes of velocity,
// from axes that stand still to those that turn and back.
func hillTransition(n, t float64) [6][6]float64 {
	s, c := math.Sincos(n * t)
	turning := [6][6]float64{
		{4 - 3*c, 0, 0, s / n, 2 * (1 - c) / n, 0},
		{6 * (s - n*t), 1, 0, 2 * (c - 1) / n, (4*s - 3*n*t) / n, 0},
		{0, 0, c, 0, 0, s / n},
		{3 * n * s, 0, 0, c, 2 * s, 0},
		{6 * n * (c - 1), 0, 0, -2 * s, 4*c - 3, 0},
		{0, 0, -n * s, 0, 0, c},
	}
	// In: v_turning = v - n × r, that is (ẋ + n y, ẏ - n x, ż).
	phi := turning
	for i := range 6 {
		phi[i][1] += n * turning[i][3]
		phi[i][0] -= n * turning[i][4]
	}
	// Out: v = v_turning + n × r.
	for j := range 6 {
		phi[3][j] -= n * phi[1][j]
		phi[4][j] += n * phi[0][j]
	}
	return phi
}
