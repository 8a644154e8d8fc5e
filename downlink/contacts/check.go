package contacts

import (
	"errors"
	"fmt"
	"math"
)

// Bounds of a problem, so that all sums stay exact.
const (
	longest   = 400 * Day
	mostValue = 1e15
)

// checker collects faults.
type checker struct {
	p      *Problem
	faults []error
}

func (c *checker) say(format string, a ...any) {
	c.faults = append(c.faults, fmt.Errorf(format, a...))
}

func (c *checker) number(what string, v, low, high float64) {
	if !(v >= low && v <= high) {
		c.say("%s: %g is not allowed; it must be %g to %g", what, v, low, high)
	}
}

func (c *checker) length(what string, v, low, high Ms) {
	if v < low || v > high {
		c.say("%s: %g s is not allowed; it must be %g to %g s", what, v.Seconds(), low.Seconds(), high.Seconds())
	}
}

func (c *checker) index(what string, i, n int) bool {
	if i < 0 || i >= n {
		c.say("%s: index %d is not allowed; there are %d", what, i, n)
		return false
	}
	return true
}

func (c *checker) spans(what string, spans []Span) {
	for _, s := range spans {
		if s.To <= s.From {
			c.say("%s: a time from %s to %s does not end after it begins; are the two reversed?", what, clock(c.p.At(s.From)), clock(c.p.At(s.To)))
		}
	}
}

// Check returns every fault of the problem at once. A problem without faults can be
// solved; whether something can serve each request Unserved tells.
func (p *Problem) Check() error {
	c := &checker{p: p}
	c.length("length of the horizon", p.Length, 1, longest)
	c.length("step of begins and ends", p.Resolution(), 1, Hour)
	c.number("weight of the share", p.Weights.Share, 0, mostValue)
	c.number("weight of the price", p.Weights.Price, 0, mostValue)
	c.number("weight of a change", p.Weights.Change, 0, mostValue)
	for i := range p.Spacecraft {
		c.spacecraft(&p.Spacecraft[i])
	}
	for i := range p.Stations {
		s := &p.Stations[i]
		about := fmt.Sprintf("station %q", s.Name)
		c.length(about+": lead time", s.Lead, 0, longest)
		c.length(about+": notice", s.Notice, 0, longest)
		c.spans(about+": staffed", s.Staffed)
		c.spans(about+": closed", s.Closed)
	}
	for i := range p.Antennas {
		c.antenna(&p.Antennas[i])
	}
	for i := range p.Requests {
		c.length(fmt.Sprintf("request %q: desired time", p.Requests[i].Name), p.Requests[i].Desired, 1, longest)
	}
	c.candidates()
	c.limits()
	if len(c.faults) == 0 {
		c.held()
	}
	return errors.Join(c.faults...)
}

func (c *checker) spacecraft(s *Spacecraft) {
	about := fmt.Sprintf("spacecraft %q", s.Name)
	c.number(about+": stations at once", float64(s.AtOnce), 0, 100)
	c.length(about+": time between contacts", s.Between, 0, longest)
	c.length(about+": time to turn to another station", s.Repoint, 0, longest)
	c.length(about+": least overlap", s.HandOver.Least, 0, longest)
	c.length(about+": greatest overlap", s.HandOver.Greatest, 0, longest)
	if h := s.HandOver; h.Greatest > 0 && h.Least > h.Greatest {
		c.say("%s: the least overlap %g s is longer than the greatest %g s", about, h.Least.Seconds(), h.Greatest.Seconds())
	}
	if s.AtOnce < 2 && (s.HandOver != HandOver{} || s.SameData) {
		c.say("%s: contacts overlap only where it talks to two stations at once; set that, or leave out the overlap", about)
	}
	c.number(about+": share", s.Share, 0, mostValue)
	c.spans(about+": closed", s.Closed)
	if k := s.Command; k != nil {
		c.length(about+": lead of a command", k.Lead, 0, longest)
		c.length(about+": validity of a command", k.Valid, 0, longest)
	}
	if r := s.Recorder; r != nil {
		c.recorder(about, s, r)
	}
}

func (c *checker) recorder(about string, s *Spacecraft, r *Recorder) {
	if !(r.Capacity > 0 && r.Capacity <= mostValue) {
		c.say("%s: capacity of the recorder: %g B is not allowed; it must be greater than 0 and at most 1e15 B", about, r.Capacity)
	}
	if len(r.Classes) == 0 {
		c.say("%s: the recorder has no class of data; give one at least", about)
	}
	if s.AtOnce > 1 && !s.SameData {
		c.say("%s: a recorder at several stations at once sends the same data to all; set that", about)
	}
	board := 0.0
	for i := range r.Classes {
		k := &r.Classes[i]
		about := fmt.Sprintf("%s: data %q", about, k.Name)
		c.number(about+": bytes on board", k.OnBoard, 0, mostValue)
		c.number(about+": value of a byte", k.Weight, 0, mostValue)
		c.length(about+": due age", k.Due, 0, longest)
		c.length(about+": time in which the worth fades", k.Fade, 0, longest)
		board += k.OnBoard
		for j, m := range k.Made {
			c.number(about+": bytes a second", m.BytesPerSecond, 0, mostValue)
			c.spans(about+": made", []Span{m.Span})
			if j > 0 && m.From < k.Made[j-1].To {
				c.say("%s: times in which data are made are not in order or overlap at %s", about, clock(c.p.At(m.From)))
			}
		}
	}
	if board > r.Capacity {
		c.say("%s: %g B on board at the start do not fit a recorder of %g B", about, board, r.Capacity)
	}
}

