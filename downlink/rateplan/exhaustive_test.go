package rateplan

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// exhaustive tries every way of giving each interval between samples a mode, or
// silence, and returns the most bits that any lawful one brings down. It is written
// from the doc of Rules, without cumulated sums.
func exhaustive(modes []Mode, rules Rules, t Track) float64 {
	intervals := len(t.Seconds) - 1
	kinds := len(modes)
	if rules.Silent {
		kinds++
	}
	chosen := make([]int, intervals)
	guarded, plain := plainGuard(t, rules.GuardTime.Seconds()), plainGuard(t, 0)
	best := 0.0
	for {
		best = max(best, judge(modes, rules, t, chosen, guarded, plain))
		i := 0
		for ; i < intervals; i++ {
			if chosen[i]++; chosen[i] < kinds {
				break
			}
			chosen[i] = 0
		}
		if i == intervals {
			return best
		}
	}
}

// judge returns the bits of a choice, 0 where it breaks a rule.
func judge(modes []Mode, rules Rules, t Track, chosen []int, guarded, plain []float64) float64 {
	first, last := 0, len(chosen)-1
	silent := len(modes)
	for first <= last && chosen[first] == silent {
		first++
	}
	for last >= first && chosen[last] == silent {
		last--
	}
	if first > last {
		return 0
	}
	type part struct{ mode, from, to int } // samples
	parts := []part{{chosen[first], first, first + 1}}
	for i := first + 1; i <= last; i++ {
		if now := &parts[len(parts)-1]; chosen[i] == now.mode {
			now.to++
		} else {
			parts = append(parts, part{chosen[i], i, i + 1})
		}
	}
	if len(parts)-1 > rules.Changes {
		return 0
	}
	cn0 := guarded
	if len(parts) == 1 && !rules.Silent {
		cn0 = plain
	}
	sum := 0.0
	for _, p := range parts {
		if len(parts) > 1 && t.Seconds[p.to]-t.Seconds[p.from] < rules.LeastStay.Seconds()-1e-9 {
			return 0
		}
		if p.mode == silent {
			continue
		}
		m := modes[p.mode]
		closes := func(i int) bool {
			need := m.NeedDBHz + float64(rules.Guard)
			return i >= 0 && cn0[i] >= need && cn0[i+1] >= need
		}
		for i := p.from; i < p.to; i++ {
			if !closes(i) {
				if rules.Silent {
					return 0
				}
				continue
			}
			run := i
			for closes(run - 1) {
				run--
			}
			lock := max(t.Seconds[p.from], t.Seconds[run]) + rules.Relock.Seconds()
			sum += float64(m.NetRate) * max(0, t.Seconds[i+1]-max(t.Seconds[i], lock))
		}
	}
	return sum
}

// plainGuard is the least C/N0 around every sample, looked up at all samples near it
// and at both ends of the guard.
func plainGuard(t Track, guard float64) []float64 {
	out := make([]float64, len(t.Seconds))
	value := func(s float64) float64 {
		for i := 1; i < len(t.Seconds); i++ {
			a, b := t.Seconds[i-1], t.Seconds[i]
			if s == a {
				return t.CN0DBHz[i-1]
			}
			if s > a && s < b {
				return t.CN0DBHz[i-1] + (s-a)/(b-a)*(t.CN0DBHz[i]-t.CN0DBHz[i-1])
			}
		}
		if s == t.Seconds[len(t.Seconds)-1] {
			return t.CN0DBHz[len(t.CN0DBHz)-1]
		}
		return math.Inf(1) // outside the track
	}
	for i, s := range t.Seconds {
		out[i] = min(t.CN0DBHz[i], value(s-guard), value(s+guard)) // the built-in min keeps NaN
		for k, other := range t.Seconds {
			if math.Abs(other-s) <= guard {
				out[i] = min(out[i], t.CN0DBHz[k])
			}
		}
	}
	return out
}

