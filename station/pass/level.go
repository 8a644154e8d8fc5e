package pass

import "math"

// resolution is the time under which the search no longer divides: what happens
// twice within it is not told apart. Half the millisecond that times are given to.
const resolution = 5e-4

// rateDoubt is the most that a rate of u or ρ from SGP4's velocity differs from the
// derivative of its position, in m/s: 0.25 was measured on the lowest perigees.
const rateDoubt = 1.0

// level appends to s.out the instants at which the elevation crosses the level with
// sine c, rising and falling in turn, and tells whether it stands above at the start
// of the window.
//
// Completeness: every stretch is either passed over because a bound says that the
// function u - c ρ keeps its sign there, or has been shown to be concave, convex or
// monotone, which leaves at most two crossings, or was divided; down to resolution.
func (s *scene) level(c float64) (above bool) {
	first := s.see(&s.nodes[0])
	s.candidates(c, func(i int) {
		a, b := s.see(&s.nodes[i]), s.see(&s.nodes[i+1])
		s.resolve(c, &a, &b, &s.stretches[i])
	})
	return first.over(c) >= 0
}

// candidates calls do for the stretches that may hold a point above the level: the
// others stay below the horizontal plane (or, for a level below that, under it by
// enough), since u is within bulge of its chord.
func (s *scene) candidates(c float64, do func(i int)) {
	up, o := s.frame.Up, s.frame.Origin
	base := o.Dot(up)
	far := 0.0
	if c < 0 {
		far = s.farthest()
	}
	floor := base + c*far // c >= 0: the plane itself
	x, y, z, bulge := s.x, s.y, s.z, s.bulge
	before := x[0]*up.X + y[0]*up.Y + z[0]*up.Z
	for i := range bulge {
		u := x[i+1]*up.X + y[i+1]*up.Y + z[i+1]*up.Z
		if math.Max(before, u)+bulge[i] >= floor {
			do(i)
		}
		before = u
	}
}

// farthest returns a bound of the range over the window, in m.
func (s *scene) farthest() float64 {
	far := 0.0
	for i := range s.stretches {
		far = math.Max(far, s.nodes[i].radius+s.stretches[i].speed*(s.nodes[i+1].t-s.nodes[i].t))
	}
	return far + s.ground
}

// resolve finds the crossings between two sights.
func (s *scene) resolve(c float64, a, b *sight, st *stretch) {
	h := b.t - a.t
	fa, fb := a.over(c), b.over(c)
	lo, hi := s.bend(c, a, b, st)
	switch {
	case fa >= 0 && fb >= 0:
		if hi <= 0 || math.Min(fa, fb) > hi*h*h/8 {
			return
		}
	case fa < 0 && fb < 0:
		if lo >= 0 || math.Max(fa, fb) < lo*h*h/8 {
			return
		}
		if hi < 0 {
			s.summit(c, *a, *b)
			return
		}
	default:
		if hi < 0 || lo > 0 || monotone(a.rate(c), b.rate(c), math.Max(hi, -lo)*h/2) {
			s.out = append(s.out, s.root(c, *a, *b))
			return
		}
	}
	if h < resolution {
		if (fa < 0) != (fb < 0) {
			s.out = append(s.out, s.root(c, *a, *b))
		}
		return
	}
	n := newNode(a.t+h/2, s.motion.StateAt(a.t+h/2))
	m := s.see(&n)
	s.resolve(c, a, &m, st)
	s.resolve(c, &m, b, st)
}

// bend bounds the second derivative of u - c ρ between two sights:
//
//	u'' = a·up,  ρ'' = (v² - ρ'²)/ρ + a·d/ρ
//
// u” is within jerk h/2 of its value at the nearer end, give or take the forces that
// node.acc leaves out.
func (s *scene) bend(c float64, a, b *sight, st *stretch) (lo, hi float64) {
	h := b.t - a.t
	doubt := st.jerk*h/2 + (excess-1)*st.acc
	lo, hi = math.Min(a.ddu, b.ddu)-doubt, math.Max(a.ddu, b.ddu)+doubt
	most := st.speed*st.speed/s.nearest(a.rho, b.rho, h, st) + st.acc
	if c >= 0 {
		return lo - c*most, hi + c*st.acc
	}
	return lo + c*st.acc, hi - c*most
}

// monotone tells whether a function whose slopes at the ends are given, and change
// by at most swing from the nearer end, rises or falls throughout.
func monotone(a, b, swing float64) bool {
	return a > swing+rateDoubt && b > swing+rateDoubt || a < -swing-rateDoubt && b < -swing-rateDoubt
}

// summit finds the crossings of a concave stretch with both ends below the level:
// two around its summit, or none.
func (s *scene) summit(c float64, a, b sight) {
	left, right := a, b
	for {
		h := b.t - a.t
		ra, rb := a.rate(c), b.rate(c)
		if ra < -rateDoubt || rb > rateDoubt || h < resolution {
			return
		}
		// Under both tangents, and so under the point where they meet.
		at := h / 2
		if ra > rb {
			at = math.Min(math.Max((b.over(c)-a.over(c)-rb*h)/(ra-rb), 0), h)
		}
		doubt := rateDoubt * math.Min(at, h-at)
		if top := math.Min(a.over(c)+ra*at, b.over(c)-rb*(h-at)); top+doubt < 0 {
			return
		}
		next := h * ra / (ra - rb)
		if !(next > 0.02*h && next < 0.98*h) {
			next = h / 2
		}
		m := s.look(a.t + next)
		if m.over(c) >= 0 {
			s.out = append(s.out, s.root(c, left, m), s.root(c, m, right))
			return
		}
		if m.rate(c) > 0 {
			a = m
		} else {
			b = m
		}
	}
}

// root returns the only crossing between two sights on different sides of the level,
// to some microseconds: a start from the cubic through both ends, then Newton's method
// inside the bracket.
func (s *scene) root(c float64, a, b sight) float64 {
	t := a.t + cubicRoot(a.over(c), b.over(c), a.rate(c), b.rate(c), b.t-a.t)
	falling := a.over(c) >= 0
	for range 60 {
		m := s.look(t)
		f := m.over(c)
		if (f >= 0) == falling {
			a = m
		} else {
			b = m
		}
		step := -f / m.rate(c)
		next := t + step
		if !(next >= a.t && next <= b.t) { // no rate, or out of the bracket
			next = (a.t + b.t) / 2
			step = next - t
		}
		t = next
		// Newton's next step would be the square of this one, or a ten-thousandth of it
		// where the velocity is not quite the position's derivative.
		if math.Abs(step) < 2e-5 || b.t-a.t < 1e-6 {
			break
		}
	}
	return t
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
		if math.Abs(next-x) < 1e-4 {
			x = next
			break
		}
		x = next
	}
	return x * h
}
