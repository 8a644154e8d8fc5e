package fit

import (
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
)

// Uncertainty is how uncertain the position of a fitted set is over time: the covariance
// of the elements, carried by the same partials that the fit used, and the lasting part of the residuals on
// top, since what SGP4 leaves out does not average away. It implements orbit.Uncertainty and is
// safe for use by many goroutines.
//
// Beyond the data it grows by what the elements leave open (mean motion, B*), not by what the
// air will do.
type Uncertainty struct {
	probe  *probe
	active []int
	matrix [unknowns][unknowns]float64
	basis  string

	lasting [3]float64 // radial, along, across, m
}

// At returns the spread at t. It fails where SGP4 has no state there, by the errors of
// orbit.Propagation.At.
func (u *Uncertainty) At(t time.Time) (orbit.Spread, error) {
	c, err := u.Whole(t)
	if err != nil {
		return orbit.Spread{}, err
	}
	return c.Spread(), nil
}

// Whole returns the covariance that At takes its spread from: that of the elements with
// what lasts of the residuals on the positions. It fails as At does.
func (u *Uncertainty) Whole(t time.Time) (orbit.Covariance, error) {
	c, err := u.Covariance(t)
	if err != nil {
		return orbit.Covariance{}, err
	}
	for i, root := range u.lasting {
		c[i][i] += root * root
	}
	return c, nil
}

// Covariance returns what the covariance of the elements alone is at t, without the
// residuals. It fails as At does.
func (u *Uncertainty) Covariance(t time.Time) (orbit.Covariance, error) {
	var partials [6][unknowns]float64
	state, err := u.copy().at(t, &partials)
	if err != nil {
		return orbit.Covariance{}, err
	}
	axes := axesOf(orbit.Vec3{X: state[0], Y: state[1], Z: state[2]}, orbit.Vec3{X: state[3], Y: state[4], Z: state[5]})
	var turned [6][unknowns]float64
	for i := range 6 {
		base, a := i/3*3, axes[i%3]
		for k := range u.active {
			turned[i][k] = a.X*partials[base][k] + a.Y*partials[base+1][k] + a.Z*partials[base+2][k]
		}
	}
	var c orbit.Covariance
	for i := range 6 {
		for j := range 6 {
			for k, a := range u.active {
				for l, b := range u.active {
					c[i][j] += turned[i][k] * u.matrix[a][b] * turned[j][l]
				}
			}
		}
	}
	return c, nil
}

// copy keeps what at writes into from other goroutines.
func (u *Uncertainty) copy() *probe {
	p := *u.probe
	return &p
}

// Basis says where the figures come from.
func (u *Uncertainty) Basis() string { return u.basis }

// newUncertainty prepares the partials about the solution.
func newUncertainty(p *point, pr *problem, r *Result) (*Uncertainty, error) {
	b, err := newProbe(p.at, pr.active, pr.base, farthest(pr.data, pr.base.Epoch), 1)
	if err != nil {
		return nil, err
	}
	u := &Uncertainty{probe: b, active: pr.active, matrix: r.Covariance, lasting: lasting(r.Residuals)}
	u.basis = fmt.Sprintf("from the covariance of a fit to %d data of %s to %s, scaled by the variance of their residuals; "+
		"what lasts of the residuals from datum to datum is added (%.3g m radially, %.3g m along, %.3g m across)",
		r.Used, pr.data[0].Time.UTC().Format(time.RFC3339), pr.data[len(pr.data)-1].Time.UTC().Format(time.RFC3339),
		u.lasting[0], u.lasting[1], u.lasting[2])
	return u, nil
}

// lasting returns the root of the covariance of neighbouring residuals, radially, along
// and across: errors of the theory last from datum to datum, those of measuring do not. A
// covariance within twice its own sampling error (variance/√n) is none.
func lasting(rs []Residual) (root [3]float64) {
	var last [3]float64
	var products, squares [3]float64
	n := 0.0
	for i := range rs {
		if rs[i].Rejected {
			continue
		}
		now := [3]float64{rs[i].Radial, rs[i].Along, rs[i].Across}
		for c, x := range now {
			products[c] += x * last[c]
			squares[c] += x * x
		}
		last = now
		n++
	}
	for c := range root {
		if products[c] > 2*squares[c]/math.Sqrt(n) {
			root[c] = math.Sqrt(products[c] / n)
		}
	}
	return root
}

var _ orbit.Uncertainty = (*Uncertainty)(nil)

// sigma returns the standard deviation of an unknown.
func (r *Result) sigma(j int) float64 { return math.Sqrt(r.Covariance[j][j]) }
