package mount

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// chaseStep is the step of the drives' loop, s.
const chaseStep = 0.05

// trace is a course of the axes in steps of the drives' loop.
type trace struct {
	step float64
	at   []place
	rate []place // rad/s, of the step that ends there
}

func (r *trace) motions(t float64) (lower, upper motion) {
	x := max(0, t/r.step)
	i := min(int(x), len(r.at)-2)
	share := min(1, x-float64(i))
	a, b, rate := r.at[i], r.at[i+1], r.rate[i+1]
	return motion{a.lower + share*(b.lower-a.lower), rate.lower}, motion{a.upper + share*(b.upper-a.upper), rate.upper}
}

// Chase returns what becomes of the pass if the mount begins as the plan does and then
// turns each axis toward the target as hard as it can, braking in time, without looking
// ahead: what a plan gains is measured from here. The cable is kept to: at its end the
// axis stands.
func (p *Plan) Chase(tolerance unit.Angle) *Plan {
	if !p.Reached {
		return p
	}
	out := *p
	out.Chases, out.Slews, out.Lost = true, nil, nil
	out.GreatestLower, out.GreatestUpper, out.Largest = 0, 0, 0
	out.OnTrack.To = p.course.length
	out.pieces = nil
	if p.OnTrack.From > 0 {
		out.pieces = append(out.pieces, p.pieces[0])
	}
	if out.OnTrack.Seconds() > 0 {
		out.pieces = append(out.pieces, p.chase())
	}
	last, _, _ := out.At(p.course.length)
	out.End = last
	out.judge(tolerance)
	return &out
}

// chase runs the drives' loop from the first instant on track to the end.
func (p *Plan) chase() piece {
	m, s, w := &p.drive.mount, p.search, p.search.ways[p.first]
	n := max(1, int(math.Ceil((p.course.length-p.OnTrack.From)/chaseStep)))
	dt := (p.course.length - p.OnTrack.From) / float64(n)
	r := &trace{step: dt, at: make([]place, n+1), rate: make([]place, n+1)}
	lower, upper := s.motionsAt(p.first, p.OnTrack.From)
	at, rate := place{lower.at, upper.at}, place{clamp(lower.rate, m.Lower), clamp(upper.rate, m.Upper)}
	r.at[0], r.rate[0] = at, rate
	for i := 1; i <= n; i++ {
		l, u := s.onTrack(p.OnTrack.From + dt*float64(i))
		target := w.of(l.at, u.at)
		if w.over {
			u.rate = -u.rate
		}
		at.lower, rate.lower = chased(m.Lower, at.lower, rate.lower, motion{target.lower, l.rate}, dt)
		at.upper, rate.upper = chased(m.Upper, at.upper, rate.upper, motion{target.upper, u.rate}, dt)
		r.at[i], r.rate[i] = at, rate
	}
	return piece{Span: Span{p.OnTrack.From, p.course.length}, trace: r}
}

func clamp(rate float64, a station.Axis) float64 {
	return max(-float64(a.Rate), min(float64(a.Rate), rate))
}

// chased turns an axis toward a target for a step. Far from it, it goes as fast as it
// can still brake; near it, it takes up what is left in the step.
func chased(a station.Axis, at, rate float64, target motion, dt float64) (float64, float64) {
	acc := float64(a.Acceleration)
	off := target.at - at
	want := off / dt
	if !math.IsInf(acc, 1) {
		toward := clamp(target.rate, a)
		ahead := off - toward*dt
		closing := min(math.Sqrt(2*acc*math.Abs(ahead)), math.Abs(ahead)/dt)
		want = toward + math.Copysign(closing, ahead)
		want = max(rate-acc*dt, min(rate+acc*dt, want))
	}
	next := max(float64(a.Low), min(float64(a.High), at+clamp(want, a)*dt))
	return next, (next - at) / dt
}

// orChased is the plan, or the chase where that loses less of the worth: with a wide
// tolerance it may, since a plan's slews begin and end on track.
func (p *Plan) orChased(tolerance unit.Angle) *Plan {
	if tolerance <= 0 || len(p.Lost) == 0 || !p.Reached {
		return p
	}
	if c := p.Chase(tolerance); c.lostWorth() < p.lostWorth() {
		return c
	}
	return p
}

func (p *Plan) lostWorth() float64 {
	sum := 0.0
	for _, l := range p.Lost {
		sum += p.search.worthBetween(l.From, l.To)
	}
	return sum
}
