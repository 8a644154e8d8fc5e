package recorder

import (
	"cmp"
	"math"
	"slices"
)

// Latency is the age of data, in seconds, weighted by bytes. Where nothing arrived all
// is NaN.
type Latency struct{ AtStation, AtUser Ages }

// Ages is the spread of an age, in seconds.
type Ages struct{ Median, P95, Worst float64 }

// latency returns the ages of a class, or of all for -1.
func latency(arrivals []arrival, class int) Latency {
	pieces := make([]ages, 0, len(arrivals))
	gather := func(of func(*arrival) (a, b float64)) Ages {
		pieces = pieces[:0]
		for i := range arrivals {
			if class < 0 || arrivals[i].class == class {
				a, b := of(&arrivals[i])
				pieces = append(pieces, ages{arrivals[i].bytes, min(a, b), max(a, b)})
			}
		}
		return spread(pieces)
	}
	l := Latency{AtStation: gather(func(a *arrival) (float64, float64) { return a.stationOld, a.stationNew })}
	l.AtUser = l.AtStation
	if slices.ContainsFunc(arrivals, arrival.delayed) {
		l.AtUser = gather(func(a *arrival) (float64, float64) { return a.userOld, a.userNew })
	}
	return l
}

// delayed tells whether the ground line made the data older.
func (a arrival) delayed() bool { return a.userOld != a.stationOld || a.userNew != a.stationNew }

// ages is bytes whose age is spread evenly between two bounds.
type ages struct{ bytes, low, high float64 }

// spread returns the quantiles of pieces taken together, exactly.
func spread(pieces []ages) Ages {
	if len(pieces) == 0 {
		return Ages{math.NaN(), math.NaN(), math.NaN()}
	}
	total, worst := 0.0, math.Inf(-1)
	for _, p := range pieces {
		total += p.bytes
		worst = max(worst, p.high)
	}
	return Ages{min(worst, quantile(pieces, 0.5*total)), min(worst, quantile(pieces, 0.95*total)), worst}
}

// quantile returns the least age up to which there are so many bytes. It halves the
// ages and keeps the pieces that are still in question; when they are few, or do not
// get fewer, it sums them up in the order of age. So no large list is sorted.
func quantile(pieces []ages, want float64) float64 {
	low, high := math.Inf(1), math.Inf(-1)
	for _, p := range pieces {
		low, high = min(low, p.low), max(high, p.high)
	}
	open := slices.Clone(pieces)
	below := 0.0 // bytes not younger than low, no longer among the open pieces
	for round := 0; len(open) > 64 && round < 40; round++ {
		middle := low + (high-low)/2
		sum := below
		for _, p := range open {
			sum += p.upTo(middle)
		}
		if sum >= want {
			high = middle
		} else {
			low = middle
		}
		kept := open[:0]
		for _, p := range open {
			switch {
			case p.high <= low:
				below += p.bytes
			case p.low <= high:
				kept = append(kept, p)
			}
		}
		open = kept
	}
	return sweep(open, below, want, high)
}

// upTo returns the bytes of a piece up to an age.
func (p *ages) upTo(age float64) float64 {
	switch {
	case age >= p.high:
		return p.bytes
	case age <= p.low:
		return 0
	}
	return p.bytes * (age - p.low) / (p.high - p.low)
}

// sweep goes up in age: each piece adds its density at its lower end and takes it off
// at its upper one; a piece of one age is a jump. Where rounding leaves the sum short
// it returns the end.
func sweep(pieces []ages, sum, want, end float64) float64 {
	type edge struct{ age, density, jump float64 }
	edges := make([]edge, 0, 2*len(pieces))
	for _, p := range pieces {
		if p.high-p.low < 1e-9 {
			edges = append(edges, edge{p.high, 0, p.bytes})
			continue
		}
		d := p.bytes / (p.high - p.low)
		edges = append(edges, edge{p.low, d, 0}, edge{p.high, -d, 0})
	}
	slices.SortFunc(edges, func(a, b edge) int { return cmp.Compare(a.age, b.age) })
	density, at := 0.0, math.Inf(-1)
	for _, e := range edges {
		next := sum
		if density > 0 {
			next += density * (e.age - at)
			if next >= want {
				return min(e.age, at+(want-sum)/density)
			}
		}
		if next+e.jump >= want {
			return e.age
		}
		sum, at = next+e.jump, e.age
		density += e.density
	}
	return end
}
