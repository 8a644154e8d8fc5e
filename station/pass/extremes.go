package pass

import "math"

// extremes returns the sight at the greatest elevation and the least range within an
// arc. Between neighbouring nodes the elevation has at most one maximum (nodes are
// some minutes apart, an elevation swings over a good part of a revolution), so each
// place where its rate goes from rising to falling is refined, and the highest of
// these and of both ends counts; the range likewise.
func (s *scene) extremes(a *arc) (top sight, near float64) {
	top, near = a.from, min(a.from.rho, a.to.rho)
	before, next := a.from, sight{}
	for i := s.stretchAt(a.from.t) + 1; ; i++ {
		last := i >= len(s.nodes) || s.nodes[i].t >= a.to.t
		if last {
			next = a.to
		} else {
			s.set(&next, s.nodes[i].t, &s.nodes[i].pos, &s.nodes[i].vel)
		}
		if next.sine() > top.sine() {
			top = next
		}
		if before.climb() > 0 && next.climb() < 0 {
			if m := s.summitOf(&before, &next); m.sine() > top.sine() {
				top = m
			}
		}
		near = min(near, next.rho)
		if before.dr < 0 && next.dr > 0 {
			near = min(near, s.closest(&before, &next, &top))
		}
		if last {
			return top, near
		}
		before = next
	}
}

// summitOf returns the sight at the culmination between two sights, the first rising
// and the second falling.
func (s *scene) summitOf(a, b *sight) (m sight) {
	z := newSecant(a.t, a.climb(), b.t, b.climb())
	t := z.next()
	for range 60 {
		pos, vel := s.motion.TrackAt(t)
		s.set(&m, t, &pos, &vel)
		z.put(t, m.climb())
		step := z.next() - t
		if math.Abs(step) < enough {
			m.carry(step, &vel)
			break
		}
		t += step
	}
	return m
}

// closest returns the least range between two sights, the first approaching and the
// second receding. The culmination is near it more often than not, and serves as a
// first guess.
func (s *scene) closest(a, b, top *sight) float64 {
	z := newSecant(a.t, a.rho*a.dr, b.t, b.rho*b.dr)
	if top.t > a.t && top.t < b.t {
		z.put(top.t, top.rho*top.dr)
	}
	near := min(a.rho, b.rho)
	for range 60 {
		t := z.next()
		m := s.look(t)
		w := m.rho * m.dr
		z.put(t, w)
		near = m.rho
		// ρ² is a parabola in time near its least value; what the next step would take
		// off the range is w step / 2ρ.
		if step := z.next() - t; math.Abs(w*step) < 2e-3*m.rho {
			break
		}
	}
	return near
}
