package pass

import (
	"math"

	"slantwise/orbit"
)

// aim is where a spacecraft stands in a site's sky at one instant, with its rates.
type aim struct {
	t        float64 // s
	el, az   float64 // rad, az in [0, 2π)
	del, daz float64 // rad/s
	rho      float64 // m
	above    float64 // el - skyline, rad
}

// aim returns the aim at an instant. In the zenith itself the azimuth is north, with
// no rate; nothing is concluded from them there.
func (s *scene) aim(k *skyline, t float64) aim {
	pos, vel := s.motion.TrackAt(t)
	l := s.frame.Look(orbit.State{Position: pos, Velocity: vel})
	p := aim{
		t: t, el: l.Elevation.Radians(), az: l.Azimuth.Radians(),
		del: float64(l.ElevationRate), daz: float64(l.AzimuthRate), rho: l.Range.Metres(),
	}
	p.above = p.el - k.at(p.az)
	return p
}

// cutBySkyline takes from the arcs over the lowest part of the skyline what lies
// under its higher parts. Over its highest part nothing needs to be looked at.
func (f *finder) cutBySkyline(k *skyline, start, end *sight) {
	s := &f.scene
	s.out = s.out[:0]
	above := s.level(math.Sin(k.high))
	f.clear = pair(f.clear[:0], above, s.out, start, end)
	f.whole, f.arcs = f.arcs, f.whole[:0]
	clear := f.clear
	for n := range f.whole {
		whole := &f.whole[n]
		s.out = s.out[:0]
		a := s.aim(k, whole.from.t)
		above := a.above >= 0
		for ; len(clear) > 0 && clear[0].from.t < whole.to.t; clear = clear[1:] {
			// The skyline is at most as high as the level that is crossed here.
			above = above || clear[0].from.t == whole.from.t
			b := s.aim(k, clear[0].from.t)
			b.above = max(b.above, 0)
			s.unveilAll(k, a, b)
			a = s.aim(k, clear[0].to.t)
			a.above = max(a.above, 0)
		}
		s.unveilAll(k, a, s.aim(k, whole.to.t))
		f.arcs = pair(f.arcs, above, s.out, &whole.from, &whole.to)
	}
}

// unveilAll appends the crossings of the skyline between two aims that may be many
// stretches apart.
func (s *scene) unveilAll(k *skyline, a, b aim) {
	for i := s.stretchAt(a.t); a.t < b.t; i++ {
		if s.nodes[i+1].t >= b.t {
			s.unveil(k, &a, &b, &s.stretches[i])
			return
		}
		m := s.aim(k, s.nodes[i+1].t)
		s.unveil(k, &a, &m, &s.stretches[i])
		a = m
	}
}

// sweep bounds what happens in the sky between two aims.
type sweep struct {
	elLow, elHigh   float64 // rad
	delLow, delHigh float64 // rad/s
	dazLow, dazHigh float64 // rad/s
	az, width       float64 // azimuths from az clockwise by width, rad
	doubt           float64 // how far the rates may be off, rad/s (rateDoubt)
}

