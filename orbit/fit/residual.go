package fit

import (
	"math"
	"slices"
	"time"

	"slantwise/orbit"
)

// Residual is a datum less the fit.
type Residual struct {
	Time                  time.Time
	Line                  int     // as in the datum
	Radial, Along, Across float64 // m
	// Of the velocity, on the same axes in m/s; NaN where the datum has none.
	RadialRate, AlongRate, AcrossRate float64

	Rejected bool // by Options.RejectBeyond: it does not count in the fit
	Suspect  bool // more than four times the median distance; it counts unless Rejected
}

// Distance returns the length of the position's residual in m.
func (r *Residual) Distance() float64 {
	return math.Sqrt(r.Radial*r.Radial + r.Along*r.Along + r.Across*r.Across)
}

// Statistics of one component of the residuals that count.
type Statistics struct {
	RMS, Mean, Worst float64 // m or m/s; the worst with its sign
	At               time.Time
}

// residuals propagates the elements to every datum.
func residuals(data []Datum, el orbit.Elements) ([]Residual, error) {
	p, err := orbit.NewPropagation(el)
	if err != nil {
		return nil, err
	}
	out := make([]Residual, len(data))
	for i := range data {
		d := &data[i]
		position, velocity, err := p.At(d.Time)
		if err != nil {
			return nil, err
		}
		a := axesOf(position, velocity)
		off := d.Position.Sub(position)
		r := Residual{Time: d.Time, Line: d.Line, Radial: off.Dot(a[0]), Along: off.Dot(a[1]), Across: off.Dot(a[2]),
			RadialRate: math.NaN(), AlongRate: math.NaN(), AcrossRate: math.NaN()}
		if d.HasVelocity {
			off = d.Velocity.Sub(velocity)
			r.RadialRate, r.AlongRate, r.AcrossRate = off.Dot(a[0]), off.Dot(a[1]), off.Dot(a[2])
		}
		out[i] = r
	}
	return out, nil
}

// axesOf returns the unit vectors radial, along and across.
func axesOf(position, velocity orbit.Vec3) [3]orbit.Vec3 {
	radial, across := position.Unit(), position.Cross(velocity).Unit()
	return [3]orbit.Vec3{radial, across.Cross(radial), across}
}

// statistics goes over the residuals that count and exist.
func statistics(rs []Residual, of func(*Residual) float64) Statistics {
	s, n := Statistics{}, 0.0
	for i := range rs {
		x := of(&rs[i])
		if rs[i].Rejected || math.IsNaN(x) {
			continue
		}
		n++
		s.RMS += x * x
		s.Mean += x
		if math.Abs(x) > math.Abs(s.Worst) || s.At.IsZero() {
			s.Worst, s.At = x, rs[i].Time
		}
	}
	if n == 0 {
		return Statistics{RMS: math.NaN(), Mean: math.NaN(), Worst: math.NaN()}
	}
	s.RMS, s.Mean = math.Sqrt(s.RMS/n), s.Mean/n
	return s
}

// suspectBeyond is how many times the median distance makes a datum suspect. Of errors by
// a normal law alike in three directions one in 10⁷ lies beyond (6.2 standard deviations).
const suspectBeyond = 4

// medianPerSigma is the median distance of errors by a normal law alike in three
// directions, in standard deviations of one (the median of the Maxwell distribution).
const medianPerSigma = 1.5382

// medianDistance returns the median of the distances of the residuals that count.
func medianDistance(rs []Residual) float64 {
	var ds []float64
	for i := range rs {
		if !rs[i].Rejected {
			ds = append(ds, rs[i].Distance())
		}
	}
	if len(ds) == 0 {
		return 0
	}
	slices.Sort(ds)
	return ds[len(ds)/2]
}

// numericalNoise in m: distances under it say nothing of the data.
const numericalNoise = 0.05

func markSuspects(rs []Residual) {
	limit := suspectBeyond * math.Max(medianDistance(rs), numericalNoise)
	for i := range rs {
		rs[i].Suspect = rs[i].Distance() > limit
	}
}

// dataPerIndependent returns how many data say as much as one that is independent of the
// others: (1+ρ)/(1-ρ) by the correlation ρ of the residuals from one datum to the next, as
// for a first-order autoregressive series; 1 where they do not go together. It leaves the fit
// at least as many independent numbers as it has unknowns.
//
// Source: the variance of the mean of such a series, any text on time series.
func dataPerIndependent(rs []Residual, sought int) float64 {
	sum, products, n := 0.0, 0.0, 0
	var last *Residual
	for i := range rs {
		r := &rs[i]
		if r.Rejected {
			continue
		}
		n++
		sum += r.Distance() * r.Distance()
		if last != nil {
			products += r.Radial*last.Radial + r.Along*last.Along + r.Across*last.Across
		}
		last = r
	}
	most := math.Max(1, float64(3*n)/float64(sought))
	if n < 2 || !(sum > 0) {
		return 1
	}
	rho := products / sum * float64(n) / float64(n-1)
	switch {
	case rho <= 0:
		return 1
	case rho >= 1:
		return most
	}
	return math.Min(most, (1+rho)/(1-rho))
}
