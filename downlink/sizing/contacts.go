package sizing

import (
	"cmp"
	"math"
	"slices"
)

// Turn is a pass over one of several sites that hear the spacecraft in turn: passes
// that overlap count once, in the order of AOS, each from the end of the one before.
type Turn struct {
	Site, Pass int // of the flight
	From       int // the first sample of the pass that counts
	number     int // among the turns of its sites, from 1; 0: none of them
}

// Turns returns the passes over some of the flight's sites in turn. A pass that lies
// within another is left out.
func (f *Flight) Turns(sites []int) []Turn {
	var all []Turn
	for _, s := range sites {
		for p := range f.Sites[s].Passes {
			from, _ := f.Sites[s].Samples(p)
			all = append(all, Turn{Site: s, Pass: p, From: from})
		}
	}
	begin := func(t Turn) float64 { return f.Sites[t.Site].Seconds[t.From] }
	slices.SortFunc(all, func(a, b Turn) int { return cmp.Or(cmp.Compare(begin(a), begin(b)), cmp.Compare(a.Site, b.Site)) })
	out := all[:0]
	until := 0.0
	for _, t := range all {
		y := &f.Sites[t.Site]
		_, to := y.Samples(t.Pass)
		for t.From < to && y.Seconds[t.From] < until {
			t.From++
		}
		if to-t.From < 2 {
			continue
		}
		until = y.Seconds[to-1]
		t.number = len(out) + 1
		out = append(out, t)
	}
	return out
}

// stands tells whether the i-th pass stands for one of so many, spread over the year by
// the golden section so that no rhythm of the passes catches it; all do for 0 and 1.
func stands(i, oneOf int) bool {
	const golden = 0.6180339887498949
	_, part := math.Modf(float64(i) * golden)
	return part*float64(oneOf) < 1 || oneOf <= 1
}

// sampled returns the turns that stand for one of so many, and by site how many times
// their seconds stand for all.
func (s *Study) sampled(oneOf int) (turns []Turn, weight []float64) {
	weight = make([]float64, len(s.sites))
	if oneOf <= 1 {
		for i := range weight {
			weight[i] = 1
		}
		return s.turns, weight
	}
	all, some := make([]float64, len(s.sites)), make([]float64, len(s.sites))
	seen := make([]int, len(s.sites))
	for _, t := range s.turns {
		y := &s.spec.Flight.Sites[t.Site]
		_, to := y.Samples(t.Pass)
		seconds := y.Seconds[to-1] - y.Seconds[t.From]
		all[t.Site] += seconds
		if stands(seen[t.Site], oneOf) {
			some[t.Site] += seconds
			turns = append(turns, t)
		}
		seen[t.Site]++
	}
	for i := range weight {
		if some[i] > 0 {
			weight[i] = all[i] / some[i]
		}
	}
	return turns, weight
}

// allSites lists the flight's sites.
func (f *Flight) allSites() []int {
	out := make([]int, len(f.Sites))
	for i := range out {
		out[i] = i
	}
	return out
}
