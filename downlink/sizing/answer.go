package sizing

import (
	"math"
)

// Verdict is what one requirement says.
type Verdict struct {
	Need
	ReachedNow float64 // with the scenario's own antennas
	MetNow     bool
	Alone      Found // the diameter that it would need by itself
}

// Answer says whether the scenario's antennas suffice and what would.
type Answer struct {
	Now       *Outcome // the scenario's own antennas
	Verdicts  []Verdict
	Satisfied bool     // by the scenario's own
	Together  Found    // the least diameter that meets all
	Then      *Outcome // what that diameter brings; nil where none meets all
	Binding   int      // among the verdicts: the one that asks for the most, or cannot be met; -1 where nothing is required
	Trade     []*Outcome
	Limit     Limit
}

// Answer evaluates a range of diameters and searches it for every requirement and for
// all together. Progress is told how much of the work is done; nil: nobody asks.
func (s *Study) Answer(r Range, progress func(done, total int)) (*Answer, error) {
	if err := r.Check(); err != nil {
		return nil, err
	}
	a := &Answer{Binding: -1}
	grid, needs := r.Grid(), s.spec.Needs.List()
	total := len(grid) + len(needs) + 3
	tell := func(done int) {
		if progress != nil {
			progress(done, total)
		}
	}
	var err error
	if a.Now, err = s.Outcome(Variant{}); err != nil {
		return nil, err
	}
	tell(1)
	for i, d := range grid {
		o, err := s.Outcome(Variant{Diameter: d})
		if err != nil {
			return nil, err
		}
		a.Trade = append(a.Trade, o)
		tell(2 + i)
	}
	a.Satisfied = true
	for i, n := range needs {
		v := Verdict{Need: n, ReachedNow: n.Reached(a.Now), MetNow: n.Met(a.Now)}
		if v.Alone, err = s.Least([]Need{n}, r); err != nil {
			return nil, err
		}
		a.Verdicts = append(a.Verdicts, v)
		a.Satisfied = a.Satisfied && v.MetNow
		tell(2 + len(grid) + i)
	}
	if len(needs) > 0 {
		if a.Together, err = s.Least(needs, r); err != nil {
			return nil, err
		}
		a.Binding = binding(a.Verdicts, a.Together)
		if d := a.Together.Diameter; d > 0 {
			if a.Then, err = s.Outcome(Variant{Diameter: d}); err != nil {
				return nil, err
			}
		}
	}
	a.Limit, err = s.limit(a.Trade, r)
	tell(total)
	return a, err
}

// binding returns the requirement that decides: one that no diameter meets, the worst
// missed of them; else the one that needs the greatest diameter. Where each is met by
// some diameter and none meets all, the one that is missed worst where they come
// nearest.
func binding(verdicts []Verdict, together Found) int {
	best, most := -1, math.Inf(-1)
	for i := range verdicts {
		v := &verdicts[i]
		miss := v.Alone.Diameter.Metres()
		switch {
		case v.Alone.Nearest != nil:
			miss = 1e6 - (&search{needs: []Need{v.Need}}).worst(v.Alone.Nearest)
		case together.Nearest != nil:
			miss = 1e3 - (&search{needs: []Need{v.Need}}).worst(together.Nearest)
		}
		if miss > most {
			best, most = i, miss
		}
	}
	return best
}