// randomCase makes a small case with ties, gaps and uneven steps.
func randomCase(r *rand.Rand) ([]Mode, Rules, Track) {
	n := 3 + r.IntN(6)
	t := Track{Start: time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)}
	at := float64(r.IntN(3))
	for range n {
		c := float64(1+r.IntN(8)) / 2
		if r.IntN(25) == 0 {
			c = math.NaN()
		}
		t.Seconds, t.CN0DBHz = append(t.Seconds, at), append(t.CN0DBHz, c)
		at += []float64{0.5, 1, 1, 2.25}[r.IntN(4)]
	}
	var modes []Mode
	for m := range 1 + r.IntN(4) {
		need := r.IntN(8)
		rate := unit.BitRate(1 + need + r.IntN(5))
		modes = append(modes, Mode{Name: fmt.Sprint(m), InformationRate: rate, NetRate: rate, NeedDBHz: float64(need) / 2})
	}
	seconds := func(choices ...float64) time.Duration {
		return time.Duration(choices[r.IntN(len(choices))] * float64(time.Second))
	}
	rules := Rules{
		Changes: r.IntN(4), LeastStay: seconds(0, 0, 0, 1, 2, 3.25), Relock: seconds(0, 0, 0, 0.25, 0.5, 1, 3), Guard: unit.DB(r.IntN(2)) / 2,
		GuardTime: seconds(0, 0, 0, 0, 0.5, 1, 1.75), Silent: r.IntN(2) == 0,
	}
	return modes, rules, t
}

func TestPlanIsTheOptimum(t *testing.T) {
	cases := 5000
	if testing.Short() {
		cases = 1500
	}
	r := rand.New(rand.NewPCG(1, 2))
	positive, changed := 0, 0
	for i := range cases {
		modes, rules, track := randomCase(r)
		p, err := NewPlanner(modes, rules)
		if err != nil {
			t.Fatal(err)
		}
		plan, err := p.Plan(track)
		if err != nil {
			t.Fatal(err)
		}
		want := exhaustive(modes, rules, track)
		if math.Abs(plan.Bytes*8-want) > 1e-9*(1+want) {
			t.Fatalf("case %d: %g bits, exhaustive search finds %g\nmodes %+v\nrules %+v\ntrack %+v\nplan %+v", i, plan.Bytes*8, want, modes, rules, track, plan)
		}
		obeys(t, i, modes, rules, track, &plan)
		if want > 0 {
			positive++
		}
		if plan.Changes() > 0 {
			changed++
		}
	}
	if positive < cases/2 || changed < cases/20 {
		t.Errorf("of %d cases %d bring something and %d change: too few to prove anything", cases, positive, changed)
	}
}

// obeys checks a plan against the rules and the bounds.
func obeys(t *testing.T, i int, modes []Mode, rules Rules, track Track, p *Plan) {
	t.Helper()
	if p.Changes() > rules.Changes {
		t.Fatalf("case %d: %d changes, at most %d are allowed", i, p.Changes(), rules.Changes)
	}
	if p.Bytes > p.FreeBytes*(1+1e-12) {
		t.Fatalf("case %d: %g bytes, free switching has %g", i, p.Bytes, p.FreeBytes)
	}
	if got := p.SoFar[len(p.SoFar)-1]; math.Abs(got-p.Bytes) > 1e-9 || !slices.IsSorted(p.SoFar) || p.SoFar[0] != 0 {
		t.Fatalf("case %d: bytes so far %v, in all %g", i, p.SoFar, p.Bytes)
	}
	for k, s := range p.Steps {
		if len(p.Steps) > 1 && s.To.Sub(s.From) < rules.LeastStay-time.Nanosecond {
			t.Fatalf("case %d: step %d lasts %s, the least stay is %s", i, k+1, s.To.Sub(s.From), rules.LeastStay)
		}
		if k > 0 && (!p.Steps[k-1].To.Equal(s.From) || p.Steps[k-1].Mode == s.Mode) {
			t.Fatalf("case %d: step %d does not follow on the one before: %+v", i, k+1, p.Steps)
		}
		if s.Bytes < 0 {
			t.Fatalf("case %d: step %d brings %g bytes", i, k+1, s.Bytes)
		}
		if rules.Silent && s.Mode != silence && !(s.LeastMargin >= rules.Guard) {
			t.Fatalf("case %d: step %d has a margin of %g dB, the guard is %g dB", i, k+1, float64(s.LeastMargin), float64(rules.Guard))
		}
	}
}
