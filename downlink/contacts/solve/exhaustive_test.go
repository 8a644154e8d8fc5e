package solve

import (
	"context"
	"math"
	"testing"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
	"slantwise/downlink/contacts/verify"
)

// everyPlan finds the best plan by trying all of them, with begins and ends on whole
// steps, judged by the checker alone.
type everyPlan struct {
	p     *contacts.Problem
	best  float64
	plan  contacts.Plan
	found bool
}

func exhaustive(p *contacts.Problem) (float64, contacts.Plan, bool) {
	e := &everyPlan{p: p, best: math.Inf(-1)}
	e.from(0, 0, nil)
	return e.best, e.plan, e.found
}

// lasting are breaches that no further contact mends.
func lasting(list []verify.Breach) bool {
	for _, b := range list {
		if b.Rule != verify.RuleCommand && b.Rule != verify.RuleHeld {
			return true
		}
	}
	return false
}

// from goes on with contacts in candidate i that begin at t or later, and after it.
func (e *everyPlan) from(i int, t contacts.Ms, plan []contacts.Contact) {
	p := e.p
	if i == len(p.Candidates) {
		full := contacts.Plan{Contacts: append([]contacts.Contact{}, plan...)}
		if len(verify.Plan(p, full)) > 0 {
			return
		}
		if v := verify.Worth(p, full).Value; v > e.best {
			e.best, e.plan, e.found = v, full, true
		}
		return
	}
	e.from(i+1, 0, plan)
	c := &p.Candidates[i]
	step := p.Resolution()
	for from := max(t, c.Window.From); from+c.Least <= c.Window.To; from += step {
		for to := from + c.Least; to <= c.Window.To; to += step {
			next := append(plan[:len(plan):len(plan)], contacts.Contact{Candidate: i, Span: contacts.Span{From: from, To: to}})
			if lasting(verify.Plan(p, contacts.Plan{Contacts: next})) {
				continue
			}
			if p.Split {
				e.from(i, to, next)
			} else {
				e.from(i+1, 0, next)
			}
		}
	}
}

// smallCases is how many random problems are solved by trial of all plans.
func smallCases() uint64 {
	if testing.Short() {
		return 100
	}
	return 1000
}

func TestAgainstEveryPlan(t *testing.T) {
	for _, plain := range []bool{true, false} {
		proven, right := 0, 0
		for seed := range smallCases() {
			p := instance.Small(seed, plain)
			if err := p.Check(); err != nil {
				t.Fatalf("seed %d: %v", seed, err)
			}
			best, plan, ok := exhaustive(p)
			r, err := Solve(context.Background(), p, Options{Rounds: 40, Workers: 1})
			if !ok {
				if err == nil {
					t.Errorf("seed %d, plain %v: solved, and no plan keeps the rules", seed, plain)
				}
				continue
			}
			if err != nil {
				t.Errorf("seed %d, plain %v: %v", seed, plain, err)
				continue
			}
			close := 1e-5 * max(1, math.Abs(best))
			if r.Bound < best-close {
				t.Errorf("seed %d, plain %v: bound %.9g is below the best plan's %.9g: %v", seed, plain, r.Bound, best, plan)
			}
			if r.Value > best+close || r.Proven && r.Value < best-close {
				t.Errorf("seed %d, plain %v: value %.9g (proven %v), best %.9g", seed, plain, r.Value, r.Proven, best)
			}
			if r.Value > best-close {
				right++
			} else {
				t.Logf("seed %d, plain %v: value %g, best %g: %v and not %v", seed, plain, r.Value, best, plan, r.Plan)
			}
			if r.Proven {
				proven++
			}
		}
		t.Logf("plain %v: of %d problems %d solved to the best plan, %d proven", plain, smallCases(), right, proven)
	}
}
