package solve

import (
	"context"
	"fmt"
	"math"
	"os"
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
	proven, ended := 0, 0
	cases := 10
	if testing.Short() {
		cases = 2
	}
	for seed := range uint64(cases) {
		split := seed%2 == 1
		windows, copies := 12, 1
		if split {
			windows, copies = 8, 2
		}
		p, err := middling(seed, windows/2, windows, split).Problem()
		if err != nil {
			t.Fatal(err)
		}
		want := runGLPK(t, writeProgram(p, copies), 3)
		ctx, stop := context.WithTimeout(context.Background(), 5*time.Second)
		r, err := Solve(ctx, p, Options{Rounds: 300})
		stop()
		if err != nil {
			t.Fatal(err)
		}
		if r.Proven {
			proven++
		}
		if want.optimal {
			ended++
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
	if ended < cases/2 || proven < ended {
		t.Errorf("of %d problems the general-purpose solver took %d to the end and %d were proven here; half and as many are wanted", cases, ended, proven)
	}
}

// TestAtEqualTime measures against the general-purpose solver coinor-cbc at equal time,
// on problems that grow. It runs where SLANTWISE_MEASURE is "equal time".
func TestAtEqualTime(t *testing.T) {
	if os.Getenv("SLANTWISE_MEASURE") != "equal time" {
		t.Skip(`set SLANTWISE_MEASURE to "equal time" to measure`)
	}
	needSolver(t, "cbc")
	for _, x := range []struct {
		requests, windows int
		split             bool
		seconds           int
	}{{8, 20, false, 20}, {8, 20, true, 20}, {15, 45, false, 20}, {15, 45, true, 20}, {30, 120, false, 20}, {30, 120, true, 20}} {
		for seed := range uint64(2) {
			p, err := middling(seed, x.requests, x.windows, x.split).Problem()
			if err != nil {
				t.Fatal(err)
			}
			copies := 1
			if x.split {
				copies = 2
			}
			begin := time.Now()
			cbc := runCBC(t, writeProgram(p, copies), x.seconds)
			took := time.Since(begin)
			begin = time.Now()
			ctx, stop := context.WithTimeout(context.Background(), time.Duration(x.seconds)*time.Second)
			r, err := Solve(ctx, p, Options{})
			stop()
			if err != nil {
				t.Fatal(err)
			}
			fmt.Printf("%d requests, %d windows, split %v, seed %d: ours %g (bound %g, %s, %.1f s), cbc %g (bound %g, optimal %v, %.1f s)\n",
				x.requests, x.windows, x.split, seed, r.Value, r.Bound, r.Stop, time.Since(begin).Seconds(), cbc.value, cbc.bound, cbc.optimal, took.Seconds())
			if cbc.optimal && r.Bound < cbc.value*(1-1e-6) {
				t.Errorf("bound %g is below %g", r.Bound, cbc.value)
			}
		}
	}
}
