package orbit

import (
	"fmt"
	"slices"
	"time"
)

// CovarianceAt is a covariance with its instant.
type CovarianceAt struct {
	Time       time.Time
	Covariance Covariance
}

// CovarianceUncertainty is the uncertainty that given covariances tell. At a given
// instant it is as given; between two it passes from one to the other in proportion to
// the time, which keeps it positive; outside them it follows from the nearest by
// Covariance.Propagated, within the span. It is immutable.
type CovarianceUncertainty struct {
	points   []CovarianceAt
	motion   float64
	from, to time.Time
	source   string
}

// NewCovarianceUncertainty prepares covariances, in any order, one or more, no two of
// one instant. motion is the orbit's mean motion in rad/s, above 0; eccentricity decides
// whether it may be followed beyond the covariances given: over
// MostHillEccentricity the span is cut to them. from and to are the span that the
// answers are wanted for; source says where the covariances are from.
//
// It returns a *CovarianceError for a matrix that is not positive, with its instant.
func NewCovarianceUncertainty(points []CovarianceAt, motion, eccentricity float64, from, to time.Time, source string) (*CovarianceUncertainty, error) {
	if len(points) == 0 {
		return nil, fmt.Errorf("covariance: there is none; give at least one")
	}
	if !(motion > 0 && motion < 0.01) {
		return nil, fmt.Errorf("covariance: a mean motion of %g rad/s is not allowed; it must be above 0 and below 0.01 rad/s", motion)
	}
	u := &CovarianceUncertainty{points: slices.Clone(points), motion: motion, from: from, to: to, source: source}
	slices.SortStableFunc(u.points, func(a, b CovarianceAt) int { return a.Time.Compare(b.Time) })
	for i := range u.points {
		p := &u.points[i]
		if err := p.Covariance.Validate(); err != nil {
			return nil, fmt.Errorf("at %s: %w", p.Time.UTC().Format(timeLayout), err)
		}
		if i > 0 && p.Time.Equal(u.points[i-1].Time) {
			return nil, fmt.Errorf("covariance: two are given for %s; give one for each instant", p.Time.UTC().Format(timeLayout))
		}
	}
	first, last := u.points[0].Time, u.points[len(u.points)-1].Time
	if !(eccentricity <= MostHillEccentricity) {
		u.from, u.to = first, last
	}
	return u, nil
}

// Span returns from when to when the uncertainty is known.
func (u *CovarianceUncertainty) Span() (from, to time.Time) { return u.from, u.to }

// At returns the spread at t, or a *UncertaintySpanError outside the span.
func (u *CovarianceUncertainty) At(t time.Time) (Spread, error) {
	first, last := &u.points[0], &u.points[len(u.points)-1]
	inside := !t.Before(first.Time) && !t.After(last.Time)
	if !inside && (t.Before(u.from) || t.After(u.to)) {
		return Spread{}, &UncertaintySpanError{Time: t, From: u.from, To: u.to}
	}
	switch {
	case t.Before(first.Time):
		return u.propagated(first, t), nil
	case !t.Before(last.Time):
		return u.propagated(last, t), nil
	}
	i, found := slices.BinarySearchFunc(u.points, t, func(p CovarianceAt, t time.Time) int { return p.Time.Compare(t) })
	if found {
		return u.points[i].Covariance.Spread(), nil
	}
	a, b := &u.points[i-1], &u.points[i]
	share := t.Sub(a.Time).Seconds() / b.Time.Sub(a.Time).Seconds()
	var mixed Covariance
	for i := range 3 {
		for j := range i + 1 {
			mixed[i][j] = a.Covariance[i][j]*(1-share) + b.Covariance[i][j]*share
		}
	}
	return mixed.Spread(), nil
}

func (u *CovarianceUncertainty) propagated(p *CovarianceAt, t time.Time) Spread {
	if t.Equal(p.Time) {
		return p.Covariance.Spread()
	}
	c := p.Covariance.Propagated(u.motion, t.Sub(p.Time).Seconds())
	return c.Spread()
}

// Basis names the source and the number of covariances.
func (u *CovarianceUncertainty) Basis() string {
	first := u.points[0].Time.UTC().Format(timeLayout)
	if len(u.points) == 1 {
		return fmt.Sprintf("from the covariance of %s (%s), followed by the equations of Clohessy and Wiltshire", first, u.source)
	}
	last := u.points[len(u.points)-1].Time.UTC().Format(timeLayout)
	return fmt.Sprintf("from %d covariances of %s to %s (%s), between them in proportion to time, outside them by the equations of Clohessy and Wiltshire",
		len(u.points), first, last, u.source)
}