func (c *checker) antenna(a *Antenna) {
	about := fmt.Sprintf("antenna %q", a.Name)
	c.index(about+": station", a.Station, len(c.p.Stations))
	c.number(about+": price of a contact", a.PerContact, 0, mostValue)
	c.number(about+": price of a minute", a.PerMinute, 0, mostValue)
	c.spans(about+": closed", a.Closed)
	if s := a.Slew; s != nil {
		if !(s.AzimuthDegPerS > 0 && s.ElevationDegPerS > 0) || math.IsInf(s.AzimuthDegPerS+s.ElevationDegPerS, 1) {
			c.say("%s: slew rates %g and %g deg/s are not allowed; they must be greater than 0", about, s.AzimuthDegPerS, s.ElevationDegPerS)
		}
		if !(s.ToDeg-s.FromDeg >= 360 && s.ToDeg-s.FromDeg <= 3600) {
			c.say("%s: the cable reaches %g to %g deg; it must reach 360 to 3600 deg around", about, s.FromDeg, s.ToDeg)
		}
	}
}

func (c *checker) candidates() {
	p := c.p
	named := map[string]int{}
	for i := range p.Candidates {
		w := &p.Candidates[i]
		about := fmt.Sprintf("window %q", w.Name)
		if j, ok := named[w.Name]; ok {
			c.say("%s: windows %d and %d have this name; names are unique", about, j+1, i+1)
		}
		named[w.Name] = i
		ok := c.index(about+": spacecraft", w.Spacecraft, len(p.Spacecraft))
		ok = c.index(about+": antenna", w.Antenna, len(p.Antennas)) && ok
		if w.Request >= 0 {
			ok = c.index(about+": request", w.Request, len(p.Requests)) && ok
		}
		c.spans(about, []Span{w.Window})
		if w.Window.From < 0 || w.Window.To > p.Length {
			c.say("%s: %s to %s is not within the horizon %s to %s", about, clock(p.At(w.Window.From)), clock(p.At(w.Window.To)), clock(p.At(0)), clock(p.At(p.Length)))
		}
		c.length(about+": least length", w.Least, 1, longest)
		c.length(about+": greatest length", w.Greatest, 0, longest)
		if w.Greatest > 0 && w.Greatest < w.Least {
			c.say("%s: the greatest length %g s is less than the least %g s", about, w.Greatest.Seconds(), w.Least.Seconds())
		}
		c.length(about+": set-up", w.SetUp, 0, longest)
		c.length(about+": tear-down", w.TearDown, 0, longest)
		c.number(about+": value of a second", w.PerSecond, 0, mostValue)
		if ok && p.Antennas[w.Antenna].Slew != nil && len(w.Course) < 2 {
			c.say("%s: antenna %q slews from target to target; the window needs the directions of its pass", about, p.Antennas[w.Antenna].Name)
		}
		for j := 1; j < len(w.Course); j++ {
			if w.Course[j].At <= w.Course[j-1].At {
				c.say("%s: direction %d of the pass is not later than the one before", about, j+1)
			}
		}
		for k := range w.Links {
			c.link(about, &w.Links[k])
		}
	}
}

func (c *checker) link(about string, l *Link) {
	about = fmt.Sprintf("%s: link %q", about, l.Transmitter)
	c.number(about+": value of a byte", l.PerByte, 0, mostValue)
	for j, v := range l.Volume {
		c.number(about+": bytes", v.Bytes, 0, mostValue)
		if j > 0 && (v.At <= l.Volume[j-1].At || v.Bytes < l.Volume[j-1].Bytes) {
			c.say("%s: point %d of the volume is not later than the one before, or less", about, j+1)
		}
	}
}

func (c *checker) limits() {
	p := c.p
	for i := range p.Limits {
		l := &p.Limits[i]
		about := fmt.Sprintf("limit %q", l.Name)
		c.length(about+": any time of", l.Rolling, 0, longest)
		c.spans(about, l.Spans)
		if l.Rolling > 0 && len(l.Spans) > 0 {
			c.say("%s: it holds for days or for any time of a length, not for both", about)
		}
		if l.Contacts == nil && l.Time == nil && l.Price == nil {
			c.say("%s: it limits nothing; give a number of contacts, a time or a price", about)
		}
		if l.Contacts != nil {
			c.number(about+": contacts", float64(*l.Contacts), 0, 1e9)
		}
		if l.Time != nil {
			c.length(about+": time", *l.Time, 0, 1000*longest)
		}
		if l.Price != nil {
			c.number(about+": money", *l.Price, 0, mostValue)
			if l.Rolling > 0 {
				c.say("%s: money is limited by days or over the plan, not in any time of a length", about)
			}
		}
		for _, s := range l.Stations {
			c.index(about+": station", s, len(p.Stations))
		}
		for _, s := range l.Antennas {
			c.index(about+": antenna", s, len(p.Antennas))
		}
		for _, s := range l.Spacecraft {
			c.index(about+": spacecraft", s, len(p.Spacecraft))
		}
	}
	for i := range p.Shared {
		s := &p.Shared[i]
		c.number(fmt.Sprintf("shared %q: capacity", s.Name), float64(s.Capacity), 0, 1e9)
		for _, a := range s.Antennas {
			c.index(fmt.Sprintf("shared %q: antenna", s.Name), a, len(p.Antennas))
		}
	}
	for i, k := range p.Clashes {
		about := fmt.Sprintf("clash %d", i+1)
		c.index(about, k.A, len(p.Candidates))
		c.index(about, k.B, len(p.Candidates))
		c.spans(about, k.Spans)
	}
}
