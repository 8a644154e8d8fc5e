package instance

import (
	"fmt"
	"math/rand/v2"
	"time"

	"slantwise/downlink/contacts"
)

// Demand says which requests over windows from outside to make.
type Demand struct {
	Seed     uint64
	Requests int
	Windows  int // about so many
	Antennas int // three a station
	Craft    int
	Days     int
	Split    bool
	Load     float64       // contact time desired, with set-up and tear-down, as share of all antenna time
	Window   contacts.Ms   // mean length of a window
	Tick     time.Duration // all times are multiples of it; 0: a second
}

// Rows makes the windows of a demand: each request asks for one spacecraft, which rises
// over each station once a day, within a few days, on antennas drawn from all.
func (d Demand) Rows() []contacts.WindowRow {
	r := rand.New(rand.NewPCG(d.Seed, 11))
	tick := d.Tick
	if tick == 0 {
		tick = time.Second
	}
	horizon := time.Duration(d.Days) * 24 * time.Hour
	mean := time.Duration(d.Window) * time.Millisecond
	round := func(v time.Duration) time.Duration { return v / tick * tick }
	between := func(lo, hi float64) float64 { return lo + (hi-lo)*r.Float64() }
	// What a request takes on average follows from the load.
	each := time.Duration(d.Load * float64(d.Antennas) * float64(horizon) / float64(d.Requests))
	var rows []contacts.WindowRow
	for q := range d.Requests {
		craft := r.IntN(d.Craft)
		setUp := round(time.Duration(between(0.05, 0.15) * float64(each)))
		tearDown := round(setUp / 3)
		desired := max(round(time.Duration(between(0.4, 1.4)*float64(each))-setUp-tearDown), 4*tick)
		minimum := max(round(time.Duration(between(0.3, 0.7)*float64(desired))), tick)
		value := float64(r.IntN(9)+1) / 2
		count := d.Windows / d.Requests
		if r.IntN(d.Requests) < d.Windows%d.Requests {
			count++
		}
		for range max(1, count) {
			length := max(round(time.Duration(between(0.5, 1.5)*float64(mean))), minimum)
			length = min(length, round(horizon))
			begin := round(time.Duration(r.Float64() * float64(horizon-length)))
			antenna := r.IntN(d.Antennas)
			rows = append(rows, contacts.WindowRow{
				Place: fmt.Sprintf("row %d", len(rows)+1), Request: fmt.Sprintf("R%03d", q+1), Spacecraft: fmt.Sprintf("Invented %d", craft+1),
				Station: fmt.Sprintf("Site %d", antenna/3+1), Antenna: fmt.Sprintf("dish %d", antenna%3+1),
				Start: Start.Add(begin), End: Start.Add(begin + length),
				MinimumS: minimum.Seconds(), DesiredS: desired.Seconds(), SetUpS: setUp.Seconds(), TearDownS: tearDown.Seconds(), ValuePerS: value,
			})
		}
	}
	return rows
}

// Problem makes the problem of a demand.
func (d Demand) Problem() (*contacts.Problem, error) {
	p := &contacts.Problem{Start: Start, Length: contacts.Ms(d.Days) * contacts.Day, Split: d.Split}
	return p, p.AddWindows(d.Rows())
}
