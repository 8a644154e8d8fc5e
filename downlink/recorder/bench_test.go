package recorder_test

import (
	"fmt"
	"testing"

	"slantwise/downlink/recorder"
)

// week is 40 passes of twelve minutes with seven rates each, three classes (one by
// orbit), acknowledgements every 10 s, losses, and a ground line.
func week() recorder.Plan {
	p := recorder.Plan{
		Start: monday, Length: 7 * 86400, Capacity: 64e9, WhenFull: recorder.Overwrite, Housekeeping: 0.05,
		Acknowledge: recorder.Acknowledge{Every: 10, Delay: 1},
		Lines:       []recorder.Line{{Station: "Skerry", BytesPerSecond: 1e6}},
	}
	var nodes []float64
	for at := 0.0; at < p.Length; at += 5700 {
		nodes = append(nodes, at)
	}
	p.Classes = []recorder.Class{
		{Name: "telemetry", Made: recorder.ByTime(p.Length, 2e3)},
		{Name: "images", Made: recorder.ByOrbit(nodes, 600, 900, 1.5e9)},
		{Name: "raw", Made: recorder.ByTime(p.Length, 1e5)},
	}
	for i := range 40 {
		c := recorder.Contact{Station: []string{"Skerry", "Fell"}[i%2], From: 3000 + float64(i)*15000, Uplink: i%2 == 0}
		c.To = c.From + 720
		for j := range 7 {
			from := c.From + 10 + 100*float64(j)
			c.Steps = append(c.Steps, recorder.Step{From: from, To: from + 100, BytesPerSecond: 1e6 * float64(4-min(j, 6-j)) * 1.5, Loss: 0.01 * float64(j)})
		}
		p.Contacts = append(p.Contacts, c)
	}
	return p
}

func BenchmarkWeek(b *testing.B) {
	p := week()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := recorder.Simulate(&p); err != nil {
			b.Fatal(err)
		}
	}
}

// A recorder that makes 10 bytes a second, and one contact of 100 bytes a second.
func ExampleSimulate() {
	r, err := recorder.Simulate(&recorder.Plan{
		Start: monday, Length: 1000, Capacity: 1e6,
		Classes: []recorder.Class{{Name: "images", Made: recorder.ByTime(1000, 10)}},
		Contacts: []recorder.Contact{{Station: "Skerry Point", From: 500, To: 540,
			Steps: []recorder.Step{{From: 500, To: 540, BytesPerSecond: 100}}}},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	c := r.Classes[0]
	fmt.Printf("made %.0f, received %.0f, on board %.0f bytes; the oldest was %.0f s old\n", c.Made, c.Received, c.OnBoardEnd, r.Latency.AtStation.Worst)
	// Output: made 10000, received 4000, on board 6000 bytes; the oldest was 500 s old
}
