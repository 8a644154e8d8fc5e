package instance

import (
	"fmt"
	"math/rand/v2"
	"time"

	"slantwise/downlink/contacts"
)

// Small makes a problem of a few windows, each a few steps of a minute long, in which
// rules of every kind turn up at random, so that all plans can be tried one after
// another. Where plain is set only antennas, spacecraft and requests bind.
func Small(seed uint64, plain bool) *contacts.Problem {
	s := small{r: rand.New(rand.NewPCG(seed, 5)), p: &contacts.Problem{Start: Start, Length: 24 * contacts.Minute, Step: contacts.Minute}}
	s.p.Split = s.r.IntN(2) == 0
	s.network()
	for i := range 3 + s.r.IntN(2) {
		s.candidate(i)
	}
	if !plain {
		s.rules()
		s.values()
	}
	return s.p
}

type small struct {
	r *rand.Rand
	p *contacts.Problem
}

func (s *small) chance(oneIn int) bool { return s.r.IntN(oneIn) == 0 }

func (s *small) minutes(lo, hi int) contacts.Ms {
	return contacts.Ms(lo+s.r.IntN(hi-lo+1)) * contacts.Minute
}

func (s *small) network() {
	for i := range 2 {
		s.p.Spacecraft = append(s.p.Spacecraft, contacts.Spacecraft{Name: fmt.Sprintf("Invented %d", i+1)})
		s.p.Stations = append(s.p.Stations, contacts.Station{Name: fmt.Sprintf("Site %d", i+1), Zone: time.UTC})
		s.p.Requests = append(s.p.Requests, contacts.Request{Name: fmt.Sprintf("R%d", i+1), Desired: s.minutes(1, 5)})
	}
	for i := range 2 + s.r.IntN(2) {
		s.p.Antennas = append(s.p.Antennas, contacts.Antenna{Name: fmt.Sprintf("dish %d", i+1), Station: i % 2})
	}
}

func (s *small) candidate(i int) {
	length := s.minutes(1, 4)
	from := s.minutes(4, 10)
	c := contacts.Candidate{
		Name: fmt.Sprintf("w%d", i+1), Request: s.r.IntN(4) - 2, Spacecraft: s.r.IntN(2), Antenna: s.r.IntN(len(s.p.Antennas)),
		Window: contacts.Span{From: from, To: from + length}, Least: min(length, s.minutes(1, 2)),
		SetUp: s.minutes(0, 1), TearDown: s.minutes(0, 1), PerSecond: float64(s.r.IntN(4)), Downlink: true, Uplink: s.chance(2),
	}
	if c.Request < 0 {
		c.Request = -1
		link := contacts.Link{Transmitter: "X-band", PerByte: 1}
		bytes := 0.0
		for t := from; t <= from+length; t += contacts.Minute {
			link.Volume = append(link.Volume, contacts.Point{At: t, Bytes: bytes})
			bytes += float64(60 * s.r.IntN(4))
		}
		c.Links = []contacts.Link{link}
	}
	if s.chance(4) {
		c.Greatest = max(c.Least, s.minutes(1, 3))
	}
	s.p.Candidates = append(s.p.Candidates, c)
}

// rules puts in some of the rules.
func (s *small) rules() {
	p := s.p
	if s.chance(4) {
		p.Now, p.Stations[0].Lead = -contacts.Minute, s.minutes(3, 8)
	}
	if s.chance(4) {
		p.Antennas[0].Closed = []contacts.Span{{From: s.minutes(5, 8), To: s.minutes(9, 10)}}
	}
	if s.chance(5) {
		p.Stations[1].Staffed = []contacts.Span{{From: s.minutes(2, 6), To: s.minutes(9, 14)}}
	}
	for i := range p.Spacecraft {
		s.craft(&p.Spacecraft[i])
	}
	if s.chance(3) {
		p.Shared = []contacts.Shared{{Name: "chain", Antennas: []int{0, 1}, Capacity: 1, Busy: s.chance(2)}}
	}
	if s.chance(4) {
		p.Clashes = []contacts.Clash{{A: 0, B: 1, Spans: []contacts.Span{{From: s.minutes(4, 8), To: s.minutes(9, 12)}}}}
	}
	if s.chance(4) {
		p.Antennas[0].Slew = &contacts.Slew{AzimuthDegPerS: 3, ElevationDegPerS: 3, FromDeg: -180, ToDeg: 220}
		for i := range p.Candidates {
			c := &p.Candidates[i]
			az := 360 * s.r.Float64()
			c.Course = []contacts.Aim{{At: c.Window.From, AzimuthDeg: az, ElevationDeg: 5}, {At: c.Window.To, AzimuthDeg: az + 60*s.r.Float64() - 30, ElevationDeg: 20}}
		}
	}
	s.limits()
}

