package solve

import (
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/verify"
)

// mostRestored is how many contacts a search tries to put back: each try is judged as a
// whole plan.
const mostRestored = 60

// restored puts contacts that were moved within their window back to the times that they
// had in the plan in force, where that breaks no rule and the plan is worth more with it.
// The neighbourhood search moves contacts for what fits at the time, and does not look
// back when the reason is gone.
func restored(p *contacts.Problem, plan contacts.Plan) contacts.Plan {
	value, tries := verify.Worth(p, plan).Value, 0
	for i := range plan.Contacts {
		c := plan.Contacts[i]
		at := slices.IndexFunc(p.InForce, func(f contacts.Contact) bool { return f.Candidate == c.Candidate && f.Overlap(c.Span) > 0 })
		if at < 0 || p.InForce[at].Span == c.Span || slices.ContainsFunc(p.Held, func(h contacts.Contact) bool { return h.Candidate == c.Candidate && h.Span == c.Span }) {
			continue
		}
		if tries++; tries > mostRestored {
			break
		}
		back := contacts.Plan{Contacts: slices.Clone(plan.Contacts)}
		back.Contacts[i].Span = p.InForce[at].Span
		p.Sort(back.Contacts)
		if w := verify.Worth(p, back).Value; w > value && len(verify.Plan(p, back)) == 0 {
			plan, value = back, w
		}
	}
	return plan
}
