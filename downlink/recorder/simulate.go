package recorder

import (
	"math"
	"slices"
)

// speck is what counts as nothing in a queue or as no room: a thousandth of a byte.
const speck = 1e-3

// pending is data that were sent and wait for an acknowledgement. All of it takes room;
// what failed was not received.
type pending struct {
	class  int
	parcel parcel
	failed float64 // bytes of the parcel
	sent   float64 // when the last of it arrived
}

// simulation is the state of a run.
type simulation struct {
	plan    *Plan
	queues  []queue
	makings []making
	pending []pending // in the order of sending, from waits on
	waits   int
	held    float64 // bytes of pending

	contact  int       // the one that is on, or the next
	ack      []float64 // the instants of acknowledgement
	nextAck  int
	lines    map[string]*lineState
	result   *Result
	arrivals []arrival

	flow flow // scratch of one stretch
}

// flow is the rates of a stretch, by class, in bytes a second.
type flow struct {
	made, accepted, sent, evicted []float64
	deleted                       float64
}

// Simulate runs the plan. The error joins every fault of it.
func Simulate(p *Plan) (*Result, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	n := len(p.Classes)
	s := &simulation{plan: p, queues: make([]queue, n), lines: map[string]*lineState{}, result: newResult(p)}
	rates := make([]float64, 4*n)
	s.flow = flow{made: rates[:n], accepted: rates[n : 2*n], sent: rates[2*n : 3*n], evicted: rates[3*n:]}
	for _, l := range p.Lines {
		s.lines[l.Station] = &lineState{rate: l.BytesPerSecond}
	}
	for i, c := range p.Classes {
		s.makings = append(s.makings, newMaking(c.Made))
		s.queues[i].add(parcel{-c.OnBoardAge, -c.OnBoardAge, c.OnBoard})
	}
	s.ack = p.acks()
	events := s.events()
	s.arrivals = make([]arrival, 0, 2*len(events)) // grown arrivals of a year cost more than the simulation
	s.point(0)
	for i := 1; i < len(events); i++ {
		s.acknowledge(events[i-1])
		s.stretch(events[i-1], events[i])
		s.endContact(events[i])
		s.point(events[i])
	}
	s.acknowledge(p.Length)
	s.finish()
	return s.result, nil
}

// acks lists the instants of acknowledgement, in order.
func (p *Plan) acks() []float64 {
	var out []float64
	for _, c := range p.Contacts {
		if !c.Uplink {
			continue
		}
		for i := 0; ; i++ {
			at := c.From + float64(i)*p.Acknowledge.Every
			if at >= c.To {
				break
			}
			out = append(out, at)
		}
		out = append(out, c.To)
	}
	return out
}

// events lists the instants at which a rate may change, in order, each once.
func (s *simulation) events() []float64 {
	p := s.plan
	at := []float64{0, p.Length}
	for _, c := range p.Classes {
		for _, m := range c.Made {
			at = append(at, m.From, m.To)
		}
	}
	for _, c := range p.Contacts {
		at = append(at, c.From, c.To)
		for _, t := range c.Steps {
			at = append(at, t.From, t.To)
		}
	}
	for _, a := range s.ack { // what arrived just in time must end a stretch
		at = append(at, a, a-p.Acknowledge.Delay)
	}
	midnight := p.Start.UTC().Truncate(day)
	for t := midnight.Add(day); t.Sub(p.Start).Seconds() < p.Length; t = t.Add(day) {
		at = append(at, t.Sub(p.Start).Seconds())
	}
	at = slices.DeleteFunc(at, func(v float64) bool { return !(v >= 0 && v <= p.Length) })
	slices.Sort(at)
	return slices.Compact(at)
}

// acknowledge deletes what arrived in time and puts what failed back.
func (s *simulation) acknowledge(now float64) {
	for s.nextAck < len(s.ack) && s.ack[s.nextAck] <= now {
		by := s.ack[s.nextAck] - s.plan.Acknowledge.Delay
		s.nextAck++
		for s.waits < len(s.pending) && s.pending[s.waits].sent <= by+1e-9 {
			w := &s.pending[s.waits]
			s.held -= w.parcel.bytes
			if w.failed > 0 {
				s.queues[w.class].putBack(parcel{w.parcel.madeFrom, w.parcel.madeTo, w.failed})
			}
			s.waits++
		}
	}
	if s.waits == len(s.pending) {
		s.pending, s.waits, s.held = s.pending[:0], 0, 0
	}
}

