package orbit

// TrackAt returns the Earth-fixed position in m at s in [0, Span()] and the exact
// derivative of the interpolated positions in m/s: what a search for the instants of
// events needs. It is cheaper than StateAt, whose velocity is SGP4's own: that is not
// the derivative of SGP4's positions, but millimetres per second off on low orbits and
// up to metres per second at the perigees of deep-space ones. s outside is a
// programming error and panics.
func (e *Ephemeris) TrackAt(s float64) (position, derivative Vec3) {
	i, u := e.locate(s)
	a, b := &e.knots[i], &e.knots[i+1]
	return between(a, b, u), slopeBetween(a, b, u).Scale(e.rate)
}

// slopeBetween returns the derivative of between by u.
func slopeBetween(a, b *knot, u float64) Vec3 {
	w := 1 - u
	u2, w2 := u*u, w*w
	u3, w3 := u2*u, w2*w
	b0 := 140 * u3 * w3
	a1, b1 := w3*(1+u*(3+u*(6-70*u))), u3*(1+w*(3+w*(6-70*w)))
	a2, b2 := w3*u*(2+u*(6-28*u)), -u3*w*(2+w*(6-28*w))
	a3, b3 := w3*u2*(3-7*u), u3*w2*(3-7*w)
	return Vec3{
		b0*(b.p.X-a.p.X) + a1*a.c1.X + a2*a.c2.X + a3*a.c3.X + b1*b.c1.X + b2*b.c2.X + b3*b.c3.X,
		b0*(b.p.Y-a.p.Y) + a1*a.c1.Y + a2*a.c2.Y + a3*a.c3.Y + b1*b.c1.Y + b2*b.c2.Y + b3*b.c3.Y,
		b0*(b.p.Z-a.p.Z) + a1*a.c1.Z + a2*a.c2.Z + a3*a.c3.Z + b1*b.c1.Z + b2*b.c2.Z + b3*b.c3.Z,
	}
}
