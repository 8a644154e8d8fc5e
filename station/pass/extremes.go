package pass

import "math"

// extremes returns the instant of the greatest elevation and the least range within
// an arc. Between neighbouring nodes the elevation has at most one maximum (nodes are
// some minutes apart, an elevation swings over a good part of a revolution), so each
// place where its rate goes from rising to falling is refined, and the highest of
// these and of both ends counts; the range likewise.
func (s *scene) extremes(a arc) (top, near float64) {
	before := s.look(a.from)
	top, near = a.from, before.rho
	best := before.sine()
	visit := func(next sight) {
		if before.climb() > 0 && next.climb() < 0 {
			if t, v := s.summitOf(before, next); v > best {
				top, best = t, v
			}
		}
		if next.sine() > best {
			top, best = next.t, next.sine()
		}
		if before.dr < 0 && next.dr > 0 {
			near = math.Min(near, s.closest(before, next))
		}
		near = math.Min(near, next.rho)
		before = next
	}
	for i := s.stretchAt(a.from) + 1; i < len(s.nodes) && s.nodes[i].t < a.to; i++ {
		if s.nodes[i].t > a.from {
			visit(s.see(&s.nodes[i]))
		}
	}
	visit(s.look(a.to))
	return top, near
}

// polish is half the distance in s over which the last step to a culmination takes
// differences of positions: short enough that the third derivative does not count
// (1e-5 s), long enough that rounding does not (1e-8 s on low orbits).
const polish = 0.05

// summitOf returns the culmination between two sights, the first rising and the second
// falling, and its sine. The zero of climb has SGP4's velocity in it, which is not
// quite the derivative of the position, so a last step uses positions alone.
func (s *scene) summitOf(a, b sight) (t, sine float64) {
	z := bracket{a: a.t, fa: a.climb(), b: b.t, fb: b.climb()}
	t = z.guess()
	for range 40 {
		m := s.look(t)
		z.put(t, m.climb())
		before := t
		t = z.guess()
		if math.Abs(t-before) < 0.1 {
			break
		}
	}
	from, to := a.t, b.t
	if to-from < 3*polish { // too short to difference in
		return t, s.sineAt(t)
	}
	t = math.Min(math.Max(t, from+polish), to-polish)
	q0, q1, q2 := s.sineAt(t-polish), s.sineAt(t), s.sineAt(t+polish)
	if bend := q0 - 2*q1 + q2; bend < 0 {
		t += math.Min(math.Max(polish*(q0-q2)/(2*bend), -1), 1)
	}
	t = math.Min(math.Max(t, from), to)
	return t, s.sineAt(t)
}

// closest returns the least range between two sights, the first approaching and the
// second receding. The rate is zero there, so that a hundredth of a second is a
// millimetre or so.
func (s *scene) closest(a, b sight) float64 {
	z := bracket{a: a.t, fa: a.rho * a.dr, b: b.t, fb: b.rho * b.dr}
	for range 40 {
		t := z.guess()
		m := s.look(t)
		z.put(t, m.rho*m.dr)
		if math.Abs(z.guess()-t) < 0.01 {
			return m.rho
		}
	}
	return math.Min(a.rho, b.rho)
}
