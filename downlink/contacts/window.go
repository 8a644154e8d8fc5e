package contacts

import (
	"errors"
	"fmt"
	"math"
	"time"
)

// WindowRow is a row of a file of windows from outside: a time in which a request can be
// served. Seconds are not negative.
type WindowRow struct {
	Place      string // "windows.csv: line 7", leads the errors
	Request    string
	Spacecraft string
	Station    string
	Antenna    string
	Start, End time.Time
	MinimumS   float64 // least length of a contact, greater than 0
	DesiredS   float64 // the request's, at least the minimum
	SetUpS     float64
	TearDownS  float64
	ValuePerS  float64
}

// AddWindows appends windows to a problem: a candidate a row, and requests, spacecraft,
// stations and antennas that the problem does not have yet. Begins and ends are rounded
// inwards to whole milliseconds, other times to the nearest. It returns every fault of
// the rows at once and leaves the problem as it was where there is any.
//
// Where windows of a request differ in their value, its most valuable seconds count
// first. The desired time must be the same in all rows of a request.
func (p *Problem) AddWindows(rows []WindowRow) error {
	q := *p // slices only grow: the old problem keeps its lengths
	b := newNames(&q)
	var faults []error
	for i := range rows {
		if err := b.add(&rows[i]); err != nil {
			faults = append(faults, err)
		}
	}
	if err := errors.Join(faults...); err != nil {
		return err
	}
	*p = q
	return nil
}

// names finds what a problem already calls by a name.
type names struct {
	p                             *Problem
	request, spacecraft, stations map[string]int
	antenna                       map[[2]string]int
	candidate                     map[string]bool
}

func newNames(p *Problem) *names {
	b := &names{p, map[string]int{}, map[string]int{}, map[string]int{}, map[[2]string]int{}, map[string]bool{}}
	for i := range p.Requests {
		b.request[p.Requests[i].Name] = i
	}
	for i := range p.Spacecraft {
		b.spacecraft[p.Spacecraft[i].Name] = i
	}
	for i := range p.Stations {
		b.stations[p.Stations[i].Name] = i
	}
	for i := range p.Antennas {
		b.antenna[[2]string{p.Stations[p.Antennas[i].Station].Name, p.Antennas[i].Name}] = i
	}
	for i := range p.Candidates {
		b.candidate[p.Candidates[i].Name] = true
	}
	return b
}

func (b *names) add(r *WindowRow) error {
	if err := r.check(); err != nil {
		return err
	}
	p := b.p
	c := Candidate{
		Window: Span{ceilMs(r.Start.Sub(p.Start)), floorMs(r.End.Sub(p.Start))},
		Least:  ms(r.MinimumS), SetUp: ms(r.SetUpS), TearDown: ms(r.TearDownS),
		PerSecond: r.ValuePerS, Downlink: true,
	}
	if w := c.Window; w.From < 0 || w.To > p.Length {
		return fmt.Errorf("%s: request %q: the window %s to %s is not within the horizon %s to %s; give windows inside it, or a longer horizon",
			r.Place, r.Request, clock(r.Start), clock(r.End), clock(p.At(0)), clock(p.At(p.Length)))
	}
	desired := ms(r.DesiredS)
	request, known := b.request[r.Request]
	if known && p.Requests[request].Desired != desired {
		return fmt.Errorf("%s: request %q: desired_s is %g here and %g before; a request desires one length", r.Place, r.Request, r.DesiredS, p.Requests[request].Desired.Seconds())
	}
	name := fmt.Sprintf("%s %s %s %s", r.Request, r.Station, r.Antenna, stamp(r.Start))
	for i := 2; b.candidate[name]; i++ {
		name = fmt.Sprintf("%s %s %s %s (%d)", r.Request, r.Station, r.Antenna, stamp(r.Start), i)
	}
	b.candidate[name] = true
	c.Name = name
	if !known {
		request = len(p.Requests)
		b.request[r.Request] = request
		p.Requests = append(p.Requests, Request{Name: r.Request, Desired: desired})
	}
	c.Request = request
	c.Spacecraft = intern(b.spacecraft, r.Spacecraft, func() int {
		p.Spacecraft = append(p.Spacecraft, Spacecraft{Name: r.Spacecraft})
		return len(p.Spacecraft) - 1
	})
	station := intern(b.stations, r.Station, func() int {
		p.Stations = append(p.Stations, Station{Name: r.Station})
		return len(p.Stations) - 1
	})
	c.Antenna = intern(b.antenna, [2]string{r.Station, r.Antenna}, func() int {
		p.Antennas = append(p.Antennas, Antenna{Name: r.Antenna, Station: station})
		return len(p.Antennas) - 1
	})
	p.Candidates = append(p.Candidates, c)
	return nil
}

func (r *WindowRow) check() error {
	var faults []error
	fault := func(format string, a ...any) {
		faults = append(faults, fmt.Errorf("%s: request %q: %s", r.Place, r.Request, fmt.Sprintf(format, a...)))
	}
	for _, n := range []struct{ key, v string }{{"request", r.Request}, {"spacecraft", r.Spacecraft}, {"station", r.Station}, {"antenna", r.Antenna}} {
		if n.v == "" {
			fault("%s is empty; give a name", n.key)
		}
	}
	if !r.End.After(r.Start) {
		fault("the window ends at %s and does not end after its start %s; are the two reversed?", clock(r.End), clock(r.Start))
	}
	for _, n := range []struct {
		key string
		v   float64
	}{{"minimum_s", r.MinimumS}, {"desired_s", r.DesiredS}, {"setup_s", r.SetUpS}, {"teardown_s", r.TearDownS}, {"value_per_s", r.ValuePerS}} {
		if !(n.v >= 0) || math.IsInf(n.v, 1) || n.v > 1e12 {
			fault("%s is %g; it must be 0 or more, and a number", n.key, n.v)
		}
	}
	if r.MinimumS < 0.001 {
		fault("minimum_s is %g; it must be 0.001 or more: a contact has a length", r.MinimumS)
	}
	if r.DesiredS < r.MinimumS {
		fault("desired_s %g is less than minimum_s %g; desire at least the shortest contact", r.DesiredS, r.MinimumS)
	}
	return errors.Join(faults...)
}

func intern[K comparable](known map[K]int, name K, create func() int) int {
	i, ok := known[name]
	if !ok {
		i = create()
		known[name] = i
	}
	return i
}

func ms(seconds float64) Ms { return Ms(math.Round(seconds * 1000)) }

func floorMs(d time.Duration) Ms {
	q := d / time.Millisecond
	if d%time.Millisecond < 0 {
		q--
	}
	return Ms(q)
}

func ceilMs(d time.Duration) Ms { return -floorMs(-d) }

func clock(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05.000Z") }

func stamp(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05Z") }