// stretch runs from one event to the next, from one change of state to the other.
func (s *simulation) stretch(from, to float64) {
	for s.contact < len(s.plan.Contacts) && s.plan.Contacts[s.contact].To <= from {
		s.contact++
	}
	step := s.stepAt(from)
	s.madeRates(from, to)
	// Every change empties a queue or fills the recorder.
	for turn := 0; from < to; turn++ {
		until := from + s.rates(step)
		if to-until < moment || turn == mostTurns {
			until = to
		}
		s.advance(step, from, until)
		from = until
	}
}

// moment is the shortest time, in seconds, that the state is followed in; mostTurns
// is more changes than the queues of a plan can bring between two events.
const (
	moment    = 1e-6
	mostTurns = 10_000
)

// stepAt returns the step that is on, nil where nothing is sent.
func (s *simulation) stepAt(t float64) *Step {
	if s.contact == len(s.plan.Contacts) {
		return nil
	}
	steps := s.plan.Contacts[s.contact].Steps
	i, _ := slices.BinarySearchFunc(steps, t, func(st Step, t float64) int {
		if st.To <= t {
			return -1
		}
		return 1
	})
	if i == len(steps) || steps[i].From > t {
		return nil
	}
	return &steps[i]
}

// madeRates fills in what is made between two events.
func (s *simulation) madeRates(from, to float64) {
	middle := (from + to) / 2
	for i := range s.makings {
		s.flow.made[i] = s.makings[i].rate(middle)
	}
}

// stored returns the bytes that take room.
func (s *simulation) stored() float64 {
	sum := s.held
	for i := range s.queues {
		sum += s.queues[i].bytes
	}
	return sum
}

// deletes tells whether what is sent now is deleted at once.
func (s *simulation) deletes() bool {
	return !s.plan.Contacts[s.contact].Uplink && s.plan.WithoutUplink == DeleteWhenSent
}

// rate returns the bytes a second that the recorder may send in a step: without
// housekeeping, and each byte as often as it is sent.
func (s *simulation) rate(step *Step) float64 {
	if step == nil {
		return 0
	}
	r := step.BytesPerSecond * (1 - s.plan.Housekeeping)
	if s.deletes() && s.plan.Copies > 1 {
		r /= float64(s.plan.Copies)
	}
	return r
}

// rates fills in the flow at this moment and returns how long it holds.
func (s *simulation) rates(step *Step) (holds float64) {
	f := &s.flow
	copy(f.accepted, f.made)
	stored := s.stored()
	s.share(step)
	clear(f.evicted)
	grows := 0.0
	for i := range s.queues {
		grows += f.accepted[i]
	}
	grows -= f.deleted
	if room := s.plan.Capacity - stored; room <= max(speck, grows*moment) {
		for range s.queues { // what is not taken in is not sent either, which deletes less
			if !s.shed() {
				break
			}
			s.share(step)
		}
	}
	holds = math.Inf(1)
	grows = -f.deleted
	for i := range s.queues {
		net := f.accepted[i] - f.sent[i] - f.evicted[i]
		grows += f.accepted[i] - f.evicted[i]
		if net < 0 {
			holds = min(holds, s.queues[i].bytes/-net)
		}
	}
	if room := s.plan.Capacity - stored; grows > 0 && room > speck {
		holds = min(holds, room/grows)
	}
	return max(holds, moment)
}

// share gives the rate of a step to the classes in their order.
func (s *simulation) share(step *Step) {
	f := &s.flow
	left := s.rate(step)
	f.deleted = 0
	for i := range s.queues {
		f.sent[i] = left
		if s.queues[i].bytes <= speck {
			f.sent[i] = min(left, f.accepted[i]) // straight through
		}
		left -= f.sent[i]
		if step != nil && s.deletes() {
			f.deleted += f.sent[i]
		}
	}
}

// shed makes what comes in fit into what is deleted, the last class first. It tells
// whether it refused anything.
func (s *simulation) shed() (refused bool) {
	f := &s.flow
	over := -f.deleted
	for _, a := range f.accepted {
		over += a
	}
	for i := len(s.queues) - 1; i >= 0; i-- {
		f.evicted[i] = 0
		if !(over > 0) {
			continue
		}
		if s.plan.WhenFull == Overwrite && s.queues[i].bytes > speck {
			f.evicted[i] = over
			over = 0
			continue
		}
		off := min(f.accepted[i], over)
		f.accepted[i] -= off
		over -= off
		refused = refused || off > 0
	}
	return refused
}
