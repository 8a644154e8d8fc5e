package orbit

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"
)

// twoBody carries a state (m, m/s) in an inertial frame by s seconds: classical
// Runge-Kutta of order four in steps of about 2 s, good to a millimetre over the spans used here.
func twoBody(p, v Vec3, s float64) (Vec3, Vec3) {
	const mu = 3.986004418e14
	pull := func(p Vec3) Vec3 { r := p.Norm(); return p.Scale(-mu / (r * r * r)) }
	n := int(math.Ceil(math.Abs(s) / 2))
	h := s / float64(n)
	for range n {
		k1p, k1v := v, pull(p)
		k2p, k2v := v.Add(k1v.Scale(h/2)), pull(p.Add(k1p.Scale(h/2)))
		k3p, k3v := v.Add(k2v.Scale(h/2)), pull(p.Add(k2p.Scale(h/2)))
		k4p, k4v := v.Add(k3v.Scale(h)), pull(p.Add(k3p.Scale(h)))
		p = p.Add(k1p.Add(k2p.Scale(2)).Add(k3p.Scale(2)).Add(k4p).Scale(h / 6))
		v = v.Add(k1v.Add(k2v.Scale(2)).Add(k3v.Scale(2)).Add(k4v).Scale(h / 6))
	}
	return p, v
}

// local resolves a vector of an inertial frame along the axes of Spread.
func local(p, v, d Vec3) [3]float64 {
	r := p.Unit()
	w := p.Cross(v).Unit()
	return [3]float64{d.Dot(r), d.Dot(w.Cross(r)), d.Dot(w)}
}

// perigee returns a state at the perigee of an orbit of semi-major axis 6878 km.
func perigee(e float64) (p, v Vec3, n float64) {
	const mu, a = 3.986004418e14, 6.878e6
	return Vec3{X: a * (1 - e)}, Vec3{Y: math.Sqrt(mu/a*(1+e)/(1-e)) * math.Cos(1.7), Z: math.Sqrt(mu/a*(1+e)/(1-e)) * math.Sin(1.7)}, math.Sqrt(mu / (a * a * a))
}

// transitionByTwoBody is the transition matrix of position and inertial velocity on
// the axes of Spread by differences of two-body motion.
func transitionByTwoBody(e, seconds float64) (phi [6][6]float64, n float64) {
	p0, v0, n := perigee(e)
	r := p0.Unit()
	w := p0.Cross(v0).Unit()
	axes := [3]Vec3{r, w.Cross(r), w}
	p1, v1 := twoBody(p0, v0, seconds)
	for j := range 6 {
		step, dp, dv := 1.0, Vec3{}, Vec3{}
		if j < 3 {
			dp = axes[j].Scale(step)
		} else {
			step = 1e-3
			dv = axes[j-3].Scale(step)
		}
		up, uv := twoBody(p0.Add(dp), v0.Add(dv), seconds)
		down, dn := twoBody(p0.Sub(dp), v0.Sub(dv), seconds)
		x, y := local(p1, v1, up.Sub(down)), local(p1, v1, uv.Sub(dn))
		for i := range 3 {
			phi[i][j], phi[i+3][j] = x[i]/(2*step), y[i]/(2*step)
		}
	}
	return phi, n
}

// On a circular orbit the equations of Hill are the exact first derivatives of
// two-body motion; what is left is the rounding of the differences.
func TestHillTransitionAgainstTwoBody(t *testing.T) {
	for _, seconds := range []float64{1, 700, 2850, 5677, 20000, -3000} {
		want, n := transitionByTwoBody(0, seconds)
		got := hillTransition(n, seconds)
		for i := range 6 {
			for j := range 6 {
				// Rows and columns of velocity scaled by n, so that all are of one size.
				scale := 1.0
				if i >= 3 {
					scale /= n
				}
				if j >= 3 {
					scale *= n
				}
				g, w := got[i][j]*scale, want[i][j]*scale
				if tolerance := 1e-5 * (1 + n*math.Abs(seconds)); math.Abs(g-w) > tolerance {
					t.Errorf("%g s: row %d, column %d: got %.7g, want %.7g, difference %.2g, tolerance %.2g", seconds, i+1, j+1, g, w, g-w, tolerance)
				}
			}
		}
	}
}

// sampleCovariance is of the usual size a day after a fit to good tracking: 40 m
// radially, 120 m along, 30 m across, and velocities that belong to them.
func sampleCovariance() Covariance {
	return Covariance{
		{1600},
		{-2400, 14400},
		{0, 0, 900},
		{1.6, -14.4, 0, 0.0169},
		{-1.68, 2.52, 0, -0.0016, 0.00187},
		{0, 0, 0.1, 0, 0, 0.0012},
	}
}

