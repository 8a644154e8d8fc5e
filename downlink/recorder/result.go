package recorder

import (
	"cmp"
	"slices"
	"time"
)

const day = 24 * time.Hour

// Result is what becomes of the data of a plan. All volumes are in bytes.
type Result struct {
	Classes  []ClassResult
	Contacts []ContactResult // as the plan's
	Course   []Point         // the recorder at every event, straight between them

	Latency Latency  // of all data that reached a station
	OnLine  float64  // received at a station, and not through its ground line at the end
	Days    []Volume // by UTC day and station
	Weeks   []Volume // by week from Monday, UTC, and station
}

// ClassResult is the account of a class: OnBoard at the start and Made are Received,
// LostFull, LostOnTheWay and OnBoardEnd together.
type ClassResult struct {
	Name         string
	OnBoardStart float64
	Made         float64
	Received     float64 // at the stations
	LostFull     float64 // found no room, or was overwritten
	LostOnTheWay float64 // sent, deleted and not received
	OnBoardEnd   float64 // not yet received
	Latency      Latency
}

// ContactResult is what a contact brought.
type ContactResult struct {
	Station      string
	From, To     float64 // seconds
	Offered      float64 // what the recorder could have sent
	Sent         float64
	Received     float64
	Housekeeping float64 // sent beside it
	Backlog      float64 // on board and not received, at its end
}

// Point is the state of the recorder at an instant.
type Point struct {
	Seconds float64
	Stored  float64 // takes room: unsent, and sent without an acknowledgement
	Unsent  float64
}

// Volume is what a station received in a span of time.
type Volume struct {
	Station string
	From    time.Time // midnight UTC, of a Monday for weeks
	Bytes   float64
}

func newResult(p *Plan) *Result {
	r := &Result{Classes: make([]ClassResult, len(p.Classes)), Contacts: make([]ContactResult, len(p.Contacts))}
	for i, c := range p.Classes {
		r.Classes[i] = ClassResult{Name: c.Name, OnBoardStart: c.OnBoard}
	}
	for i, c := range p.Contacts {
		r.Contacts[i] = ContactResult{Station: c.Station, From: c.From, To: c.To}
	}
	return r
}

func (s *simulation) point(t float64) {
	unsent := 0.0
	for i := range s.queues {
		unsent += s.queues[i].bytes
	}
	s.result.Course = append(s.result.Course, Point{t, unsent + s.held, unsent})
}

// endContact notes what a contact leaves on board.
func (s *simulation) endContact(t float64) {
	if s.contact == len(s.plan.Contacts) || s.plan.Contacts[s.contact].To != t {
		return
	}
	s.result.Contacts[s.contact].Backlog = sum(s.notReceived())
}

// notReceived returns what is on board and was not received, by class.
func (s *simulation) notReceived() []float64 {
	out := make([]float64, len(s.queues))
	for i := range s.queues {
		out[i] = s.queues[i].bytes
	}
	for _, w := range s.pending[s.waits:] {
		out[w.class] += w.failed
	}
	return out
}

func sum(v []float64) float64 {
	total := 0.0
	for _, x := range v {
		total += x
	}
	return total
}

// volume counts what a station received at an instant.
func (s *simulation) volume(at, bytes float64) {
	station := s.plan.Contacts[s.contact].Station
	date := s.plan.Start.Add(time.Duration(at * float64(time.Second))).UTC().Truncate(day)
	days := s.result.Days
	for i := len(days) - 1; i >= 0 && days[i].From.Equal(date); i-- {
		if days[i].Station == station {
			days[i].Bytes += bytes
			return
		}
	}
	s.result.Days = append(days, Volume{station, date, bytes})
}

// finish fills in what the end and all arrivals tell.
func (s *simulation) finish() {
	r := s.result
	for i, b := range s.notReceived() {
		r.Classes[i].OnBoardEnd = b
		r.Classes[i].Latency = latency(s.arrivals, i)
	}
	r.Latency = latency(s.arrivals, -1)
	sortVolumes(r.Days)
	r.Weeks = Weeks(r.Days)
}

// Weeks adds days up to weeks that begin on Monday.
func Weeks(days []Volume) []Volume {
	var out []Volume
	for _, d := range days {
		monday := d.From.AddDate(0, 0, -(int(d.From.Weekday())+6)%7)
		i := slices.IndexFunc(out, func(w Volume) bool { return w.Station == d.Station && w.From.Equal(monday) })
		if i < 0 {
			out = append(out, Volume{d.Station, monday, d.Bytes})
		} else {
			out[i].Bytes += d.Bytes
		}
	}
	sortVolumes(out)
	return out
}

func sortVolumes(v []Volume) {
	slices.SortFunc(v, func(a, b Volume) int { return cmp.Or(a.From.Compare(b.From), cmp.Compare(a.Station, b.Station)) })
}
