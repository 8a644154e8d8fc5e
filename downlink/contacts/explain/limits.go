package explain

import (
	"context"
	"fmt"
	"math"
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/solve"
)

// Worth is what more of something limited would bring.
type Worth struct {
	Name   string  `json:"name"`    // of the limit, or of the antenna
	More   string  `json:"more"`    // "one more contact in each of its spans"
	Gain   float64 `json:"gain"`    // value of the plan found with it beyond that of the plan
	AtMost float64 `json:"at_most"` // no plan gains more
	Hours  float64 `json:"hours"`   // contact time that it adds, of antennas
}

// Limits says what more of each limit would be worth that binds the plan, and of each
// antenna a second one. Rounds is the work for each, 5 is usual; bound is that of the
// plan's problem. When the context ends it returns what it has.
func Limits(ctx context.Context, p *contacts.Problem, plan contacts.Plan, rounds int) ([]Worth, error) {
	base, err := solve.Solve(ctx, p, solve.Options{Rounds: rounds, Start: &plan})
	if err != nil {
		return nil, err
	}
	out := []Worth{}
	weigh := func(name, more string, q *contacts.Problem) error {
		if ctx.Err() != nil {
			return nil
		}
		r, err := solve.Solve(ctx, q, solve.Options{Rounds: rounds, Start: &base.Plan})
		if err != nil {
			return err
		}
		hours := 0.0
		for _, c := range r.Plan.Contacts {
			if c.Candidate >= len(p.Candidates) {
				hours += c.Length().Seconds() / 3600
			}
		}
		out = append(out, Worth{name, more, math.Max(0, r.Value-base.Value), math.Max(0, r.Bound-base.Value), hours})
		return nil
	}
	for k := range p.Limits {
		for _, m := range greater(p, base.Plan, k) {
			if err := weigh(p.Limits[k].Name, m.what, m.problem); err != nil {
				return nil, err
			}
		}
	}
	for k := range p.Shared {
		q := *p
		q.Shared = slices.Clone(p.Shared)
		q.Shared[k].Capacity++
		if err := weigh(p.Shared[k].Name, "one more at the same time", &q); err != nil {
			return nil, err
		}
	}
	for a := range p.Antennas {
		if q, ok := second(p, a); ok {
			name := p.Stations[p.Antennas[a].Station].Name + " " + p.Antennas[a].Name
			if err := weigh(name, "a second antenna of its kind", q); err != nil {
				return nil, err
			}
		}
	}
	return out, nil
}

// relaxed is a problem with more of one limit.
type relaxed struct {
	what    string
	problem *contacts.Problem
}

// greater returns the problem with more of what a limit limits, for each of its measures
// that leaves less than that in some span.
func greater(p *contacts.Problem, plan contacts.Plan, k int) []relaxed {
	l := &p.Limits[k]
	var out []relaxed
	with := func(what string, change func(l *contacts.Limit)) {
		q := *p
		q.Limits = slices.Clone(p.Limits)
		change(&q.Limits[k])
		out = append(out, relaxed{what, &q})
	}
	count, time, money := most(p, plan, l)
	if l.Contacts != nil && count >= *l.Contacts {
		n := *l.Contacts + 1
		with("one more contact in each of its spans", func(l *contacts.Limit) { l.Contacts = &n })
	}
	if l.Time != nil && time > *l.Time-contacts.Hour {
		t := *l.Time + contacts.Hour
		with("one more hour in each of its spans", func(l *contacts.Limit) { l.Time = &t })
	}
	if l.Price != nil && money > 0.9**l.Price {
		m := *l.Price * 1.1
		with(fmt.Sprintf("%.6g more of money in each of its spans", m-*l.Price), func(l *contacts.Limit) { l.Price = &m })
	}
	return out
}

// most returns the greatest use of a limit in any of its spans.
func most(p *contacts.Problem, plan contacts.Plan, l *contacts.Limit) (count int, time contacts.Ms, money float64) {
	var list []contacts.Contact
	spans := slices.Clone(l.Spans)
	for _, c := range plan.Contacts {
		if l.Names(p, c.Candidate) {
			list = append(list, c)
			if l.Rolling > 0 {
				spans = append(spans, contacts.Span{From: c.From, To: c.From + l.Rolling}, contacts.Span{From: c.To - l.Rolling, To: c.To})
			}
		}
	}
	if len(spans) == 0 {
		spans = []contacts.Span{{From: 0, To: p.Length}}
	}
	for _, s := range spans {
		n, t, m := 0, contacts.Ms(0), 0.0
		for _, c := range list {
			t += s.Overlap(c.Span)
			if s.From <= c.From && c.From < s.To {
				n++
				m += p.Price(c)
			}
		}
		count, time, money = max(count, n), max(time, t), max(money, m)
	}
	return count, time, money
}

// second returns the problem with another antenna like one, with the same windows; false
// where the antenna has none.
func second(p *contacts.Problem, a int) (*contacts.Problem, bool) {
	q := *p
	twin := p.Antennas[a]
	twin.Name += " (second)"
	q.Antennas = append(slices.Clone(p.Antennas), twin)
	q.Candidates = slices.Clone(p.Candidates)
	for _, c := range p.Candidates {
		if c.Antenna == a {
			c.Antenna = len(p.Antennas)
			c.Name += " (second antenna)"
			q.Candidates = append(q.Candidates, c)
		}
	}
	q.Limits = slices.Clone(p.Limits)
	for k := range q.Limits {
		if slices.Contains(q.Limits[k].Antennas, a) {
			q.Limits[k].Antennas = append(slices.Clone(q.Limits[k].Antennas), len(p.Antennas))
		}
	}
	q.Shared = slices.Clone(p.Shared)
	for k := range q.Shared {
		if slices.Contains(q.Shared[k].Antennas, a) {
			q.Shared[k].Antennas = append(slices.Clone(q.Shared[k].Antennas), len(p.Antennas))
		}
	}
	return &q, len(q.Candidates) > len(p.Candidates)
}
