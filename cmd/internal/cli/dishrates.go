package cli

import (
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/rateplan"
)

// yearRates plans the passes of a year by a spacecraft's rules. It is a sizing.Scheduler.
type yearRates struct {
	planner *ratePlanner
	modes   []rateplan.Mode
}

func newYearRates(tx *downlink.Transmitter, plan *scenario.RatePlan) (*yearRates, error) {
	p, err := newRatePlanner(tx, plan, nil)
	if err != nil {
		return nil, err
	}
	p.all = p.all.WithoutBounds()
	return &yearRates{p, p.all.Modes()}, nil
}

// Modes lists what may be sent.
func (y *yearRates) Modes() []rateplan.Mode { return y.modes }

// Rules are those of the plans.
func (y *yearRates) Rules() rateplan.Rules { return y.planner.rules }

// Settle chooses the one mode for all passes, where there is to be one.
func (y *yearRates) Settle(tracks []rateplan.Track) error { return y.planner.settle(tracks) }

// settles tells whether Settle has anything to choose.
func (y *yearRates) settles() bool { return y.planner.choice == scenario.OneForAll }

// Pattern tells what the plan of a pass hangs on; ok is false where that is more than which
// samples close in which mode.
func (y *yearRates) Pattern(t *rateplan.Track, b []byte) (pattern []byte, ok bool, err error) {
	p := y.planner
	if y.settles() || p.family != nil && p.choice == scenario.OneAPass {
		return nil, false, nil
	}
	b, err = p.all.Pattern(t, b)
	return b, true, err
}

// Plan plans a pass.
func (y *yearRates) Plan(t rateplan.Track) (rateplan.Plan, []rateplan.Mode, error) {
	p := y.planner
	by, modes := p.all, y.modes
	var err error
	switch {
	case p.common != nil:
		by, modes = p.common, p.common.Modes()
	case p.family != nil && p.choice == scenario.OneAPass:
		if by, err = p.bestOf([]rateplan.Track{t}); err != nil {
			return rateplan.Plan{}, nil, err
		}
		modes = by.Modes()
	}
	plan := by.Fixed
	if p.choice == scenario.Changing {
		plan = by.Plan
	}
	out, err := plan(t)
	return out, modes, err
}
