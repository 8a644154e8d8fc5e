package sizing

import (
	"cmp"
	"slices"
)

// BestSet is a set of sites that brings most of all sets of its size.
type BestSet struct {
	Sites       []int // of the flight, rising
	BytesPerDay float64
	Tried       int // sets and parts of sets that were looked at
}

// BestSets returns for each size from 1 to most the set of sites with the most bytes a
// day by Yield.Bytes; of equals the first in the order of the sites. candidates holds
// flight sites, each once; most 1 or more.
//
// The search branches on the next site to take and bounds: what a further site adds to a
// set never grows as the set does, since at each instant the best of the set counts, so that the
// greatest gains of those left, as many as are missing, bound what can be reached.
func (y *Yield) BestSets(candidates []int, most int) []BestSet {
	var out []BestSet
	for size := 1; size <= min(most, len(candidates)); size++ {
		s := setSearch{ranking: newRanking(y), size: size, best: -1}
		s.greedy(candidates)
		s.extend(slices.Sorted(slices.Values(candidates)))
		slices.Sort(s.found)
		out = append(out, BestSet{s.found, s.best / y.Days, s.tried})
	}
	return out
}

// setSearch looks for the best set of one size.
type setSearch struct {
	ranking *ranking
	size    int
	taken   []int
	best    float64 // bytes
	found   []int
	tried   int
}

// greedy takes the site that adds most, again and again: where to begin from.
func (s *setSearch) greedy(candidates []int) {
	left := slices.Sorted(slices.Values(candidates))
	for len(s.taken) < s.size {
		k, most := 0, -1.0
		for i, c := range left {
			if g := s.ranking.gain(c); g > most {
				k, most = i, g
			}
		}
		s.taken = append(s.taken, left[k])
		s.ranking.take(left[k])
		left = slices.Delete(left, k, k+1)
	}
	s.best, s.found = s.ranking.sum, slices.Clone(s.taken)
	for range s.taken {
		s.ranking.drop()
	}
	s.taken = s.taken[:0]
}

// extend tries every set that has the taken ones and some of those left.
func (s *setSearch) extend(left []int) {
	s.tried++
	missing := s.size - len(s.taken)
	if missing == 0 {
		// Rounding apart: another order of the same sums must not replace the first found.
		if s.ranking.sum > s.best*(1+1e-12) {
			s.best, s.found = s.ranking.sum, slices.Clone(s.taken)
		}
		return
	}
	type gain struct {
		site  int
		bytes float64
	}
	gains := make([]gain, len(left))
	for i, c := range left {
		gains[i] = gain{c, s.ranking.gain(c)}
	}
	slices.SortStableFunc(gains, func(a, b gain) int { return cmp.Compare(b.bytes, a.bytes) })
	for i := 0; i+missing <= len(gains); i++ {
		// Sets without the ones before i: the greatest of the rest bound them.
		bound := s.ranking.sum
		for _, g := range gains[i : i+missing] {
			bound += g.bytes
		}
		if bound <= s.best*(1+1e-12) {
			return
		}
		s.taken = append(s.taken, gains[i].site)
		s.ranking.take(gains[i].site)
		rest := make([]int, 0, len(gains)-i-1)
		for _, g := range gains[i+1:] {
			rest = append(rest, g.site)
		}
		s.extend(rest)
		s.ranking.drop()
		s.taken = s.taken[:len(s.taken)-1]
	}
}

// ranking is what a set of sites brings cell by cell, with the way back.
type ranking struct {
	yield *Yield
	now   []float32 // by cell, the best of the set
	sum   float64
	undo  []step
}

type step struct {
	sum     float64
	changed []cellGain // cells as they were
}

func newRanking(y *Yield) *ranking {
	last := int32(-1)
	for _, s := range y.sites {
		for _, c := range s {
			last = max(last, c.cell)
		}
	}
	return &ranking{yield: y, now: make([]float32, last+1)}
}

// gain returns what a site adds.
func (r *ranking) gain(site int) float64 {
	sum := 0.0
	for _, c := range r.yield.sites[site] {
		if over := c.bytes - r.now[c.cell]; over > 0 {
			sum += float64(over)
		}
	}
	return sum
}

// take adds a site; drop takes the last one away.
func (r *ranking) take(site int) {
	s := step{sum: r.sum}
	for _, c := range r.yield.sites[site] {
		if over := c.bytes - r.now[c.cell]; over > 0 {
			s.changed = append(s.changed, cellGain{cell: c.cell, bytes: r.now[c.cell]})
			r.now[c.cell] = c.bytes
			r.sum += float64(over)
		}
	}
	r.undo = append(r.undo, s)
}

func (r *ranking) drop() {
	s := r.undo[len(r.undo)-1]
	r.undo = r.undo[:len(r.undo)-1]
	for i := len(s.changed) - 1; i >= 0; i-- {
		r.now[s.changed[i].cell] = s.changed[i].bytes
	}
	r.sum = s.sum
}
