package solve

import (
	"fmt"
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/verify"
)

// result judges the best plan once more, by the checker that shares nothing with the
// search.
func (r *run) result() (Result, error) {
	p := r.m.p
	plan := r.search.best
	p.Sort(plan.Contacts)
	for i, c := range plan.Contacts {
		plan.Contacts[i].Fixed = slices.ContainsFunc(p.Held, func(h contacts.Contact) bool { return h.Candidate == c.Candidate && h.Span == c.Span })
	}
	if err := breaches(p, plan.Contacts); err != nil {
		return Result{}, fmt.Errorf("the plan found breaks rules, which is a fault of the solver: %w", err)
	}
	w := verify.Worth(p, plan)
	bound := max(r.bound(), w.Value)
	return Result{
		Plan: plan, Worth: w, Value: w.Value, Bound: bound, GapPercent: gapPercent(w.Value, bound), Proven: r.stop == Proven,
		Stop: r.stop, Rounds: r.done, First: r.first, Left: r.m.unpriced(),
	}, nil
}

// unpriced lists the rules of the problem that the bound leaves out.
func (m *model) unpriced() []string {
	out := []string{}
	add := func(is bool, text string) {
		if is && !slices.Contains(out, text) {
			out = append(out, text)
		}
	}
	for i := range m.p.Spacecraft {
		s := &m.p.Spacecraft[i]
		add(s.Between > 0 || s.Repoint > 0, "time between contacts of a spacecraft")
		add(s.HandOver != contacts.HandOver{}, "overlap at a hand-over")
		add(s.Command != nil, "commands that an earlier uplink loads")
		if s.Recorder != nil {
			add(slices.ContainsFunc(s.Recorder.Classes, func(c contacts.Class) bool { return c.Fade > 0 }), "worth that fades with age")
		}
	}
	for i := range m.p.Antennas {
		add(m.p.Antennas[i].Slew != nil, "slews and the cable")
	}
	for i := range m.p.Shared {
		add(m.p.Shared[i].Busy, "set-up and tear-down at what antennas share")
	}
	add(len(m.p.Clashes) > 0, "clashes in one beam")
	return out
}
