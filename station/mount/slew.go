package mount

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// makes tells whether an axis gets from one motion to another in just a time, within its
// limits and its range.
func makes(a station.Axis, from, to motion, time float64) bool {
	v := float64(a.Rate) * (1 + 1e-9)
	if !(math.Abs(from.rate) <= v && math.Abs(to.rate) <= v) {
		return false
	}
	least, most, ok := reach(a, from.rate, to.rate, time)
	if way := to.at - from.at; !ok || way < least-1e-12 || way > most+1e-12 {
		return false
	}
	if math.IsInf(float64(a.Acceleration), 1) || inRange(a, from.brake(a)) && inRange(a, to.start(a)) {
		return true
	}
	// It comes to rest beyond its range, if it does.
	p := newSlew(a, from, to, time)
	return (from.rate*p.cruise >= 0 || inRange(a, from.brake(a))) && (to.rate*p.cruise >= 0 || inRange(a, to.start(a)))
}

func inRange(a station.Axis, at float64) bool { return a.Holds(unit.Angle(at)) }

// brake is where the axis comes to rest at the soonest; start is where it was at rest at
// the latest.
func (m motion) brake(a station.Axis) float64 {
	return m.at + m.rate*math.Abs(m.rate)/(2*float64(a.Acceleration))
}

func (m motion) start(a station.Axis) float64 {
	return m.at - m.rate*math.Abs(m.rate)/(2*float64(a.Acceleration))
}

// slew is a move of an axis: to a cruising rate, along at it, and to the last rate, each
// change at the full acceleration.
type slew struct {
	from, to     motion
	wait         float64 // s before it begins
	time, cruise float64
	acceleration float64
}

// newSlew returns the move that takes just a time in which it can be made. Its way grows
// with the cruising rate, which is so found by halving.
func newSlew(a station.Axis, from, to motion, time float64) slew {
	s := slew{from: from, to: to, time: time, acceleration: float64(a.Acceleration)}
	if math.IsInf(s.acceleration, 1) {
		if time > 0 {
			s.cruise = (to.at - from.at) / time
		}
		return s
	}
	high := min(float64(a.Rate), (from.rate+to.rate+s.acceleration*time)/2)
	low := max(-float64(a.Rate), (from.rate+to.rate-s.acceleration*time)/2)
	for range 60 {
		s.cruise = (low + high) / 2
		if s.end() < to.at {
			low = s.cruise
		} else {
			high = s.cruise
		}
	}
	return s
}

// end is where the move ends.
func (s *slew) end() float64 {
	first, last := math.Abs(s.cruise-s.from.rate)/s.acceleration, math.Abs(s.to.rate-s.cruise)/s.acceleration
	return s.from.at + (s.from.rate+s.cruise)/2*first + s.cruise*(s.time-first-last) + (s.cruise+s.to.rate)/2*last
}

// at returns the motion at a time, up to wait + time.
func (s *slew) at(t float64) motion {
	if t -= s.wait; t < 0 {
		return s.from
	}
	if math.IsInf(s.acceleration, 1) {
		return motion{s.from.at + s.cruise*t, s.cruise}
	}
	first, last := math.Abs(s.cruise-s.from.rate)/s.acceleration, math.Abs(s.to.rate-s.cruise)/s.acceleration
	switch left := s.time - t; {
	case left < last: // from the end backward, so that it ends where it must
		rate := s.to.rate + (s.cruise-s.to.rate)*left/last
		return motion{s.to.at - (rate+s.to.rate)/2*left, rate}
	case t < first:
		rate := s.from.rate + (s.cruise-s.from.rate)*t/first
		return motion{s.from.at + (s.from.rate+rate)/2*t, rate}
	default:
		return motion{s.from.at + (s.from.rate+s.cruise)/2*first + s.cruise*(t-first), s.cruise}
	}
}
