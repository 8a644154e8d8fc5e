package rateplan_test

import (
	"fmt"
	"time"

	"slantwise/downlink/rateplan"
)

// Two modes over a pass that is stronger in the middle; a change costs two seconds.
func ExamplePlanner_Plan() {
	modes := []rateplan.Mode{
		{Name: "slow", InformationRate: 1e6, NetRate: 0.9e6, NeedDBHz: 66},
		{Name: "fast", InformationRate: 4e6, NetRate: 3.6e6, NeedDBHz: 72},
	}
	planner, err := rateplan.NewPlanner(modes, rateplan.Rules{Changes: 2, Relock: 2 * time.Second})
	if err != nil {
		fmt.Println(err)
		return
	}
	plan, err := planner.Plan(rateplan.Track{
		Start:   time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC),
		Seconds: []float64{0, 60, 120, 180, 240, 300},
		CN0DBHz: []float64{67, 70, 73, 73, 70, 67},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, s := range plan.Steps {
		fmt.Printf("%s %s %.0f bytes, margin %.1f dB\n", s.From.Format(time.TimeOnly), s.Name, s.Bytes, float64(s.LeastMargin))
	}
	fmt.Printf("%.0f bytes, %.0f %% of free switching\n", plan.Bytes, 100*plan.ShareOfFree())
	// Output:
	// 12:00:00 slow 13275000 bytes, margin 1.0 dB
	// 12:02:00 fast 26100000 bytes, margin 1.0 dB
	// 12:03:00 slow 13275000 bytes, margin 1.0 dB
	// 52650000 bytes, 98 % of free switching
}