// sweep derives the bounds from the ends. By the second derivative of ρ times the unit
// vector to the spacecraft, with a its acceleration along elevation E or azimuth A,
//
//	E'' = (a - 2 ρ' E')/ρ - A'² sin E cos E
//	A'' = ((a - 2 ρ' A' cos E)/ρ + 2 A' E' sin E) / cos E
//
// and |E'|, |A' cos E| <= ω = v/ρ. A second round uses the bounds of the rates that
// the first one gives.
func (s *scene) sweep(a, b *aim, st *stretch) (r sweep) {
	h := b.t - a.t
	near := s.nearest(a.rho, b.rho, h, st)
	w := st.speed / near
	r.elLow, r.elHigh = min(a.el, b.el)-w*h/2, max(a.el, b.el)+w*h/2
	steepest := max(-r.elLow, r.elHigh)
	if steepest > 89.5*math.Pi/180 { // about the zenith nothing is said of azimuth
		r.delLow, r.delHigh = -w, w
		r.dazLow, r.dazHigh = math.Inf(-1), math.Inf(1)
		r.width = math.Inf(1)
		return r
	}
	sin, cos := math.Sincos(steepest)
	r.doubt = rateDoubt / near / cos
	del, daz := w, w/cos
	var ddel, ddaz float64
	for range 2 {
		ddel = (st.acc+2*st.speed*del)/near + daz*daz*min(sin, 0.5)
		ddaz = ((st.acc+2*st.speed*min(w, daz))/near + 2*daz*del*sin) / cos
		del = min(del, max(math.Abs(a.del), math.Abs(b.del))+ddel*h/2)
		daz = min(daz, max(math.Abs(a.daz), math.Abs(b.daz))+ddaz*h/2)
	}
	r.delLow, r.delHigh = around(a.del, b.del, ddel*h/2, del)
	r.dazLow, r.dazHigh = around(a.daz, b.daz, ddaz*h/2, daz)
	r.elLow = max(r.elLow, min(a.el, b.el)-ddel*h*h/8)
	r.elHigh = min(r.elHigh, max(a.el, b.el)+ddel*h*h/8)
	if daz*h >= math.Pi {
		r.width = math.Inf(1)
		return r
	}
	// From a to b by the short way, and as far beyond both as the bow allows.
	way := math.Remainder(b.az-a.az, 2*math.Pi)
	bow := ddaz * h * h / 8
	r.az, r.width = a.az+min(way, 0)-bow, math.Abs(way)+2*bow
	return r
}

// around bounds a rate between its values at the ends of a stretch: it departs from
// the nearer one by at most swing, and never exceeds most.
func around(a, b, swing, most float64) (low, high float64) {
	return max(-most, min(a, b)-swing), min(most, max(a, b)+swing)
}

// unveil appends the crossings of the skyline between two aims to s.out: each piece
// is shown to lie wholly over or under the skyline, or to cross it in one direction
// alone, or is divided, down to resolution.
func (s *scene) unveil(k *skyline, a, b *aim, st *stretch) {
	h := b.t - a.t
	same := (a.above >= 0) == (b.above >= 0)
	w := s.sweep(a, b, st)
	line := k.over(w.az, w.width)
	if w.elLow > line.high || w.elHigh < line.low {
		return
	}
	if h < resolution || oneWay(&w, line) {
		if !same {
			s.out = append(s.out, s.look(s.edge(k, a, b)))
		}
		return
	}
	m := s.aim(k, a.t+h/2)
	s.unveil(k, a, &m, st)
	s.unveil(k, &m, b, st)
}

// oneWay tells whether el - skyline rises or falls throughout: its rate is
// E' - slope A' with both factors in their bounds.
func oneWay(w *sweep, line span) bool {
	p, q := line.slopeLow*w.dazLow, line.slopeLow*w.dazHigh
	r, t := line.slopeHigh*w.dazLow, line.slopeHigh*w.dazHigh
	low, high := min(min(p, q), min(r, t)), max(max(p, q), max(r, t))
	doubt := w.doubt * (1 + max(math.Abs(line.slopeLow), math.Abs(line.slopeHigh)))
	// Where a bound is infinite these are no numbers, and both comparisons are false.
	return w.delLow-high > doubt || w.delHigh-low < -doubt
}

// edge returns the only crossing between two aims on different sides of the skyline.
// It uses no slopes, since the skyline has corners.
func (s *scene) edge(k *skyline, a, b *aim) float64 {
	z := bracket{a: a.t, fa: a.above, b: b.t, fb: b.above}
	for range 100 {
		if z.b-z.a < 1e-6 {
			break
		}
		t := z.guess()
		m := s.aim(k, t)
		if math.Abs(m.above) < 1e-12 {
			return t
		}
		z.put(t, m.above)
	}
	return (z.a + z.b) / 2
}
