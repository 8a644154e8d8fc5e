package rateplan

import "slantwise/orbit/unit"

// OneRate is a pass in which the coding changes and the symbol rate does not.
type OneRate struct {
	SymbolRate unit.Frequency // 0 where nothing can be brought down
	Modes      []Mode         // the codings at that rate, in which Plan counts
	Plan       Plan
}

// PlanOneRate returns the best schedule whose modes all have one symbol rate of the
// list, or one of steps rates from the lowest to the highest of the range.
func (f *Family) PlanOneRate(t Track, rules Rules, steps int) (OneRate, error) {
	members, err := f.membersFor(steps)
	if err != nil {
		return OneRate{}, err
	}
	var best OneRate
	for _, rate := range f.steps(steps) {
		modes := Unsurpassed(modesAt(members, rate))
		if len(modes) == 0 {
			continue
		}
		p, err := NewPlanner(modes, rules)
		if err != nil {
			return OneRate{}, err
		}
		plan, err := p.Plan(t)
		if err != nil {
			return OneRate{}, err
		}
		if plan.Bytes > best.Plan.Bytes {
			best = OneRate{unit.Frequency(rate), modes, plan}
		}
	}
	return best, nil
}
