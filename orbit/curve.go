package orbit

import "sort"

// curve evaluates the interpolation that a segment states. It keeps where it looked
// last, so that rising times are quick; it is not safe for several goroutines.
type curve struct {
	seg    *TrajectorySegment
	times  []float64 // s after the first state
	points int
	here   int
	// Working space of Newton's divided differences.
	z []float64
	f []Vec3
}

func newCurve(s *TrajectorySegment) *curve {
	c := &curve{seg: s, times: make([]float64, len(s.States)), points: s.Interpolation.Points()}
	for i := range s.States {
		c.times[i] = s.States[i].Time.Sub(s.States[0].Time).Seconds()
	}
	n := c.points
	if s.Interpolation.Kind == Hermite {
		n *= 2
	}
	c.z, c.f = make([]float64, n), make([]Vec3, n)
	return c
}

// window returns the index of the first of the states that the polynomial for t takes:
// as many before t as after it, but near the ends.
func (c *curve) window(t float64) int {
	n := len(c.times)
	i := c.here
	if i >= n-1 || t < c.times[i] || t >= c.times[i+1] {
		if i+2 < n && t >= c.times[i+1] && t < c.times[i+2] {
			i++
		} else {
			i = max(0, min(n-2, sort.SearchFloat64s(c.times, t)-1))
			if i+1 < n-1 && c.times[i+1] == t {
				i++
			}
		}
	}
	c.here = i
	return max(0, min(i-(c.points-1)/2, n-c.points))
}

// at returns the state at t seconds after the first state, in the segment's frame.
// Beyond the states it goes on with the polynomial at their end: for knots that no
// answer lies between.
func (c *curve) at(t float64) (position, velocity Vec3) {
	first := c.window(t)
	if c.seg.Interpolation.Kind == Hermite {
		return c.hermite(first, t)
	}
	return c.lagrange(first, t, func(s *TimedState) Vec3 { return s.Position }),
		c.lagrange(first, t, func(s *TimedState) Vec3 { return s.Velocity })
}

// lagrange is the polynomial through the points, by Neville's scheme.
func (c *curve) lagrange(first int, t float64, of func(*TimedState) Vec3) Vec3 {
	n := c.points
	f := c.f[:n]
	for i := range n {
		f[i] = of(&c.seg.States[first+i])
	}
	x := c.times[first : first+n]
	for k := 1; k < n; k++ {
		for i := range n - k {
			u := (t - x[i]) / (x[i+k] - x[i])
			f[i] = f[i].Scale(1 - u).Add(f[i+1].Scale(u))
		}
	}
	return f[0]
}

// hermite is the polynomial through positions and velocities, by Newton's divided
// differences with every node twice, and its derivative.
//
// Source: any text on numerical analysis; CCSDS 502.0-B names the method alone.
func (c *curve) hermite(first int, t float64) (position, velocity Vec3) {
	n := 2 * c.points
	z, f := c.z, c.f
	for i := range c.points {
		s := &c.seg.States[first+i]
		z[2*i], z[2*i+1] = c.times[first+i], c.times[first+i]
		f[2*i], f[2*i+1] = s.Position, s.Position
	}
	for k := 1; k < n; k++ {
		for i := n - 1; i >= k; i-- {
			if k == 1 && i%2 == 1 {
				f[i] = c.seg.States[first+i/2].Velocity
				continue
			}
			f[i] = f[i].Sub(f[i-1]).Scale(1 / (z[i] - z[i-k]))
		}
	}
	p, v := f[n-1], Vec3{}
	for i := n - 2; i >= 0; i-- {
		d := t - z[i]
		v = v.Scale(d).Add(p)
		p = p.Scale(d).Add(f[i])
	}
	return p, v
}
