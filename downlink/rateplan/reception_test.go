package rateplan

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// By hand, as in TestPlanByHand: slow locks for 2 s, fast from 40 s for 2 s, slow again.
func TestReceptionsByHand(t *testing.T) {
	plan := planOf(t, Rules{Changes: 2, Relock: 2 * time.Second}, hill())
	want := []Reception{{2, 40, 0, 3800}, {42, 70, 1, 11200}, {72, 100, 2, 2800}}
	got := plan.Receptions(hill())
	if len(got) != len(want) {
		t.Fatalf("got %+v, want %+v", got, want)
	}
	for i, g := range got {
		w := want[i]
		if g.Step != w.Step || math.Abs(g.From-w.From) > 1e-9 || math.Abs(g.To-w.To) > 1e-9 || math.Abs(g.Bytes-w.Bytes) > 1e-6 {
			t.Errorf("span %d: got %+v, want %+v", i, g, w)
		}
	}
}

// Spans hold the bytes of the plan at the rate of their step, in order and within it.
func TestReceptionsHoldThePlan(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for range 500 {
		track := Track{Start: noon}
		at := 0.0
		for range 30 {
			at += 1 + 9*r.Float64()
			c := 48 + 12*r.Float64()
			if r.IntN(12) == 0 {
				c = math.NaN()
			}
			track.Seconds, track.CN0DBHz = append(track.Seconds, at), append(track.CN0DBHz, c)
		}
		rules := Rules{Changes: r.IntN(5), Relock: time.Duration(r.IntN(8)) * time.Second, Silent: r.IntN(2) == 0}
		plan := planOf(t, rules, track)
		sum, end := 0.0, math.Inf(-1)
		for _, s := range plan.Receptions(track) {
			step := plan.Steps[s.Step]
			if s.From < end-1e-9 || track.at(s.From).Before(step.From.Add(-1)) || track.at(s.To).After(step.To) {
				t.Fatalf("%+v: span %+v does not lie in order within its step %+v", rules, s, step)
			}
			if b := (s.To - s.From) * step.NetRate.BitsPerSecond() / 8; math.Abs(b-s.Bytes) > 1e-6*plan.Bytes {
				t.Fatalf("%+v: span %+v holds %g B at its rate", rules, s, b)
			}
			sum, end = sum+s.Bytes, s.To
		}
		if math.Abs(sum-plan.Bytes) > 1e-9*plan.Bytes {
			t.Fatalf("%+v: spans hold %g B, the plan %g B", rules, sum, plan.Bytes)
		}
	}
}
