package station

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func TestMismatch(t *testing.T) {
	right, left := Polarization{Kind: RightHandCircular}, Polarization{Kind: LeftHandCircular}
	tilted := func(deg float64) Polarization { return Polarization{Kind: Linear, Tilt: angle(deg)} }
	unknown := Polarization{Kind: Linear}
	for _, c := range []struct {
		name       string
		a, b       Polarization
		loss, best float64
		tol        float64
	}{
		{"75 deg between linear: Maini & Agrawal, Satellite Communication, example 7.3, printed 11.74", tilted(75), tilted(0), 11.74, 11.74, 0.005},
		{"3 deg between linear: the same, printed 0.012", tilted(48), tilted(45), 0.012, 0.012, 0.0005},
		{"same circle: definition", right, right, 0, 0, 0},
		{"circle to line: textbooks, half of the power", right, tilted(30), 10 * math.Log10(2), 10 * math.Log10(2), 1e-12},
		{"circle to line without tilt", unknown, left, 10 * math.Log10(2), 10 * math.Log10(2), 1e-12},
		{"opposite circles: never infinite, the cap", right, left, 30, 30, 0},
		{"crossed lines: never infinite, the cap", tilted(0), tilted(90), 30, 30, 0},
		{"lines without tilt: mean of cos² is one half", unknown, tilted(10), 10 * math.Log10(2), 0, 1e-12},
	} {
		m := c.a.Mismatch(c.b)
		if math.Abs(float64(m.Loss)-c.loss) > c.tol || math.Abs(float64(m.Best)-c.best) > c.tol {
			t.Errorf("%s: got %.5f dB (best %.5f), want %.5f (best %.5f), tolerance %g", c.name, float64(m.Loss), float64(m.Best), c.loss, c.best, c.tol)
		}
		if m.Capped != (c.loss == 30) {
			t.Errorf("%s: capped %v", c.name, m.Capped)
		}
	}
}

// Two lines at an unknown angle: nine angles in ten lie within 81 deg, where the loss
// is -20 log10 cos 81 deg (derived).
func TestMismatchNinetyPercent(t *testing.T) {
	m := Polarization{Kind: Linear}.Mismatch(Polarization{Kind: Linear})
	want := -20 * math.Log10(math.Cos(81*math.Pi/180))
	if math.Abs(float64(m.NinetyPercent)-want) > 1e-9 {
		t.Errorf("got %.4f dB, want %.4f", float64(m.NinetyPercent), want)
	}
}

// The same in Jones vectors: each ellipse is a complex vector, the efficiency the
// squared magnitude of their product, searched over the angle between the axes.
func TestMismatchAgainstJonesVectors(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ar1 := rapid.Float64Range(0, 12).Draw(t, "first axial ratio, dB")
		ar2 := rapid.Float64Range(0, 12).Draw(t, "second axial ratio, dB")
		a := Polarization{Kind: RightHandCircular, AxialRatio: db(ar1)}
		b := Polarization{Kind: PolarizationKind(rapid.IntRange(0, 1).Draw(t, "hand")), AxialRatio: db(ar2)}
		hand := 1.0
		if b.Kind == LeftHandCircular {
			hand = -1
		}
		worst, best := 0.0, math.Inf(1)
		for i := 0; i <= 180; i++ {
			loss := -10 * math.Log10(jones(ar1, ar2, hand, float64(i)*math.Pi/180))
			worst, best = max(worst, loss), min(best, loss)
		}
		m := a.Mismatch(b)
		worst, best = min(worst, float64(LargestMismatch)), min(best, float64(LargestMismatch))
		if math.Abs(float64(m.Loss)-worst) > 1e-6 || math.Abs(float64(m.Best)-best) > 1e-6 {
			t.Fatalf("got %.8f (best %.8f), want %.8f (best %.8f)", float64(m.Loss), float64(m.Best), worst, best)
		}
	})
}

func jones(ar1, ar2, hand, d float64) float64 {
	q1, q2 := math.Pow(10, -ar1/20), hand*math.Pow(10, -ar2/20)
	x1, y1 := complex(1, 0), complex(0, q1)
	sin, cos := math.Sincos(d)
	x2 := complex(cos, -q2*sin)
	y2 := complex(sin, q2*cos)
	p := x1*complex(real(x2), -imag(x2)) + y1*complex(real(y2), -imag(y2))
	return (real(p)*real(p) + imag(p)*imag(p)) / ((1 + q1*q1) * (1 + q2*q2))
}

func TestMismatchIsSymmetricAndBounded(t *testing.T) {
	draw := rapid.Custom(func(t *rapid.T) Polarization {
		p := Polarization{Kind: PolarizationKind(rapid.IntRange(0, 2).Draw(t, "kind"))}
		if rapid.Bool().Draw(t, "with axial ratio") {
			p.AxialRatio = db(rapid.Float64Range(0, 60).Draw(t, "axial ratio"))
		}
		if rapid.Bool().Draw(t, "with tilt") {
			p.Tilt = angle(rapid.Float64Range(-180, 180).Draw(t, "tilt"))
		}
		return p
	})
	rapid.Check(t, func(t *rapid.T) {
		a, b := draw.Draw(t, "a"), draw.Draw(t, "b")
		m, n := a.Mismatch(b), b.Mismatch(a)
		if math.Abs(float64(m.Loss-n.Loss)) > 1e-9 {
			t.Fatalf("%v one way, %v the other", m.Loss, n.Loss)
		}
		if !(m.Best >= 0 && m.Best <= m.Loss+1e-9 && m.Loss <= LargestMismatch) {
			t.Fatalf("best %v, loss %v", m.Best, m.Loss)
		}
	})
}