func TestPropagatedAgainstTwoBody(t *testing.T) {
	for _, e := range []float64{0.001, MostHillEccentricity} {
		c := sampleCovariance()
		if err := c.Validate(); err != nil {
			t.Fatal(err)
		}
		for _, hours := range []float64{0.4, 1.7, 6, 12.3, 24} {
			phi, n := transitionByTwoBody(e, hours*3600)
			var want [3]float64
			for i := range want {
				for j := range 6 {
					for k := range 6 {
						want[i] += phi[i][j] * c.at(j, k) * phi[i][k]
					}
				}
			}
			moved := c.Propagated(n, hours*3600)
			s := moved.Spread()
			whole := math.Sqrt(want[0] + want[1] + want[2])
			for i, g := range []float64{s.Radial.Metres(), s.Along.Metres(), s.Across.Metres()} {
				w := math.Sqrt(want[i])
				if math.Abs(g-w) > 0.1*whole {
					t.Errorf("eccentricity %g, %g h, %s: got %.1f m, want %.1f m, more than a tenth of the %.1f m in all", e, hours, covarianceNames[i], g, w, whole)
				}
				t.Logf("eccentricity %g, %g h, %s: got %.1f m, two-body %.1f m", e, hours, covarianceNames[i], g, w)
			}
		}
	}
}

func TestCovarianceNotPositive(t *testing.T) {
	for _, c := range []struct {
		name, want string
		spoil      func(*Covariance)
	}{
		{"negative variance", "row 3 (position across): its pivot is -900 m²", func(c *Covariance) { c[2][2] = -900 }},
		{"correlation above one", "row 2 (position along): its pivot is -8.1e+03 m²", func(c *Covariance) { c[1][0] = -6000 }},
		{"correlated with what is known exactly", "row 2 (position along): it goes with the radial position, which has no variance", func(c *Covariance) { c[0][0] = 0 }},
		{"not a number", "row 4 (radial velocity): number 2 is not finite", func(c *Covariance) { c[3][1] = math.NaN() }},
		{"kilometres taken for metres", "row 2 (position along): a standard deviation of 1.2e+05 km", func(c *Covariance) { c[1][1] = 1.44e16 }},
	} {
		m := sampleCovariance()
		c.spoil(&m)
		err := m.Validate()
		var fault *CovarianceError
		if !errors.As(err, &fault) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error with %q", c.name, err, c.want)
		}
	}
	exact := Covariance{}
	if err := exact.Validate(); err != nil {
		t.Errorf("a position known exactly: %v", err)
	}
}

func TestCovarianceUncertainty(t *testing.T) {
	at := time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC)
	a, b := sampleCovariance(), Covariance{}
	for i := range 6 {
		for j := range 6 {
			b[i][j] = 4 * a[i][j]
		}
	}
	points := []CovarianceAt{{at.Add(time.Hour), b}, {at, a}}
	u, err := NewCovarianceUncertainty(points, 1.1e-3, 0.001, at.Add(-time.Hour), at.Add(3*time.Hour), "test")
	if err != nil {
		t.Fatal(err)
	}
	spread := func(after time.Duration) Spread {
		t.Helper()
		s, err := u.At(at.Add(after))
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	if s := spread(0); s.Along != 120 || s.Radial != 40 || s.Across != 30 || math.Abs(s.RadialAlong+0.5) > 1e-12 {
		t.Errorf("at the first covariance: got %+v, want it as given", s)
	}
	if s := spread(time.Hour); s.Along != 240 {
		t.Errorf("at the second covariance: got %v along, want 240 m", s.Along)
	}
	// Half way the variance is the mean of 120² and 240².
	if s, want := spread(30*time.Minute), math.Sqrt((14400+57600)/2); math.Abs(s.Along.Metres()-want) > 1e-9 {
		t.Errorf("half way: got %v along, want %v m", s.Along, want)
	}
	moved := b.Propagated(1.1e-3, 3600)
	if got, want := spread(2*time.Hour), moved.Spread(); got != want {
		t.Errorf("after the last: got %+v, want %+v", got, want)
	}
	var outside *UncertaintySpanError
	if _, err := u.At(at.Add(4 * time.Hour)); !errors.As(err, &outside) {
		t.Errorf("beyond the span: got %v, want a *UncertaintySpanError", err)
	}
	eccentric, err := NewCovarianceUncertainty(points, 1.1e-3, 0.1, at.Add(-time.Hour), at.Add(3*time.Hour), "test")
	if err != nil {
		t.Fatal(err)
	}
	if _, err := eccentric.At(at.Add(2 * time.Hour)); !errors.As(err, &outside) {
		t.Errorf("eccentric, beyond its covariances: got %v, want a *UncertaintySpanError", err)
	}
	if _, err := NewCovarianceUncertainty(append(points, points[0]), 1.1e-3, 0, at, at, "test"); err == nil || !strings.Contains(err.Error(), "two are given for 2026-09-15T01:00:00.000Z") {
		t.Errorf("two of one instant: got %v", err)
	}
}
