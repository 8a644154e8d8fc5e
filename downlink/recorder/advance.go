package recorder

import "math"

// arrival is data that reached a station, with their age there and at the user.
type arrival struct {
	class                  int
	bytes                  float64
	stationOld, stationNew float64 // age of the first and the last of it at the station
	userOld, userNew       float64
}

// advance lets the flow run from one instant to another.
func (s *simulation) advance(step *Step, from, to float64) {
	f, dt := &s.flow, to-from
	var passage passage
	if step != nil {
		s.countContact(step, dt)
		passage = s.throughLine(step, from, to)
	}
	for i := range s.queues {
		q, r := &s.queues[i], &s.result.Classes[i]
		r.Made += f.made[i] * dt
		r.LostFull += (f.made[i] - f.accepted[i]) * dt
		q.add(parcel{from, to, f.accepted[i] * dt})
		if n := f.sent[i] * dt; n > 0 {
			s.send(i, n, step, from, to, &passage)
		}
		if n := f.evicted[i] * dt; n > 0 {
			q.take(n, func(p parcel) { r.LostFull += p.bytes })
		}
	}
}

// send takes n bytes of a class and sends them over a stretch.
func (s *simulation) send(class int, n float64, step *Step, from, to float64, way *passage) {
	at, deletes := from, s.deletes()
	loss := step.Loss
	if deletes && s.plan.Copies > 1 {
		loss = math.Pow(loss, float64(s.plan.Copies))
	}
	r := &s.result.Classes[class]
	s.queues[class].take(n, func(p parcel) {
		until := min(to, at+(to-from)*p.bytes/n)
		failed := p.bytes * loss
		if !deletes && failed < 0.5 {
			failed = 0
		}
		got := p.bytes - failed
		r.Received += got
		s.result.Contacts[s.contact].Received += got
		s.result.Contacts[s.contact].Sent += p.bytes
		s.volume(from, got)
		if got > 0 {
			s.arrive(class, got, p, at, until, way)
		}
		if deletes {
			r.LostOnTheWay += failed
		} else {
			s.pending = append(s.pending, pending{class, p, failed, until})
			s.held += p.bytes
		}
		at = until
	})
}

// arrive notes the ages of data that were sent evenly from one instant to another.
func (s *simulation) arrive(class int, bytes float64, p parcel, from, to float64, way *passage) {
	add := func(a, b float64) { // shares of the parcel
		made0, made1 := mix(p.madeFrom, p.madeTo, a), mix(p.madeFrom, p.madeTo, b)
		sent0, sent1 := mix(from, to, a), mix(from, to, b)
		user0, user1 := way.out(sent0), way.out(sent1)
		s.result.OnLine += bytes * (b - a) * shareAfter(s.plan.Length, user0, user1)
		s.arrivals = append(s.arrivals, arrival{
			class: class, bytes: bytes * (b - a),
			stationOld: sent0 - made0, stationNew: sent1 - made1, userOld: user0 - made0, userNew: user1 - made1,
		})
	}
	if cut := (way.bend - from) / (to - from); cut > 1e-12 && cut < 1-1e-12 {
		add(0, cut)
		add(cut, 1)
	} else {
		add(0, 1)
	}
}

func mix(a, b, w float64) float64 { return a + (b-a)*w }

// shareAfter returns the share of what arrives evenly from a to b that comes after t.
func shareAfter(t, a, b float64) float64 {
	switch {
	case b <= t:
		return 0
	case a >= t:
		return 1
	}
	return (b - t) / (b - a)
}

// countContact counts what a step offers.
func (s *simulation) countContact(step *Step, dt float64) {
	r := &s.result.Contacts[s.contact]
	r.Housekeeping += step.BytesPerSecond * s.plan.Housekeeping * dt
	r.Offered += s.rate(step) * dt
}
