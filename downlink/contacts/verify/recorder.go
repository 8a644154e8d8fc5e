package verify

import (
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// speck is what counts as no data and as no room: a thousandth of a byte.
const speck = 1e-3

// parcel is data of one class, made evenly between two instants (seconds).
type parcel struct{ bytes, from, to float64 }

// memory is the state of a recorder that is followed from event to event.
type memory struct {
	r      *contacts.Recorder
	queues [][]parcel // by class, oldest first
	stored []float64  // by class
	sent   []float64  // bytes a second in the stretch, by class
	kept   []float64
}

// onBoard sends what the recorder holds through the pieces and adds to the contacts'
// values and bytes. Data stay straight between events: a piece begins or ends, data begin
// or cease to be made, a class runs empty, the recorder is full.
func onBoard(r *contacts.Recorder, pieces []piece, length ms, w *contacts.Worth) {
	m := &memory{r: r, queues: make([][]parcel, len(r.Classes)), stored: make([]float64, len(r.Classes)),
		sent: make([]float64, len(r.Classes)), kept: make([]float64, len(r.Classes))}
	cuts := []ms{0, length}
	for _, x := range pieces {
		cuts = append(cuts, x.from, x.to)
	}
	for k, c := range r.Classes {
		if c.OnBoard > 0 {
			m.queues[k] = []parcel{{c.OnBoard, 0, 0}}
			m.stored[k] = c.OnBoard
		}
		for _, d := range c.Made {
			cuts = append(cuts, d.From, d.To)
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	next, on := 0, []piece{} // the pieces that are on
	for k := 0; k+1 < len(cuts); k++ {
		if cuts[k] < 0 || cuts[k+1] > length {
			continue
		}
		span := contacts.Span{From: cuts[k], To: cuts[k+1]}
		on = slices.DeleteFunc(on, func(x piece) bool { return x.to <= span.From })
		for ; next < len(pieces) && pieces[next].from < span.To; next++ {
			on = append(on, pieces[next])
		}
		m.stretch(span, on, w)
	}
}

// stretch follows the recorder through a time in which the link and the making of data
// are even.
func (m *memory) stretch(span contacts.Span, on []piece, w *contacts.Worth) {
	link, worth := 0.0, 0.0
	for _, x := range on {
		link += x.bytes / (x.to - x.from).Seconds()
	}
	made := make([]float64, len(m.r.Classes))
	for k, c := range m.r.Classes {
		for _, d := range c.Made {
			if d.From <= span.From && span.To <= d.To {
				made[k] += d.BytesPerSecond
			}
		}
	}
	bytes := 0.0
	t, end := span.From.Seconds(), span.To.Seconds()
	for t < end {
		m.rates(link, made)
		dt := m.until(end - t)
		for k := range m.queues {
			b, v := m.move(k, t, dt)
			bytes, worth = bytes+b, worth+v
		}
		t += dt
		if end-t < 1e-9 {
			break
		}
	}
	for _, x := range on {
		share := 0.0
		if link > 0 {
			share = x.bytes / (x.to - x.from).Seconds() / link
		}
		w.ByContact[x.contact] += worth * share
		w.ByteShare[x.contact] += bytes * share
	}
}

// rates shares the link out among the classes in their order, and the room for what is
// made. A class with nothing on board sends what is made as it is made.
func (m *memory) rates(link float64, made []float64) {
	total, drained := 0.0, 0.0
	for k := range m.queues {
		total += m.stored[k]
		m.sent[k] = link
		if m.stored[k] <= speck {
			m.sent[k] = math.Min(link, made[k])
		} else {
			drained += m.sent[k]
		}
		link -= m.sent[k]
	}
	room := math.Inf(1)
	if total >= m.r.Capacity-speck {
		room = drained
	}
	for k := range m.queues {
		arriving := made[k]
		if m.stored[k] <= speck {
			arriving -= m.sent[k]
		}
		m.kept[k] = math.Min(arriving, room)
		room -= m.kept[k]
	}
}

// until returns how long the rates hold, at most the given time (seconds).
func (m *memory) until(most float64) float64 {
	total, change := 0.0, 0.0
	for k := range m.queues {
		net := m.kept[k]
		if m.stored[k] > speck {
			net -= m.sent[k]
			if net < 0 {
				most = math.Min(most, m.stored[k]/-net)
			}
		}
		total, change = total+m.stored[k], change+net
	}
	if change > 0 && total < m.r.Capacity-speck {
		most = math.Min(most, (m.r.Capacity-total)/change)
	}
	return math.Max(most, 1e-9)
}

// move lets a class go on for a time and returns what it sent and what that is worth.
func (m *memory) move(k int, t, dt float64) (bytes, worth float64) {
	c := &m.r.Classes[k]
	live := m.stored[k] <= speck
	if in := m.kept[k] * dt; in > 0 {
		m.queues[k] = append(m.queues[k], parcel{in, t, t + dt})
		m.stored[k] += in
	}
	bytes = m.sent[k] * dt
	if live {
		return bytes, bytes * c.Weight // worth all: no age
	}
	bytes = math.Min(bytes, m.stored[k])
	m.stored[k] -= bytes
	left, done := bytes, 0.0
	for left > 0 && len(m.queues[k]) > 0 {
		q := &m.queues[k][0]
		part := math.Min(left, q.bytes)
		middle := q.from
		if q.bytes > 0 {
			middle += (q.to - q.from) * part / q.bytes
		}
		// Sent between these instants, made between these: the age goes straight.
		first, last := t+dt*done/bytes-q.from, t+dt*(done+part)/bytes-middle
		worth += part * c.Weight * meanFade(c, first, last)
		done, left = done+part, left-part
		q.from = middle
		if q.bytes -= part; q.bytes <= 0 {
			m.queues[k] = m.queues[k][1:]
		}
	}
	if m.stored[k] <= speck {
		m.stored[k], m.queues[k] = 0, nil
	}
	return bytes, worth
}

// meanFade returns the mean share of its worth that data keep whose age goes straight
// from a to b (seconds): 1 up to Due, then straight to 0 within Fade.
func meanFade(c *contacts.Class, a, b float64) float64 {
	if c.Fade == 0 {
		return 1
	}
	due, fade := c.Due.Seconds(), c.Fade.Seconds()
	if a > b {
		a, b = b, a
	}
	if b-a < 1e-9 {
		return math.Max(0, math.Min(1, 1-(a-due)/fade))
	}
	// The integral of the share up to an age.
	upTo := func(x float64) float64 {
		y := math.Max(0, math.Min(fade, x-due))
		return math.Min(x, due) + y - y*y/(2*fade)
	}
	return (upTo(b) - upTo(a)) / (b - a)
}
