package mount

import (
	"math"
	"slices"
	"sort"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// piece is a part of a plan, from one instant of the course to another. An axis rests,
// follows the target in a way, slews, or chases it.
type piece struct {
	Span
	resting                bool
	rest                   place
	way                    way
	lower, upper           slew
	lowerSlews, upperSlews bool
	trace                  *trace                                // a chase
	look                   func(t float64) (lower, upper motion) // on track, in way 0
}

// motions returns where the axes are and how they turn.
func (p *piece) motions(t float64) (lower, upper motion) {
	if p.resting {
		return motion{at: p.rest.lower}, motion{at: p.rest.upper}
	}
	if p.trace != nil {
		return p.trace.motions(t - p.From)
	}
	if !p.lowerSlews || !p.upperSlews {
		lower, upper = p.look(t)
		at := p.way.of(lower.at, upper.at)
		lower.at, upper.at = at.lower, at.upper
		if p.way.over {
			upper.rate = -upper.rate
		}
	}
	if p.lowerSlews {
		lower = p.lower.at(t - p.From)
	}
	if p.upperSlews {
		upper = p.upper.at(t - p.From)
	}
	return lower, upper
}

// onTrack returns what the axes do to be on track at an instant, in the way of no turn.
func (s *search) onTrack(t float64) (lower, upper motion) {
	i := s.before(t)
	dir, v := s.course.at(t)
	a := s.drive.frame.angles(dir)
	lower.at = s.lower[i] + math.Remainder(float64(a.Lower)-s.lower[i], 2*math.Pi)
	upper.at = float64(a.Upper)
	lower.rate, upper.rate = s.drive.frame.rates(dir, v)
	return lower, upper
}

// motionsAt returns what the axes do to be on track at an instant in a way.
func (s *search) motionsAt(w int, t float64) (lower, upper motion) {
	p := piece{way: s.ways[w], look: s.onTrack}
	return p.motions(t)
}

// before and after return the samples around an instant.
func (s *samples) before(t float64) int {
	return max(0, sort.Search(len(s.at), func(i int) bool { return s.at[i] > t })-1)
}

func (s *samples) after(t float64) int {
	return min(len(s.at)-1, sort.Search(len(s.at), func(i int) bool { return s.at[i] >= t }))
}

// leg is a part of a course that is followed in one way, from one sample to another.
type leg struct {
	way         int
	first, last int
	from, to    float64 // s, as refined
}

// legs goes back from the last state of a search.
func (s *search) legs(w, i int) []leg {
	var out []leg
	l := leg{way: w, last: i, to: s.at[i]}
	for {
		o := s.origin[w][i]
		if o.kind != followed {
			l.first, l.from = i, s.at[i]
			out = append(out, l)
			if o.kind == begun {
				slices.Reverse(out)
				return out
			}
			l = leg{way: o.way, last: o.at, to: s.at[o.at]}
		}
		w, i = o.way, o.at
	}
}

// planFrom searches, and lays out the course that was found.
func (d *Drive) planFrom(s *search, c *Course, o Options, first int) *Plan {
	p := &Plan{drive: d, course: c}
	w, i, ok := s.run(first)
	p.Reached = ok
	if !ok {
		rest := s.rest()
		p.Start, p.End = rest, rest
		p.pieces = []piece{{Span: Span{0, c.length}, resting: true, rest: place{float64(rest.Lower), float64(rest.Upper)}}}
		p.judge(o.Tolerance)
		return p
	}
	legs := s.legs(w, i)
	p.search, p.first = s, legs[0].way
	begin, end := s.place(legs[0].way, legs[0].first), s.place(w, i)
	p.Start = station.AxisAngles{Lower: unit.Angle(begin.lower), Upper: unit.Angle(begin.upper)}
	p.End = station.AxisAngles{Lower: unit.Angle(end.lower), Upper: unit.Angle(end.upper)}
	p.StartsOver = s.ways[legs[0].way].over
	p.OnTrack = Span{legs[0].from, s.at[i]}
	p.layStart(s, legs[0].way, legs[0].first)
	for k := range legs {
		l := &legs[k]
		if k > 0 {
			p.Slews = append(p.Slews, Slew{Span: Span{legs[k-1].to, l.from}, TurnOver: legs[k-1].way != l.way})
			p.pieces = append(p.pieces, s.slewBetween(&legs[k-1], l))
		}
		if k+1 < len(legs) {
			s.refine(l, &legs[k+1], o.Tolerance)
		}
		p.pieces = append(p.pieces, piece{Span: Span{l.from, l.to}, way: s.ways[l.way], look: s.onTrack})
	}
	if s.at[i] < c.length {
		p.pieces = append(p.pieces, piece{Span: Span{s.at[i], c.length}, resting: true, rest: end})
	}
	p.judge(o.Tolerance)
	return p
}

func (p *piece) follows() bool {
	return !p.resting && p.trace == nil && !p.lowerSlews && !p.upperSlews
}

// slewBetween lays the slew of the axes that cannot follow all the while.
func (s *search) slewBetween(a, b *leg) piece {
	part := piece{Span: Span{a.to, b.from}, way: s.ways[b.way], look: s.onTrack}
	lowerFrom, upperFrom := s.motionsAt(a.way, a.to)
	lowerTo, upperTo := s.motionsAt(b.way, b.from)
	k, i := s.before(a.to), s.after(b.from)
	if part.lowerSlews = !s.lowerFollows(a.way, k, b.way, i); part.lowerSlews {
		part.lower = newSlew(s.drive.mount.Lower, lowerFrom, lowerTo, part.Seconds())
	}
	if part.upperSlews = !s.upperFollows(a.way, k, b.way, i); part.upperSlews {
		part.upper = newSlew(s.drive.mount.Upper, upperFrom, upperTo, part.Seconds())
	}
	return part
}

// layStart lays what comes before the mount is on track: it waits there, or is on its
// way from where it rested, so that it just arrives.
func (p *Plan) layStart(s *search, w, i int) {
	if i == 0 {
		return
	}
	span := Span{0, s.at[i]}
	if s.from == nil {
		p.pieces = append(p.pieces, piece{Span: span, resting: true, rest: s.place(w, i)})
		return
	}
	part := piece{Span: span, lowerSlews: true, upperSlews: true}
	lower, upper := s.motions(w, i)
	part.lower = s.approach(s.drive.mount.Lower, motion{at: float64(s.from.Lower)}, lower, s.at[i])
	part.upper = s.approach(s.drive.mount.Upper, motion{at: float64(s.from.Upper)}, upper, s.at[i])
	p.pieces = append(p.pieces, part)
}

// approach is the move of an axis that just arrives at an instant of the course. It may
// have begun before the course did.
func (s *search) approach(a station.Axis, from, to motion, at float64) slew {
	time := quickest(a, from, to)
	move := newSlew(a, from, to, time)
	move.wait = at - time
	return move
}

// At returns where the axes are commanded at an instant of the course, and how they
// turn. Angles are continuous and within the ranges, but where the mount begins to
// follow a target out of rest, as it rises over the mount's limits, and leaves it for good.
func (p *Plan) At(t float64) (at station.AxisAngles, lower, upper unit.AngularRate) {
	l, u := p.motions(t)
	return station.AxisAngles{Lower: unit.Angle(l.at), Upper: unit.Angle(u.at)}, unit.AngularRate(l.rate), unit.AngularRate(u.rate)
}

func (p *Plan) motions(t float64) (lower, upper motion) {
	i := sort.Search(len(p.pieces), func(i int) bool { return p.pieces[i].To > t })
	return p.pieces[min(i, len(p.pieces)-1)].motions(t)
}

// ErrorAt returns the angle on the sky between where the mount looks and the target.
func (p *Plan) ErrorAt(t float64) unit.Angle {
	l, u := p.motions(t)
	dir, _ := p.course.at(t)
	return between(p.drive.frame.direction(station.AxisAngles{Lower: unit.Angle(l.at), Upper: unit.Angle(u.at)}), dir)
}

// judge finds what is lost, the greatest rates and the largest error.
func (p *Plan) judge(tolerance unit.Angle) {
	p.Lost = p.lost(max(tolerance, exact))
	for i := range p.pieces {
		part := &p.pieces[i]
		if part.resting {
			continue
		}
		for t := part.From; ; {
			l, u := part.motions(t)
			p.GreatestLower = max(p.GreatestLower, unit.AngularRate(math.Abs(l.rate)))
			p.GreatestUpper = max(p.GreatestUpper, unit.AngularRate(math.Abs(u.rate)))
			if !part.follows() && t >= p.OnTrack.From {
				p.Largest = max(p.Largest, p.ErrorAt(min(t, part.To-1e-9)))
			}
			if t >= part.To {
				break
			}
			if part.follows() {
				t = min(p.search.at[min(p.search.before(t)+1, len(p.search.at)-1)], part.To)
			} else {
				t = min(t+fineStep, part.To)
			}
		}
	}
}

// exact is the error that rounding makes.
const exact = 1e-6 * unit.Degree

// lost returns the spans in which the error is greater than a tolerance, the ends to a
// millisecond.
func (p *Plan) lost(tolerance unit.Angle) []Span {
	out := []Span{}
	over := func(t float64) bool { return p.ErrorAt(t) > tolerance }
	for i := range p.pieces {
		part := &p.pieces[i]
		if part.follows() {
			continue
		}
		n := max(1, int(math.Ceil(part.Seconds()/fineStep)))
		n = min(n, 4*mostSamples)
		before, beforeAt := false, part.From
		for k := 0; k <= n; k++ {
			t := part.From + part.Seconds()*float64(k)/float64(n)
			if k == n {
				t = math.Nextafter(part.To, part.From) // this piece's own end
			}
			now := over(t)
			switch {
			case k == 0 && now:
				out = append(out, Span{part.From, part.To})
			case now && !before:
				out = append(out, Span{crossing(over, beforeAt, t, false), part.To})
			case !now && before:
				out[len(out)-1].To = crossing(over, beforeAt, t, true)
			}
			before, beforeAt = now, t
		}
	}
	return joined(out)
}

// crossing halves the time in which a condition changes to a millisecond.
func crossing(over func(float64) bool, a, b float64, first bool) float64 {
	for b-a > 1e-3 {
		if m := (a + b) / 2; over(m) == first {
			a = m
		} else {
			b = m
		}
	}
	return b
}

// joined joins spans that touch.
func joined(in []Span) []Span {
	out := in[:0]
	for _, s := range in {
		if n := len(out); n > 0 && s.From <= out[n-1].To+1e-9 {
			out[n-1].To = max(out[n-1].To, s.To)
		} else {
			out = append(out, s)
		}
	}
	return out
}
