package rateplan

import (
	"bytes"
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"
)

// Tracks of the same instants and pattern have the same plan, whatever their levels.
func TestPatternDecidesThePlan(t *testing.T) {
	same := 0
	rapid.Check(t, func(t *rapid.T) {
		rules := Rules{Changes: rapid.IntRange(0, 3).Draw(t, "changes"), LeastStay: 20 * time.Second, Relock: 3 * time.Second,
			GuardTime: time.Duration(rapid.IntRange(0, 4).Draw(t, "guard")) * time.Second, Guard: 0.5, Silent: rapid.Bool().Draw(t, "silent")}
		p, err := NewPlanner(twoModes(), rules)
		if err != nil {
			t.Fatal(err)
		}
		a := Track{Start: noon}
		b := Track{Start: noon}
		for i := range 14 {
			level := rapid.SampledFrom([]float64{40, 49.4, 49.6, 52, 55.4, 55.6, 60, math.NaN()}).Draw(t, "level")
			a.Seconds, a.CN0DBHz = append(a.Seconds, float64(9*i)), append(a.CN0DBHz, level)
			most := 1.4 // that keeps to the same side of what both modes need
			if math.Abs(level-49.5) < 0.2 || math.Abs(level-55.5) < 0.2 {
				most = 0.08
			}
			b.Seconds, b.CN0DBHz = append(b.Seconds, float64(9*i)), append(b.CN0DBHz, level+rapid.Float64Range(-most, most).Draw(t, "other"))
		}
		pa, err := p.Pattern(&a, nil)
		if err != nil {
			t.Fatal(err)
		}
		pb, err := p.Pattern(&b, nil)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(pa, pb) {
			return
		}
		same++
		x, err := p.Plan(a)
		if err != nil {
			t.Fatal(err)
		}
		y, err := p.WithoutBounds().Plan(b)
		if err != nil {
			t.Fatal(err)
		}
		if x.Bytes != y.Bytes || len(x.Steps) != len(y.Steps) || !math.IsNaN(y.FreeBytes) || !math.IsNaN(y.ShannonBytes) {
			t.Fatalf("%+v and %+v", x, y)
		}
		for i := range x.Steps {
			if s, o := &x.Steps[i], &y.Steps[i]; !s.From.Equal(o.From) || !s.To.Equal(o.To) || s.Mode != o.Mode {
				t.Fatalf("step %d: %+v and %+v", i, s, o)
			}
		}
	})
	if same < 3 {
		t.Errorf("%d pairs had the same pattern", same)
	}
}
