package downlink

import (
	"math"
	"testing"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// An antenna of power cos θ, β off the spin axis, seen from α off it: cos θ = cos α cos β
// + sin α sin β cos φ over the phase φ. Its mean, its least and its quantile follow by
// hand while the antenna never shows its back.
func TestSpinOfACosine(t *testing.T) {
	const alpha, beta, q = 35.0, 25.0, 0.9
	a, b := alpha*math.Pi/180, beta*math.Pi/180
	cos := func(phase float64) float64 { return math.Cos(a)*math.Cos(b) + math.Sin(a)*math.Sin(b)*math.Cos(phase) }
	p := Pattern{Kind: CosinePower, PeakGain: 3, Exponent: 1}
	for _, c := range []struct {
		what SpinGain
		want float64
		tol  float64 // a phase in steps of a degree
	}{
		{SpinMean, 3 + 10*math.Log10(math.Cos(a)*math.Cos(b)), 1e-9},
		{SpinWorst, 3 + 10*math.Log10(math.Cos(a+b)), 1e-4},
		{SpinExceeded, 3 + 10*math.Log10(cos(q*math.Pi)), 0.01},
	} {
		body := Body{Boresight: BodyDirection{OffZ: deg(beta), AroundZ: deg(70)}, SpinGain: c.what}
		got, ok := newSpinCurve(&p, &body, q).at(a)
		if !ok || math.Abs(float64(got)-c.want) > c.tol {
			t.Errorf("%s: got %.6f dBi (%v), want %.6f within %g", c.what, float64(got), ok, c.want, c.tol)
		}
	}
}

// A boresight on the axis does not move: a spin is the pattern itself, whatever it
// counts as. Between nodes the curve is linear in dB, half a degree apart.
func TestSpinOnTheAxis(t *testing.T) {
	p := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-15)}
	for _, what := range []SpinGain{SpinExceeded, SpinMean, SpinWorst} {
		c := newSpinCurve(&p, &Body{SpinGain: what}, 0.9)
		for off := 0.0; off < 80; off += 0.37 {
			want, _ := p.gain(deg(off).Radians())
			if got, ok := c.at(deg(off).Radians()); !ok || math.Abs(float64(got-want)) > 0.05 {
				t.Errorf("%s at %g deg: %v, want %v", what, off, got, want)
			}
		}
	}
}

// A quantile is the gain of the least share q of a turn, the worst is no greater and
// the mean lies between the least and the greatest.
func TestSpinGainsAreOrdered(t *testing.T) {
	grid := Pattern{Kind: GainGrid, Grid: bowl(t)}
	body := Body{Boresight: BodyDirection{OffZ: deg(50), AroundZ: deg(10)}, Turn: deg(33)}
	curve := func(what SpinGain, q float64) *spinCurve {
		b := body
		b.SpinGain = what
		return newSpinCurve(&grid, &b, q)
	}
	worst, half, mean, ninety := curve(SpinWorst, 0), curve(SpinExceeded, 0.5), curve(SpinMean, 0), curve(SpinExceeded, 0.9)
	for i := range spinNodes {
		w, h, m, n := worst.gain[i], half.gain[i], mean.gain[i], ninety.gain[i]
		if !(w <= n && n <= h && m >= w) {
			t.Errorf("%g deg off the axis: worst %g, 90 %% %g, half %g, mean %g dBi", float64(i)/2, w, n, h, m)
		}
	}
}

// Where the antenna turns to a side without gain the worst has none, the mean counts
// nothing there, and the budget says why it fails.
func TestSpinToABareSide(t *testing.T) {
	p := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 1}
	body := Body{SpinAxis: orbit.Vec3{Z: 1}, Boresight: BodyDirection{OffZ: deg(90)}, SpinGain: SpinWorst}
	if g, ok := newSpinCurve(&p, &body, 0).at(math.Pi / 2); ok {
		t.Errorf("the worst of a turn with a bare side is %v dBi", g)
	}
	l := mustLink(t, bodySpec(t, AttitudeSpin, body, p))
	g, err := l.StatedGeometry(1e6, deg(40), nil, degp(90))
	if err != nil {
		t.Fatal(err)
	}
	if b, err := l.At(g); err == nil {
		t.Errorf("a budget of %g dBm", b.ReceivedPowerDBm)
	}
	// Square to the axis: half a turn of cos θ, whose mean over the turn is 1/π.
	body.SpinGain = SpinMean
	got, ok := newSpinCurve(&p, &body, 0).at(math.Pi / 2)
	if want := 6 - 10*math.Log10(math.Pi); !ok || math.Abs(float64(got)-want) > 1e-3 {
		t.Errorf("mean %v dBi, want %.4f", got, want)
	}
	// Of a table that ends nothing is known beyond its end: no mean either.
	short := table(0, 6, 60, 0)
	if g, ok := newSpinCurve(&short, &body, 0).at(math.Pi / 2); ok {
		t.Errorf("the mean of a table that ends at 60 deg is %v dBi", g)
	}
}

// The turning antenna stands in the budget with what its spin counts as.
func TestSpinInTheBudget(t *testing.T) {
	p := Pattern{Kind: CosinePower, PeakGain: 3, Exponent: 1}
	body := Body{SpinAxis: orbit.Vec3{Z: 1}, Boresight: BodyDirection{OffZ: deg(25)}, SpinGain: SpinMean}
	l := mustLink(t, bodySpec(t, AttitudeSpin, body, p))
	g, err := l.StatedGeometry(1e6, deg(40), nil, degp(35))
	if err != nil {
		t.Fatal(err)
	}
	b := mustAt(t, l, g)
	near(t, "gain", b.term("transmit antenna gain"), 3+10*math.Log10(math.Cos(deg(35).Radians())*math.Cos(deg(25).Radians())), 1e-9)
	if !math.IsNaN(float64(b.OffBoresight)) || b.BodyOffZ != unit.Angle(deg(35)) {
		t.Errorf("off boresight %v, off the axis %v", b.OffBoresight.Degrees(), b.BodyOffZ.Degrees())
	}
}
