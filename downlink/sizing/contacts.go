package sizing

import (
	"cmp"
	"slices"
)

// Turn is a pass over one of several sites that hear the spacecraft in turn: passes
// that overlap count once, in the order of AOS, each from the end of the one before.
type Turn struct {
	Site, Pass int // of the flight
	From       int // the first sample of the pass that counts
}

// Turns returns the passes over some of the flight's sites in turn. A pass that lies
// within another is left out.
func (f *Flight) Turns(sites []int) []Turn {
	var all []Turn
	for _, s := range sites {
		for p := range f.Sites[s].Passes {
			from, _ := f.Sites[s].Samples(p)
			all = append(all, Turn{s, p, from})
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
		out = append(out, t)
	}
	return out
}

// allSites lists the flight's sites.
func (f *Flight) allSites() []int {
	out := make([]int, len(f.Sites))
	for i := range out {
		out[i] = i
	}
	return out
}
