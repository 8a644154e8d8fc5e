package solve

import (
	"context"
	"math"
	"reflect"
	"testing"
	"time"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
	"slantwise/downlink/contacts/verify"
)

func network(t testing.TB, craft, stations, days int) *contacts.Problem {
	t.Helper()
	p, err := instance.Passes(instance.Network{Seed: 1, Spacecraft: craft, Stations: stations, Days: days, Crowded: 0.4})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestSameForEveryNumberOfWorkers(t *testing.T) {
	p := network(t, 5, 3, 1)
	var first Result
	for _, workers := range []int{1, 2, 5} {
		r, err := Solve(context.Background(), p, Options{Rounds: 3, Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		if workers == 1 {
			first = r
		} else if !reflect.DeepEqual(r, first) {
			t.Errorf("%d workers: value %.17g, bound %.17g; one: %.17g, %.17g", workers, r.Value, r.Bound, first.Value, first.Bound)
		}
	}
}

func TestStopLeavesTheBestPlan(t *testing.T) {
	p := network(t, 5, 3, 1)
	ctx, stop := context.WithCancel(context.Background())
	seen := 0.0
	r, err := Solve(ctx, p, Options{Progress: func(x Progress) {
		seen = x.Value
		if x.Round == 2 {
			stop()
		}
	}})
	if err != nil || r.Stop != Cancelled || r.Value < seen*(1-1e-9) {
		t.Fatalf("stop %q, value %g after %g (%v)", r.Stop, r.Value, seen, err)
	}
	if b := verify.Plan(p, r.Plan); len(b) > 0 {
		t.Error(b)
	}
	ctx, stop = context.WithDeadline(context.Background(), time.Unix(0, 0))
	defer stop()
	if r, err = Solve(ctx, p, Options{}); err != nil || r.Stop != Deadline || !math.IsInf(r.Bound, 1) {
		t.Errorf("without any time: stop %q, bound %g (%v)", r.Stop, r.Bound, err)
	}
}

func TestNothingToPlan(t *testing.T) {
	p := &contacts.Problem{Start: instance.Start, Length: contacts.Day}
	r, err := Solve(context.Background(), p, Options{})
	if err != nil || !r.Proven || r.Value != 0 || r.Plan.Contacts == nil {
		t.Errorf("result %+v (%v)", r, err)
	}
}

func TestFixedThatBreaksRules(t *testing.T) {
	p := network(t, 2, 2, 1)
	w := p.Candidates[0]
	p.Held = []contacts.Contact{{Candidate: 0, Span: w.Window, Fixed: true}}
	p.Antennas[w.Antenna].Closed = []contacts.Span{w.Window}
	if _, err := Solve(context.Background(), p, Options{Rounds: 1}); err == nil {
		t.Error("a fixed contact in an outage was planned")
	}
}
