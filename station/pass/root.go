package pass

import (
	"math"

	"slantwise/orbit"
)

// enough is the greatest last step of Newton's method in s: the sight is carried over
// it by its rates, which leaves half a millimetre of acceleration.
const enough = 0.01

// root appends the only crossing between two sights on different sides of the level
// with sine c: a start from the cubic through both ends, then Newton's method inside
// the bracket. The instant is right to 1e-5 s.
func (s *scene) root(c float64, first, second *sight) {
	lo, hi := first.t, second.t
	t := lo + cubicRoot(first.over(c), second.over(c), first.rate(c), second.rate(c), hi-lo)
	rising := first.over(c) < 0
	var m sight
	for range 60 {
		pos, vel := s.motion.TrackAt(t)
		s.set(&m, t, &pos, &vel)
		f := m.over(c)
		if (f < 0) == rising {
			lo = t
		} else {
			hi = t
		}
		step := -f / m.rate(c)
		if next := t + step; next >= lo && next <= hi {
			if math.Abs(step) < enough && settled(m.rate(c), step) {
				m.carry(step, &vel)
				break
			}
			t = next
			continue
		}
		// No rate, or out of the bracket.
		if hi-lo < 1e-6 {
			break
		}
		t = (lo + hi) / 2
	}
	s.out = append(s.out, m)
}

// carry moves the sight on by dt, some milliseconds at most, along its rates.
func (p *sight) carry(dt float64, vel *orbit.Vec3) {
	p.t += dt
	p.d.X += vel.X * dt
	p.d.Y += vel.Y * dt
	p.d.Z += vel.Z * dt
	p.u += p.du * dt
	p.rho += p.dr * dt
}

// settled tells whether the next step of Newton's method would be under 1e-5 s: it is
// step² f”/(2 f'), and f” of u - c ρ is under 400 m/s² at any range over 160 km.
func settled(rate, step float64) bool {
	const bend = 400
	return bend*step*step < 2e-5*math.Abs(rate)
}

// cubicRoot returns where in [0, h] the cubic with the given values and slopes at the
// ends, of different sign, is zero; roughly, as a start.
func cubicRoot(fa, fb, da, db, h float64) float64 {
	da, db = da*h, db*h
	c2, c3 := 3*(fb-fa)-2*da-db, 2*(fa-fb)+da+db
	lo, hi := 0.0, 1.0
	x := fa / (fa - fb)
	for range 6 {
		f := fa + x*(da+x*(c2+x*c3))
		if (f >= 0) == (fa >= 0) {
			lo = x
		} else {
			hi = x
		}
		next := x - f/(da+x*(2*c2+3*c3*x))
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		moved := math.Abs(next - x)
		x = next
		if moved < 1e-4 {
			break
		}
	}
	return x * h
}
