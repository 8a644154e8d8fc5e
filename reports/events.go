package reports

import (
	"math"
	"sort"
	"time"

	"slantwise/downlink"
	"slantwise/station/pass"
)

// event is one of the instants that a pass is told by.
type event struct {
	key, name                string
	short                    string // where there is little room
	at                       time.Time
	azimuthDeg, elevationDeg float64
	sample                   int // nearest in the profile
}

// events returns AOS, culmination and LOS, in order of time. Where the window cuts a
// pass, the event is named for what it is: the edge of the window.
func events(p *Pass) []event {
	q := &p.Pass
	start, end, shortStart, shortEnd := "AOS", "LOS", "AOS", "LOS"
	if q.Cut&pass.CutAOS != 0 {
		start, shortStart = "start of the window", "start"
	}
	if q.Cut&pass.CutLOS != 0 {
		end, shortEnd = "end of the window", "end"
	}
	list := []event{
		{key: "aos", name: start, short: shortStart, at: q.AOS, azimuthDeg: q.AOSAzimuth.Degrees(), elevationDeg: q.AOSElevation.Degrees()},
		{key: "culmination", name: "culmination", short: "culmination", at: q.Culmination, azimuthDeg: q.CulminationAzimuth.Degrees(), elevationDeg: q.MaxElevation.Degrees()},
		{key: "los", name: end, short: shortEnd, at: q.LOS, azimuthDeg: q.LOSAzimuth.Degrees(), elevationDeg: q.LOSElevation.Degrees()},
	}
	for i := range list {
		list[i].sample = nearestSample(p.Profile, list[i].at)
	}
	return list
}

// nearestSample returns the index of the sample nearest to t.
func nearestSample(f *downlink.Profile, t time.Time) int {
	s := t.Sub(f.Start).Seconds()
	i := sort.SearchFloat64s(f.Seconds, s)
	if i == len(f.Seconds) || i > 0 && s-f.Seconds[i-1] < f.Seconds[i]-s {
		i--
	}
	return i
}

// chartPoints is how many samples a drawing shows at most, beside the events; a
// line of 200 points is smooth on paper and screen.
const chartPoints = 190

// tableRows is how many rows a table in the page has at most, beside the events.
const tableRows = 24

// thinned picks at most about n samples, evenly, and always the first, the last, the
// culmination and the least margin, so that what the text says is in the drawing.
func thinned(p *Pass, n int) []int {
	count := len(p.Profile.Seconds)
	if count == 0 {
		return nil
	}
	wanted := []int{0, count - 1, nearestSample(p.Profile, p.Pass.Culmination)}
	if p.Radio != nil && finite(p.Radio.Least.Value) {
		wanted = append(wanted, nearestSample(p.Profile, p.Radio.Least.Time), nearestSample(p.Profile, p.Radio.Greatest.Time))
	}
	step := math.Max(1, float64(count-1)/float64(n))
	for x := 0.0; x < float64(count); x += step {
		wanted = append(wanted, int(math.Round(x)))
	}
	sort.Ints(wanted)
	kept := wanted[:0]
	for _, i := range wanted {
		if i < count && (len(kept) == 0 || kept[len(kept)-1] != i) {
			kept = append(kept, i)
		}
	}
	return kept
}

// namedBudget is a budget and the instant that it is for.
type namedBudget struct {
	key, name string
	budget    *downlink.Budget
}

func budgetsOf(p *Pass) []namedBudget {
	r, ev := p.Radio, events(p)
	list := []namedBudget{{ev[0].key, ev[0].name, &r.AOS}, {ev[1].key, ev[1].name, &r.Culmination}}
	if finite(r.Least.Value) {
		list = append(list, namedBudget{"least_margin", "least margin", &r.LeastMargin})
	}
	return list
}
