package explain

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/solve"
	"slantwise/downlink/contacts/verify"
)

// Untaken is a window in which a plan has no contact.
type Untaken struct {
	Candidate int              `json:"candidate"`
	Name      string           `json:"name"`
	Possible  bool             `json:"possible"` // some plan could have a contact in it
	Contact   contacts.Contact `json:"-"`        // the one that was weighed
	Worth     float64          `json:"worth"`    // what it brings alone

	Breaches []verify.Breach `json:"breaches"` // what it would break if it were added to the plan as it is
	Instead  []int           `json:"instead"`  // places in the plan of the contacts in its way
	Priced   bool            `json:"-"`        // Cost is known
	Cost     float64         `json:"cost"`     // what the plan would lose at most
	Text     string          `json:"text"`
}

// Windows explains the windows of a problem that a plan leaves, in the order of the
// candidates; of those named alone where only is not nil. The plan must keep the rules.
// When the context ends it returns what it has.
func Windows(ctx context.Context, p *contacts.Problem, plan contacts.Plan, only []int) ([]Untaken, error) {
	t, err := solve.NewTrials(p, plan)
	if err != nil {
		return nil, err
	}
	taken := make([]bool, len(p.Candidates))
	for _, c := range plan.Contacts {
		taken[c.Candidate] = true
	}
	if only == nil {
		for i := range p.Candidates {
			only = append(only, i)
		}
	}
	out := []Untaken{}
	for _, i := range only {
		if ctx.Err() != nil {
			break
		}
		if !taken[i] {
			out = append(out, window(p, plan, t, i))
		}
	}
	return out, nil
}

// window explains one window.
func window(p *contacts.Problem, plan contacts.Plan, t *solve.Trials, i int) Untaken {
	u := Untaken{Candidate: i, Name: p.Candidates[i].Name, Breaches: []verify.Breach{}, Instead: []int{}}
	longest, ok := t.Longest(i)
	if !ok {
		u.Text = impossible(p, i)
		return u
	}
	trial, ok := t.Take(i)
	u.Contact = longest
	if ok {
		u.Contact = trial.Contact
	}
	u.Worth = verify.Worth(p, contacts.Plan{Contacts: []contacts.Contact{u.Contact}}).Contacts
	u.against(p, plan)
	if !ok {
		u.Text = u.reason() + "; no way was found to take it even without what can be taken off"
		return u
	}
	u.Possible, u.Priced, u.Cost = true, true, lost(t.Value(), trial.Value)
	switch {
	case u.Cost > 0:
		u.Text = fmt.Sprintf("%s; taking it would cost at most %.6g", u.reason(), u.Cost)
	case u.Cost < 0:
		u.Text = fmt.Sprintf("%s; with it the plan would be worth %.6g more: let the solver run on", u.reason(), -u.Cost)
	default:
		u.Text = u.reason() + "; taking it would cost nothing"
	}
	return u
}

// lost returns how much less a plan is worth than another. Sums of the same terms in another order
// differ by some 1e-15 of themselves, which is no cost.
func lost(value, other float64) float64 {
	if d := value - other; math.Abs(d) > 1e-12*math.Abs(value) {
		return d
	}
	return 0
}

// against lists what the contact breaks beside the plan.
func (u *Untaken) against(p *contacts.Problem, plan contacts.Plan) {
	me := len(plan.Contacts)
	with := contacts.Plan{Contacts: append(slices.Clone(plan.Contacts), u.Contact)}
	for _, b := range verify.Plan(p, with) {
		u.Breaches = append(u.Breaches, b)
		for _, k := range b.Contacts {
			if k != me && !slices.Contains(u.Instead, k) && len(b.Contacts) <= 3 {
				u.Instead = append(u.Instead, k)
			}
		}
	}
	slices.Sort(u.Instead)
}

// reason says what stands against the contact.
func (u *Untaken) reason() string {
	if len(u.Breaches) == 0 {
		return "nothing forbids it, and it adds nothing to the plan's value"
	}
	texts := make([]string, len(u.Breaches))
	for k, b := range u.Breaches {
		texts[k] = b.Rule + ": " + b.Text
	}
	return strings.Join(texts, "; ")
}

// impossible says why no plan can have a contact in a window.
func impossible(p *contacts.Problem, i int) string {
	c := &p.Candidates[i]
	if c.Window.Length() < c.Least {
		return fmt.Sprintf("the window has %g s, and a contact lasts at least %g s", c.Window.Length().Seconds(), c.Least.Seconds())
	}
	// The checker judges a contact over the whole window: its rules are what is in the way.
	whole := contacts.Contact{Candidate: i, Span: c.Window}
	var texts []string
	for _, b := range verify.Plan(p, contacts.Plan{Contacts: append([]contacts.Contact{whole}, p.Held...)}) {
		switch b.Rule {
		case verify.RuleStep, verify.RuleHeld, verify.RuleLength, verify.RuleCommand:
		default:
			if slices.Contains(b.Contacts, 0) {
				texts = append(texts, b.Rule+": "+b.Text)
			}
		}
	}
	if len(texts) == 0 {
		return "no contact of its least length begins and ends on whole steps in it"
	}
	return "no contact is possible: " + strings.Join(texts, "; ")
}
