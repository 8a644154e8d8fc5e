package rateplan

import (
	"fmt"
	"math"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// overhead makes a pass of 12 minutes at 1 s whose C/N0 rises by 14 dB to the middle, as
// the range of a low orbit does it.
func overhead(samples int) Track {
	t := Track{Start: time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)}
	for i := range samples {
		s := float64(i)
		x := (s - float64(samples-1)/2) / 110
		t.Seconds = append(t.Seconds, s)
		t.CN0DBHz = append(t.CN0DBHz, 82-10*math.Log10(1+x*x)+0.3*math.Sin(s/9))
	}
	return t
}

// ladder makes modes of rising rate at 2 dB over Shannon's limit without a band.
func ladder(n int) []Mode {
	var out []Mode
	for i := range n {
		rate := 1e6 * math.Pow(30, float64(i)/float64(n))
		out = append(out, Mode{Name: fmt.Sprint(i), InformationRate: unit.BitRate(rate), NetRate: unit.BitRate(rate), NeedDBHz: 10*math.Log10(rate) + 0.4 + 0.1*float64(i)})
	}
	return out
}

func BenchmarkPlan(b *testing.B) {
	for _, silent := range []bool{false, true} {
		b.Run(fmt.Sprintf("12min_30modes_6changes_silent=%t", silent), func(b *testing.B) {
			p, err := NewPlanner(ladder(30), Rules{Changes: 6, LeastStay: 20 * time.Second, Relock: 2 * time.Second, Guard: 0.5, GuardTime: 3 * time.Second, Silent: silent})
			if err != nil {
				b.Fatal(err)
			}
			track := overhead(721)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := p.Plan(track); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// BenchmarkReference times a loop that has nothing of this package, for ratios between
// machines.
func BenchmarkReference(b *testing.B) {
	x := make([]float64, 1000)
	for b.Loop() {
		for i := range x {
			x[i] = math.Sqrt(float64(i) + x[(i*7)%1000])
		}
	}
}

// The planner's working memory stays: planning allocates for its answer alone.
func TestPlanningAllocatesForItsAnswer(t *testing.T) {
	p, err := NewPlanner(ladder(30), Rules{Changes: 6, LeastStay: 20 * time.Second, Relock: 2 * time.Second, Silent: true})
	if err != nil {
		t.Fatal(err)
	}
	track := overhead(721)
	plan := func() {
		if _, err := p.Plan(track); err != nil {
			t.Fatal(err)
		}
	}
	plan()
	if got := testing.AllocsPerRun(5, plan); got > 3 { // the steps, the bytes so far and the span of a single mode
		t.Errorf("%.0f allocations a plan", got)
	}
}
