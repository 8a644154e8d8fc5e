package fit

import (
	"flag"
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// The random tests draw the same cases in every run; -rapid.seed=0 draws new ones.
func init() { _ = flag.Set("rapid.seed", "20260310") }

func TestParametersAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		angle := rapid.Float64Range(0, 2*math.Pi)
		el := orbit.Elements{MeanMotion: rapid.Float64Range(0.1, 17).Draw(t, "n"), Eccentricity: rapid.Float64Range(0, 0.99).Draw(t, "e"),
			Inclination: unit.Angle(rapid.Float64Range(0, math.Pi).Draw(t, "i")), RAAN: unit.Angle(angle.Draw(t, "node")),
			ArgPerigee: unit.Angle(angle.Draw(t, "perigee")), MeanAnomaly: unit.Angle(angle.Draw(t, "anomaly")), BStar: 1e-4}
		p, back := fromElements(&el), orbit.Elements{}
		p.into(&back)
		if again := fromElements(&back); again.retrograde == p.retrograde {
			for j, d := range again.minus(&p) {
				if math.Abs(d) > 1e-12*math.Max(1, math.Abs(p.v[j])) {
					t.Fatalf("%s: off by %g", Parameters[j], d)
				}
			}
		}
		if math.Abs(float64(back.Inclination-el.Inclination)) > 1e-9 || math.Abs(back.Eccentricity-el.Eccentricity) > 1e-12 {
			t.Fatalf("came back as %+v", back)
		}
	})
}

// Two positions on a two-body orbit, from Kepler's equation, give its velocity.
func TestBetweenPositions(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		axis := rapid.Float64Range(6.7e6, 4.2e7).Draw(t, "a")
		e := rapid.Float64Range(0, 0.8).Draw(t, "e")
		first := rapid.Float64Range(0, 2*math.Pi).Draw(t, "E")
		apart := rapid.Float64Range(0.05, 2).Draw(t, "dE")
		state := func(E float64) (r, v orbit.Vec3) { // perifocal
			n, beta := math.Sqrt(mu/(axis*axis*axis)), math.Sqrt(1-e*e)
			sin, cos := math.Sincos(E)
			rate := n / (1 - e*cos)
			return orbit.Vec3{X: axis * (cos - e), Y: axis * beta * sin}, orbit.Vec3{X: -axis * sin * rate, Y: axis * beta * cos * rate}
		}
		a, va := state(first)
		b, vb := state(first + apart)
		if angleBetween(a, b) > 3 || a.Cross(b).Z < 0 {
			t.Skip("more than half a revolution")
		}
		seconds := (apart - e*(math.Sin(first+apart)-math.Sin(first))) / math.Sqrt(mu/(axis*axis*axis))
		got, ok := between(a, b, seconds)
		if !ok || got.Sub(va).Norm() > 1e-6*va.Norm() {
			t.Fatalf("got %v %v, want %v", got, ok, va)
		}
		back, ok := between(b, a, seconds)
		if !ok || back.Add(vb).Norm() > 1e-6*vb.Norm() {
			t.Fatalf("backwards: got %v %v, want %v", back, ok, vb)
		}
	})
	if _, ok := between(orbit.Vec3{X: 7e6}, orbit.Vec3{X: -7e6}, 3000); ok {
		t.Error("opposite positions do not tell the plane")
	}
}

// The least squares of a line through (0,1), (1,3), (2,5), (3,7.4): slope 2.12, intercept
// 0.92, inverse normal matrix by hand: 1/20 (14 -6; -6 4).
func TestReduction(t *testing.T) {
	r := newReduction(2)
	for x, y := range []float64{1, 3, 5, 7.4} {
		r.add([]float64{1, float64(x), y})
	}
	l := r.solve()
	d, _ := l.step(0)
	if math.Abs(d[0]-0.92) > 1e-12 || math.Abs(d[1]-2.12) > 1e-12 {
		t.Errorf("intercept and slope %v", d)
	}
	want := [2][2]float64{{0.7, -0.3}, {-0.3, 0.2}}
	for i, row := range l.cofactors() {
		for j, c := range row {
			if math.Abs(c-want[i][j]) > 1e-12 {
				t.Errorf("cofactor %d %d: %g, want %g", i, j, c, want[i][j])
			}
		}
	}
	long := newReduction(2) // the same over many chunks
	for range 1000 {
		for x, y := range []float64{1, 3, 5, 7.4} {
			long.add([]float64{1, float64(x), y})
		}
	}
	if d, _ := long.solve().step(0); math.Abs(d[0]-0.92) > 1e-10 || math.Abs(d[1]-2.12) > 1e-10 {
		t.Errorf("over many chunks %v", d)
	}
}
