package pass

// resolution is the time under which the search no longer divides: what happens
// twice within it is not told apart. Half the millisecond that times are given to.
const resolution = 5e-4

// rateDoubt is how far a rate may be from the derivative of what it belongs to by
// rounding, in m/s.
const rateDoubt = 1e-3

// level leaves in s.out the instants at which the elevation crosses the level with
// sine c, rising and falling in turn, and tells whether it stands above at the start
// of the window.
//
// Completeness: every stretch is either passed over because a bound says that the
// function u - c ρ keeps its sign there, or has been shown to be concave, convex or
// monotone, which leaves at most two crossings, or was divided; down to resolution.
func (s *scene) level(c float64) (above bool) {
	first := s.see(&s.nodes[0])
	at, last := 0, first
	s.candidates(c, func(i int) {
		if at != i {
			last = s.see(&s.nodes[i])
		}
		next := s.see(&s.nodes[i+1])
		n, m := &s.nodes[i], &s.nodes[i+1]
		s.resolve(c, &last, &next, n.acc.Dot(s.frame.Up), m.acc.Dot(s.frame.Up), &s.stretches[i])
		at, last = i+1, next
	})
	return first.over(c) >= 0
}

// candidates calls do, by rising i, for the stretches that may hold a point above the
// level: the others stay below the horizontal plane (or, for a level below that,
// under it by enough), since u is within bulge of its chord.
func (s *scene) candidates(c float64, do func(i int)) {
	up := s.frame.Up
	floor := s.frame.Origin.Dot(up)
	if c < 0 {
		floor += c * s.farthest()
	}
	bulge := s.bulge
	x, y, z := s.x[:len(bulge)+1], s.y[:len(bulge)+1], s.z[:len(bulge)+1]
	before := x[0]*up.X + y[0]*up.Y + z[0]*up.Z - floor
	for i, b := range bulge {
		u := x[i+1]*up.X + y[i+1]*up.Y + z[i+1]*up.Z - floor
		if before+b >= 0 || u+b >= 0 {
			do(i)
		}
		before = u
	}
}

// farthest returns a bound of the range over the window, in m.
func (s *scene) farthest() float64 {
	far := 0.0
	for i := range s.stretches {
		far = max(far, s.nodes[i].radius+s.stretches[i].speed*(s.nodes[i+1].t-s.nodes[i].t))
	}
	return far + s.ground
}

// resolve finds the crossings between two sights, where u has the second derivatives
// ddua and ddub.
func (s *scene) resolve(c float64, a, b *sight, ddua, ddub float64, st *stretch) {
	h := b.t - a.t
	fa, fb := a.over(c), b.over(c)
	lo, hi := s.bend(c, a, b, ddua, ddub, st)
	switch {
	case fa >= 0 && fb >= 0:
		if hi <= 0 || min(fa, fb) > hi*h*h/8 {
			return
		}
	case fa < 0 && fb < 0:
		if lo >= 0 || max(fa, fb) < lo*h*h/8 {
			return
		}
		if hi < 0 {
			s.summit(c, *a, *b)
			return
		}
	default:
		if hi < 0 || lo > 0 || monotone(a.rate(c), b.rate(c), max(hi, -lo)*h/2) || h < resolution {
			s.root(c, a, b)
			return
		}
	}
	if h < resolution {
		return
	}
	var n node
	n.t = a.t + h/2
	n.pos, n.vel = s.motion.TrackAt(n.t)
	n.derive()
	m := s.see(&n)
	ddum := n.acc.Dot(s.frame.Up)
	s.resolve(c, a, &m, ddua, ddum, st)
	s.resolve(c, &m, b, ddum, ddub, st)
}

// bend bounds the second derivative of u - c ρ between two sights:
//
//	u'' = a·up,  ρ'' = (v² - ρ'²)/ρ + a·d/ρ
//
// u” is within jerk h/2 of its value at the nearer end, give or take the forces that
// node.acc leaves out.
func (s *scene) bend(c float64, a, b *sight, ddua, ddub float64, st *stretch) (lo, hi float64) {
	h := b.t - a.t
	doubt := st.jerk*h/2 + (excess-1)*st.acc
	lo, hi = min(ddua, ddub)-doubt, max(ddua, ddub)+doubt
	if c == 0 {
		return lo, hi
	}
	most := st.speed*st.speed/s.nearest(a.rho, b.rho, h, st) + st.acc
	if c > 0 {
		return lo - c*most, hi + c*st.acc
	}
	return lo + c*st.acc, hi - c*most
}

// monotone tells whether a function whose slopes at the ends are given, and change
// by at most swing from the nearer end, rises or falls throughout.
func monotone(a, b, swing float64) bool {
	swing += rateDoubt
	return a > swing && b > swing || a < -swing && b < -swing
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
			at = min(max((b.over(c)-a.over(c)-rb*h)/(ra-rb), 0), h)
		}
		doubt := rateDoubt * min(at, h-at)
		if top := min(a.over(c)+ra*at, b.over(c)-rb*(h-at)); top+doubt < 0 {
			return
		}
		next := h * ra / (ra - rb)
		if !(next > 0.02*h && next < 0.98*h) {
			next = h / 2
		}
		m := s.look(a.t + next)
		if m.over(c) >= 0 {
			s.root(c, &left, &m)
			s.root(c, &m, &right)
			return
		}
		if m.rate(c) > 0 {
			a = m
		} else {
			b = m
		}
	}
}
