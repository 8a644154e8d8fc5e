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
	var station, user []ages
	for _, a := range arrivals {
		if class >= 0 && a.class != class {
			continue
		}
		station = append(station, ages{a.bytes, min(a.stationOld, a.stationNew), max(a.stationOld, a.stationNew)})
		user = append(user, ages{a.bytes, min(a.userOld, a.userNew), max(a.userOld, a.userNew)})
	}
	return Latency{spread(station), spread(user)}
}

// ages is bytes whose age is spread evenly between two bounds.
type ages struct{ bytes, low, high float64 }

// spread returns the quantiles of pieces taken together, exactly.
func spread(pieces []ages) Ages {
	if len(pieces) == 0 {
		return Ages{math.NaN(), math.NaN(), math.NaN()}
	}
	// Going up in age, each piece adds its density at its lower end and takes it off at
	// its upper one; a piece of one age is a jump.
	type edge struct{ age, density, jump float64 }
	edges := make([]edge, 0, 2*len(pieces))
	total, worst := 0.0, math.Inf(-1)
	for _, p := range pieces {
		total += p.bytes
		worst = max(worst, p.high)
		if p.high-p.low < 1e-9 {
			edges = append(edges, edge{p.high, 0, p.bytes})
			continue
		}
		d := p.bytes / (p.high - p.low)
		edges = append(edges, edge{p.low, d, 0}, edge{p.high, -d, 0})
	}
	slices.SortFunc(edges, func(a, b edge) int { return cmp.Compare(a.age, b.age) })
	quantile := func(q float64) float64 {
		want, sum, density, at := q*total, 0.0, 0.0, edges[0].age
		for _, e := range edges {
			next := sum + density*(e.age-at)
			if next >= want && density > 0 {
				return min(e.age, at+(want-sum)/density)
			}
			if next+e.jump >= want {
				return e.age
			}
			sum, at = next+e.jump, e.age
			density += e.density
		}
		return worst // rounding left the sum short
	}
	return Ages{quantile(0.5), quantile(0.95), worst}
}
