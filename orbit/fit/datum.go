package fit

import (
	"cmp"
	"math"
	"slices"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Datum is one position, perhaps with the velocity, in TEME.
type Datum struct {
	Time        time.Time  // UTC
	Position    orbit.Vec3 // m
	Velocity    orbit.Vec3 // m/s; counted only where HasVelocity
	HasVelocity bool

	// PositionSigma and VelocitySigma are standard deviations a component, which weigh the
	// datum against the others; 0: 1 m, and the mean motion (rad/s) times PositionSigma.
	PositionSigma unit.Length
	VelocitySigma unit.Speed

	Line int // where it was read, from 1; 0 where lines do not apply
}

// Heights between which a position is taken for one of an orbit round the Earth.
const (
	leastRadius = 6378.135e3 // m, equatorial radius of WGS-72
	mostRadius  = 500_000e3  // m, beyond the Moon
)

// inOrder returns the data by their times, those in a span alone; several of one instant
// count each. It fails with the first datum that cannot be one.
func inOrder(data []Datum, from, to time.Time) ([]Datum, error) {
	out := make([]Datum, 0, len(data))
	for _, d := range data {
		if !from.IsZero() && d.Time.Before(from) || !to.IsZero() && d.Time.After(to) {
			continue
		}
		if err := d.check(); err != nil {
			return nil, err
		}
		out = append(out, d)
	}
	slices.SortStableFunc(out, func(a, b Datum) int { return a.Time.Compare(b.Time) })
	return out, nil
}

func (d *Datum) check() error {
	refuse := func(found, next string) error {
		return &Refusal{Why: BadDatum, Time: d.Time, Line: d.Line, Found: found, Next: next}
	}
	r := d.Position.Norm()
	switch {
	case !(r >= leastRadius && r <= mostRadius):
		return refuse("the position lies "+kilometres(r)+" from the Earth's centre, not 6378.135 to 500000 km",
			"check the columns and their unit, km")
	case d.HasVelocity && !(d.Velocity.Norm() > 0 && d.Velocity.Norm() < 20e3):
		return refuse("the speed is "+kilometres(d.Velocity.Norm())+"/s, not within 0 to 20 km/s",
			"check the columns and their unit, km/s")
	case !(d.PositionSigma >= 0) || !(d.VelocitySigma >= 0) || math.IsInf(float64(d.PositionSigma), 0) || math.IsInf(float64(d.VelocitySigma), 0):
		return refuse("a standard deviation is negative or no number", "give one greater than 0, or leave it out")
	}
	return nil
}

// rows is how many numbers the datum gives.
func (d *Datum) rows() int {
	if d.HasVelocity {
		return 6
	}
	return 3
}

// sigmas returns the standard deviations in m and m/s on an orbit with a mean motion
// in rad/s.
func (d *Datum) sigmas(motion float64) (position, velocity float64) {
	position = cmp.Or(float64(d.PositionSigma), 1)
	return position, cmp.Or(float64(d.VelocitySigma), position*motion)
}

func countRows(data []Datum) (n int) {
	for i := range data {
		n += data[i].rows()
	}
	return n
}
