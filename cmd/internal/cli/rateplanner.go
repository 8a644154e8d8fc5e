package cli

import (
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/downlink/rateplan"
	"slantwise/orbit/unit"
)

// ratePlanner plans the passes of one transmitter. Not for use by several goroutines.
type ratePlanner struct {
	choice scenario.ModeChoice
	all    *rateplan.Planner // of every mode that may be sent: the bounds
	family *rateplan.Family  // nil: the modes as they are
	rules  rateplan.Rules

	common *rateplan.Planner // of the one mode for all passes, once it is chosen
}

// newRatePlanner takes the transmitter's modes, or only those that are named.
func newRatePlanner(tx *downlink.Transmitter, plan *scenario.RatePlan, only []string) (*ratePlanner, error) {
	modes, err := pickMany("mode", only, tx.Modes, func(m *modem.Mode) string { return m.Name })
	if err != nil {
		return nil, err
	}
	p := &ratePlanner{choice: plan.Choice, rules: plan.Rules}
	p.rules.Band = tx.AllottedBandwidth
	list, err := p.modes(tx, plan, modes)
	if err == nil {
		p.all, err = rateplan.NewPlanner(list, p.rules)
	}
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("transmitter %s: %w", tx.Name, err)}
	}
	return p, nil
}

// modes are the transmitter's own, or their codings at the symbol rates of the plan.
func (p *ratePlanner) modes(tx *downlink.Transmitter, plan *scenario.RatePlan, modes []modem.Mode) ([]rateplan.Mode, error) {
	var out []rateplan.Mode
	f := rateplan.Family{Rates: plan.Rates, Low: plan.Low, High: plan.High, Band: tx.AllottedBandwidth,
		ImplementationLoss: tx.ImplementationLoss, RequiredMargin: tx.RequiredMargin}
	for i := range modes {
		r, err := modes[i].Resolve()
		if err != nil {
			return nil, err
		}
		if len(plan.Rates) == 0 && plan.High == 0 {
			m, err := rateplan.NewMode(r, tx.ImplementationLoss, tx.RequiredMargin)
			if err != nil {
				return nil, err
			}
			out = append(out, m)
			continue
		}
		if r.Row == nil || r.RequiredEbN0 != nil {
			return nil, fmt.Errorf("mode %s: other symbol rates need a modulation and coding of the catalogue, without a required Eb/N0 of the mode's own", r.Name)
		}
		f.RollOff, f.Pilots = max(f.RollOff, r.Shaping), f.Pilots || r.Pilots
		if !slices.ContainsFunc(f.Rows, func(row modem.Row) bool { return row.Name() == r.Row.Name() }) {
			f.Rows = append(f.Rows, *r.Row)
		}
	}
	if len(f.Rows) == 0 {
		return out, nil
	}
	p.family = &f
	return f.Modes(plan.Steps)
}

// copy returns a planner for another goroutine.
func (p *ratePlanner) copy() (*ratePlanner, error) {
	out := *p
	var err error
	if out.all, err = rateplan.NewPlanner(p.all.Modes(), p.rules); err != nil || p.common == nil {
		return &out, err
	}
	out.common, err = rateplan.NewPlanner(p.common.Modes(), p.rules)
	return &out, err
}

// settle chooses the one mode for all passes, where there is to be one.
func (p *ratePlanner) settle(tracks []rateplan.Track) error {
	if p.choice != scenario.OneForAll || len(tracks) == 0 {
		return nil
	}
	var err error
	p.common, err = p.bestOf(tracks)
	return err
}

// bestOf returns a planner of the one mode that is best for some passes; of all where
// none brings anything.
func (p *ratePlanner) bestOf(tracks []rateplan.Track) (*rateplan.Planner, error) {
	var mode rateplan.Mode
	if p.family != nil {
		best, bytes, err := p.family.Best(tracks, p.rules.Guard, p.rules.Relock)
		if err != nil || !(bytes > 0) {
			return p.all, err
		}
		mode = best
	} else {
		c, err := p.all.Common(tracks)
		if err != nil || c.Mode < 0 {
			return p.all, err
		}
		mode = p.all.Modes()[c.Mode]
	}
	return rateplan.NewPlanner([]rateplan.Mode{mode}, p.rules)
}

// ratedPass is the plan of a pass with what it is counted in.
type ratedPass struct {
	plan  rateplan.Plan
	modes []rateplan.Mode
	fixed rateplan.Plan // the best single mode, for what changing gains
	by    *rateplan.Planner

	relock time.Duration
}

// plan plans a pass. The bounds are those of all modes.
func (p *ratePlanner) plan(t rateplan.Track) (*ratedPass, error) {
	by := p.all
	fixed, err := p.all.Fixed(t)
	if err != nil {
		return nil, err
	}
	switch {
	case p.common != nil:
		by = p.common
	case p.family != nil && p.choice == scenario.OneAPass:
		if by, err = p.bestOf([]rateplan.Track{t}); err != nil {
			return nil, err
		}
	}
	out := &ratedPass{fixed: fixed, by: by, modes: by.Modes(), relock: p.rules.Relock}
	if p.choice == scenario.Changing {
		out.plan, err = by.Plan(t)
	} else {
		out.plan, err = by.Fixed(t)
	}
	out.plan.FreeBytes = max(fixed.FreeBytes, out.plan.FreeBytes)
	return out, err
}

// needAt returns the C/N0 that a step's mode needs.
func (r *ratedPass) needAt(step *rateplan.Step) float64 { return r.modes[step.Mode].NeedDBHz }

// leastMargin is a step's least margin as in the budget, the required one not taken off.
func leastMargin(step *rateplan.Step, required unit.DB) float64 {
	return float64(step.LeastMargin + required)
}
