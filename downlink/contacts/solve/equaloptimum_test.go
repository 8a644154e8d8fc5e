package solve

import (
	"context"
	"math"
	"testing"
	"time"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
)

// middling is a demand that a general-purpose solver takes to the end.
func middling(seed uint64, requests, windows int, split bool) instance.Demand {
	return instance.Demand{Seed: seed, Requests: requests, Windows: windows, Antennas: 3, Craft: 4, Days: 1, Split: split, Load: 0.9, Window: 4 * contacts.Hour, Tick: time.Minute}
}

// TestSameOptimum compares with what the general-purpose solvers prove. A window may hold
// two contacts there; a request desires less than four times its least contact, so that
// this is enough.
func TestSameOptimum(t *testing.T) {
	needSolver(t, "glpsol")
	proven := 0
	const cases = 8
	for seed := range uint64(cases) {
		split := seed%2 == 1
		p, err := middling(seed, 5, 10, split).Problem()
		if err != nil {
			t.Fatal(err)
		}
		copies := 1
		if split {
			copies = 2
		}
		want := runGLPK(t, writeProgram(p, copies), 20)
		ctx, stop := context.WithTimeout(context.Background(), 5*time.Second)
		r, err := Solve(ctx, p, Options{Rounds: 300})
		stop()
		if err != nil {
			t.Fatal(err)
		}
		if r.Proven {
			proven++
		}
		t.Logf("seed %d split %v: %g (bound %g, %s) and %g (optimal %v)", seed, split, r.Value, r.Bound, r.Stop, want.value, want.optimal)
		close := 1e-5 * math.Abs(want.value)
		if r.Bound < want.value-close {
			t.Errorf("seed %d: bound %g is below %g", seed, r.Bound, want.value)
		}
		if want.optimal && (r.Value > want.value+close || r.Value < want.value-close) {
			t.Errorf("seed %d: value %g, the optimum is %g", seed, r.Value, want.value)
		}
	}
	t.Logf("%d of %d proven", proven, cases)
}
