package propagation

import (
	"fmt"
	"math"
)

// LowPath says where a path under 5° runs, for the coefficient C0 of P.618-14 Table 3.
type LowPath struct {
	GradientExceeded Exceedance // of the worst month in which refractivity falls by more than 100 N/km in the lowest 100 m (P.453's pL)
	WaterFraction    float64    // share of the path over water or its coast, 0 to 1
	WorstMonth       bool       // the average worst month in place of the average year
}

// lowAngle is the prepared transition: the point where the deep part has 25 dB and
// the point at 5°, elevations apparent and in mrad, slopes in dB/mrad.
type lowAngle struct {
	heightKm               float64
	deep                   func(mrad float64) float64
	theta1, theta2         float64
	alpha, beta, gammaCube float64
}

// deepDB is A1 of §2.4.3.
const deepDB = 25

// newLowAngle prepares the fade of scintillation, beam spreading and multipath together
// that is exceeded for a percentage, at geometric elevations of 0.5° to 5°: the deep part
// from 25 dB up by P.618-14 §2.4.2, the shallow part by the transition of §2.4.3 to
// scintillation at 5°. Latitude and height are the station's; 1 to 45 GHz. A *unit.RangeError
// where the transition does not exist, as for an aperture that averages scintillation out.
func newLowAngle(s scintillation, latDeg, heightKm, pPct float64, path LowPath, n *notes) (*lowAngle, error) {
	err := firstError(s.check(n), checkLatitude(latDeg), checkStationHeight(heightKm), checkPercent(pPct),
		within("fraction of the path over water", path.WaterFraction, "", 0, 1, ""),
		within("time with a gradient under -100 N/km", path.GradientExceeded.Percents(), "%", 0.01, 100, "read it from the figures of Rec. ITU-R P.453"))
	if err != nil {
		return nil, err
	}
	n.beyond("P.618-14 §2.4.2", "frequency", s.fGHz, "GHz", 1, 45)
	n.beyond("P.618-14 §2.4.3", "exceeded percentage", pPct, "%", 0, 50)
	// Equation (54) or (56) as level - slope log10(1 + theta).
	level := 10*math.Log10(geoclimaticFactor(latDeg, heightKm, path)) + 9*math.Log10(s.fGHz) - 10*math.Log10(pPct)
	slope := 55.0
	if !path.WorstMonth {
		level -= yearCorrection(latDeg)
		slope = 59.5
	}
	l := &lowAngle{heightKm: heightKm, deep: func(mrad float64) float64 { return level - slope*math.Log10(1+mrad) }}
	l.theta1 = math.Pow(10, (level-deepDB)/slope) - 1         // equation (57)
	l.theta2 = apparentElevation(5, heightKm) * mradPerDegree // step 5
	slope1 := -slope / (1 + l.theta1) * math.Log10E           // equation (58)
	if l.theta1 >= l.theta2 {                                 // the deep part reaches over 5°: there is no transition
		return l, nil
	}
	a2 := math.Sqrt(s.fadeSquared(5, pPct)) // equation (59)
	if err := positive("scintillation fade at 5 deg elevation", a2, "dB"); err != nil {
		return nil, fmt.Errorf("P.618-14 §2.4.3: no transition to it: %w", err)
	}
	slope2 := a2 * (s.averagingSlope() - 1.2/math.Tan(radians(5))) / 1000 // equation (60)
	d := l.theta2 - l.theta1
	l.alpha = slope1 / deepDB
	l.beta = (math.Log(a2/deepDB) - l.alpha*d) / (d * d)
	l.gammaCube = (slope2 - a2*(l.alpha+2*l.beta*d)) / (a2 * d * d)
	return l, nil
}

const mradPerDegree = 1000 * math.Pi / 180

// fade returns the fade in dB at a geometric elevation, equation (64), or the deep
// part's below the angle where that reaches 25 dB.
func (l *lowAngle) fade(geometricDeg float64) float64 {
	theta := apparentElevation(geometricDeg, l.heightKm) * mradPerDegree
	if theta <= l.theta1 {
		return l.deep(theta)
	}
	u, v := theta-l.theta1, theta-l.theta2
	return deepDB * math.Exp(u*(l.alpha+u*(l.beta+l.gammaCube*v)))
}

// transitionDeg returns the geometric elevation at which the deep part begins, by
// bisection of the refraction of P.834; under -1° it returns -1°.
func (l *lowAngle) transitionDeg() float64 {
	low, high := -1.0, 5.0
	for range 60 {
		if mid := (low + high) / 2; apparentElevation(mid, l.heightKm)*mradPerDegree <= l.theta1 {
			low = mid
		} else {
			high = mid
		}
	}
	return high
}

// geoclimaticFactor is Kw of equations (50) to (53) with Table 3.
func geoclimaticFactor(latDeg, heightKm float64, path LowPath) float64 {
	c0 := 76.0
	switch {
	case path.WaterFraction > 0:
		c0 += 6 * path.WaterFraction
	case heightKm > 0.7:
		c0 = 70
	}
	lat := math.Abs(latDeg)
	cLat := math.Max(0, math.Min(7, lat-53))
	return math.Pow(path.GradientExceeded.Percents(), 1.5) * math.Pow(10, (c0+cLat)/10)
}

// yearCorrection is v of equation (55), in dB.
func yearCorrection(latDeg float64) float64 {
	c := math.Pow(math.Abs(math.Cos(radians(2*latDeg))), 0.7)
	if math.Abs(latDeg) > 45 {
		c = -c
	}
	return -1.8 - 5.6*math.Log10(1.1+c)
}

// averagingSlope returns g'(x)/g(x) dx/dtheta at 5°, per rad: equations (61) and
// (62), the first as the derivative of the square of equation (45).
func (s scintillation) averagingSlope() float64 {
	sinEl, cosEl := math.Sincos(radians(5))
	x := s.averagingArgument(sinEl)
	zeta := 11.0 / 6 * math.Atan2(1, x)
	q := x*x + 1
	slope := 3.86*11/6*math.Pow(q, -1.0/12)*(x*math.Sin(zeta)-math.Cos(zeta)) - 5.9*math.Pow(x, -1.0/6)
	root := math.Sqrt(sinEl*sinEl + flatSky)
	dx := x / (root + sinEl) * (sinEl/root + 1) * cosEl
	return slope / (2 * averagingSquared(x)) * dx
}
