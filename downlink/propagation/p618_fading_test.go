package propagation

import (
	"errors"
	"math"
	"testing"

	"slantwise/orbit/unit"
)

// Equation (54) of P.618-14 worked by hand at latitude 45°, where cos(2 psi) is 0:
// 10 log Kw = 15 + 76 = 91 with pL = 10 %, v = -1.8 - 5.6 log 1.1 = -2.0318,
// 9 log 20 = 11.7093, 59.5 log 21 = 78.6721, -10 log 0.1 = 10: 36.0690 dB; the worst
// month, equation (56): 91 + 11.7093 - 55 log 21 + 10 = 39.9872 dB.
func TestDeepFadingByHand(t *testing.T) {
	for _, c := range []struct {
		worst bool
		want  float64
	}{{false, 36.0690}, {true, 39.9872}} {
		var n notes
		l, err := newLowAngle(scintillation{20, 1.2, 0.5, 60}, 45, 0.1, 0.1, LowPath{GradientExceeded: 10 * Percent, WorstMonth: c.worst}, &n)
		if err != nil {
			t.Fatal(err)
		}
		if got := l.deep(20); math.Abs(got-c.want) > 1e-4 {
			t.Errorf("worst month %v: %.5f dB at 20 mrad, want %.4f dB", c.worst, got, c.want)
		}
	}
}

// P.618-14 §2.4 says that the transition is tangent to the deep part at 25 dB and to
// the scintillation of §2.4.1 at 5°. The latter's slope is taken against the geometric
// elevation, equation (60), of which the apparent one is here told apart.
func TestLowAngleTransitionIsTangent(t *testing.T) {
	var n notes
	s := scintillation{20, 2.4, 0.6, 60}
	l, err := newLowAngle(s, 52, 0.1, 0.3, LowPath{GradientExceeded: 5 * Percent}, &n)
	if err != nil {
		t.Fatal(err)
	}
	if got, want := l.fade(5), math.Sqrt(s.fadeSquared(5, 0.3)); math.Abs(got/want-1) > 1e-9 {
		t.Errorf("at 5 deg %g dB, §2.4.1 has %g dB", got, want)
	}
	at25 := l.transitionDeg()
	if got := l.fade(at25); math.Abs(got-25) > 1e-6 {
		t.Errorf("at the deep part's end %g dB, want 25 dB", got)
	}
	slope := func(f func(mrad float64) float64, mrad float64) float64 { return (f(mrad+1e-4) - f(mrad-1e-4)) / 2e-4 }
	cubic := func(mrad float64) float64 {
		u, v := mrad-l.theta1, mrad-l.theta2
		return deepDB * math.Exp(u*(l.alpha+u*(l.beta+l.gammaCube*v)))
	}
	if got, want := slope(cubic, l.theta1), slope(l.deep, l.theta1); math.Abs(got/want-1) > 1e-5 {
		t.Errorf("slope at 25 dB: %g dB/mrad, the deep part has %g", got, want)
	}
	shallow := func(mrad float64) float64 { return math.Sqrt(s.fadeSquared(mrad/mradPerDegree, 0.3)) }
	if got, want := slope(cubic, l.theta2), slope(shallow, 5*mradPerDegree); math.Abs(got/want-1) > 1e-5 {
		t.Errorf("slope at 5 deg: %g dB/mrad, §2.4.1 has %g", got, want)
	}
}

// The slope of equation (45) against the closed form that equation (61) prints.
func TestAveragingSlopeIsEquation61(t *testing.T) {
	s := scintillation{20, 2.4, 0.6, 60}
	sinEl, cosEl := math.Sincos(radians(5))
	x := s.averagingArgument(sinEl)
	zeta := 11.0 / 6 * math.Atan(1/x)
	q := x*x + 1
	printed := (1770*q + 2123*math.Pow(x, 1.0/6)*math.Pow(q, 11.0/12)*(math.Cos(zeta)-x*math.Sin(zeta))) /
		(12 * math.Pow(x, 1.0/6) * q * (354*math.Pow(x, 5.0/6) - 193*math.Pow(q, 11.0/12)*math.Sin(zeta)))
	dx := 1.22 * s.efficiency * s.diameterM * s.diameterM * s.fGHz / 2000 * (sinEl/math.Sqrt(sinEl*sinEl+2.35e-4) + 1) * cosEl
	if got, want := s.averagingSlope(), printed*dx; math.Abs(got/want-1) > 1e-3 { // (61) prints its coefficients to 3 or 4 digits
		t.Errorf("got %g per rad, the printed form gives %g", got, want)
	}
}

// At rare percentages the deep part has more than 25 dB still at 5°, and stands alone:
// by hand at latitude 45°, 40 GHz, pL = 50 %, p = 0.001 %, 5.17° apparent (90.2 mrad):
// 101.48 + 2.03 + 14.42 - 116.60 + 30 = 31.3 dB.
func TestDeepFadingReachesOver5Degrees(t *testing.T) {
	var n notes
	l, err := newLowAngle(scintillation{40, 1, 0.6, 60}, 45, 0, 0.001, LowPath{GradientExceeded: 50 * Percent}, &n)
	if err != nil {
		t.Fatal(err)
	}
	if got := l.fade(5); math.Abs(got-31.3) > 0.1 {
		t.Errorf("got %.3f dB, want 31.3 dB", got)
	}
}

func TestLowAngleFadeRefuses(t *testing.T) {
	ok := LowPath{GradientExceeded: 10 * Percent}
	for name, c := range map[string]struct {
		dish float64
		path LowPath
	}{
		"gradient left out":  {1, LowPath{}},
		"averaged out":       {70, ok},
		"water out of range": {1, LowPath{GradientExceeded: 10 * Percent, WaterFraction: 2}},
	} {
		var re *unit.RangeError
		var n notes
		_, err := newLowAngle(scintillation{30, c.dish, 0.6, 60}, 50, 0, 1, c.path, &n)
		if !errors.As(err, &re) {
			t.Errorf("%s: got %v, want a *RangeError", name, err)
		}
	}
	var n notes
	if _, err := newLowAngle(scintillation{46, 1, 0.6, 60}, 50, 0, 1, ok, &n); err != nil || len(n) == 0 {
		t.Errorf("at 46 GHz, over the stated 45 GHz: error %v, notes %v, want a warning", err, n)
	}
}