func (s *small) craft(c *contacts.Spacecraft) {
	switch s.r.IntN(5) {
	case 0:
		c.Between = contacts.Minute
	case 1:
		c.Repoint = contacts.Minute
	case 2:
		c.AtOnce, c.SameData = 2, s.chance(2)
		if s.chance(2) {
			c.HandOver = contacts.HandOver{Least: contacts.Minute, Greatest: s.minutes(1, 2)}
		}
	}
	if s.chance(5) {
		c.Command = &contacts.Command{Lead: s.minutes(0, 2), Valid: s.minutes(0, 1) * 5}
		if s.chance(2) {
			c.Command.Loaded = []contacts.Ms{s.minutes(0, 6)}
		}
	}
}

func (s *small) limits() {
	p := s.p
	spans := []contacts.Span{{From: 0, To: s.minutes(6, 9)}}
	spans = append(spans, contacts.Span{From: spans[0].To, To: p.Length})
	for range s.r.IntN(3) {
		l := contacts.Limit{Name: "limit", Spans: spans}
		switch s.r.IntN(4) {
		case 0:
			l.Spacecraft = []int{0}
		case 1:
			l.Stations = []int{0}
		case 2:
			l.Spans = nil
		}
		if s.chance(3) {
			l.Spans, l.Rolling = nil, s.minutes(3, 8)
		}
		switch n, t, m := s.r.IntN(3), s.minutes(1, 6), float64(s.r.IntN(8)); {
		case s.chance(3):
			l.Contacts = &n
		case s.chance(2) && l.Rolling == 0:
			l.Price = &m
			p.Antennas[0].PerContact, p.Antennas[1].PerMinute = 2, 1
		default:
			l.Time = &t
		}
		p.Limits = append(p.Limits, l)
	}
}

// values puts in shares, prices, a plan in force and recorders.
func (s *small) values() {
	p := s.p
	if s.chance(4) {
		p.Weights.Share, p.Spacecraft[0].Share, p.Spacecraft[1].Share = 2, 150, 200
	}
	if s.chance(4) {
		p.Weights.Price, p.Antennas[0].PerContact, p.Antennas[1].PerMinute = 10, 3, 2
	}
	if s.chance(4) {
		c := &p.Candidates[0]
		p.InForce = []contacts.Contact{{Candidate: 0, Span: contacts.Span{From: c.Window.From, To: c.Window.From + c.Least}}}
		p.Weights.Change = 20
		if d := &p.Candidates[1]; s.chance(3) && d.Antenna != c.Antenna && d.Spacecraft != c.Spacecraft && d.Request < 0 && c.Request < 0 {
			p.Held = []contacts.Contact{{Candidate: 1, Span: contacts.Span{From: d.Window.From, To: d.Window.From + d.Least}, Fixed: true}}
		}
		if s.chance(3) {
			p.Stations[p.Antennas[c.Antenna].Station].Notice = 12 * contacts.Minute
		}
	}
	if s.chance(4) && (p.Spacecraft[0].AtOnce < 2 || p.Spacecraft[0].SameData) {
		p.Spacecraft[0].Recorder = &contacts.Recorder{Capacity: float64(60 * (1 + s.r.IntN(6))), Classes: []contacts.Class{
			{Name: "first", OnBoard: float64(s.r.IntN(60)), Weight: 3, Due: s.minutes(1, 4), Fade: s.minutes(0, 6)},
			{Name: "second", Weight: 1, Made: []contacts.Made{{Span: contacts.Span{From: s.minutes(0, 5), To: s.minutes(8, 20)}, BytesPerSecond: float64(s.r.IntN(3))}}},
		}}
	}
}
