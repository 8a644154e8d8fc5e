package mount

import (
	"errors"
	"sort"

	"slantwise/orbit"
	"slantwise/station"
)

// SampledCourse returns the course through directions at rising instants, in seconds from
// 0 on; at least two. Between them a cubic of the unit vector is taken, which is smooth through
// the zenith, too: with samples a second apart on a low orbit it is within 1e-4 deg
// (TestSampledCourse).
func SampledCourse(seconds []float64, directions []station.Direction) (*Course, error) {
	n := len(seconds)
	if n < 2 || len(directions) != n || seconds[0] != 0 {
		return nil, errors.New("course: it takes two samples and more, the first at 0 s, and a direction for each")
	}
	at := make([]orbit.Vec3, n)
	for i := range at {
		if i > 0 && !(seconds[i] > seconds[i-1]) {
			return nil, errors.New("course: the instants do not rise")
		}
		at[i] = vector(directions[i])
	}
	rate := make([]orbit.Vec3, n)
	for i := range rate {
		rate[i] = slopeAt(seconds, at, i)
	}
	return &Course{length: seconds[n-1], at: func(s float64) (orbit.Vec3, orbit.Vec3) {
		i := min(max(1, sort.SearchFloat64s(seconds, s)), n-1)
		return hermite(seconds[i-1], seconds[i], at[i-1], at[i], rate[i-1], rate[i], s)
	}}, nil
}

// slopeAt is the slope of the parabola through a sample and its neighbours; at the ends of
// that through the last three.
func slopeAt(t []float64, v []orbit.Vec3, i int) orbit.Vec3 {
	n := len(t)
	if n == 2 {
		return v[1].Sub(v[0]).Scale(1 / (t[1] - t[0]))
	}
	m := min(max(1, i), n-2)
	a, b := t[m]-t[m-1], t[m+1]-t[m]
	before, after := v[m].Sub(v[m-1]).Scale(1/a), v[m+1].Sub(v[m]).Scale(1/b)
	curve := after.Sub(before).Scale(1 / (a + b)) // half the second derivative
	return before.Add(curve.Scale(a)).Add(curve.Scale(2 * (t[i] - t[m])))
}

// hermite is the cubic with given ends and slopes, brought onto the unit sphere, and its
// rate there.
func hermite(from, to float64, a, b, ra, rb orbit.Vec3, s float64) (at, rate orbit.Vec3) {
	h := to - from
	x := (s - from) / h
	p := a.Scale(1 + x*x*(2*x-3)).Add(b.Scale(x * x * (3 - 2*x))).Add(ra.Scale(h * x * (1 - x) * (1 - x))).Add(rb.Scale(h * x * x * (x - 1)))
	v := b.Sub(a).Scale(6 * x * (1 - x) / h).Add(ra.Scale((1 - x) * (1 - 3*x))).Add(rb.Scale(x * (3*x - 2)))
	long := p.Norm()
	at, v = p.Scale(1/long), v.Scale(1/long)
	return at, v.Sub(at.Scale(at.Dot(v)))
}
