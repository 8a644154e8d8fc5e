package propagation

import "math"

// rainProbability returns the fraction of an average year during which there is rain
// anywhere on a path, from the fraction p0 during which it rains at the station and the
// path's length below the rain height; elevation 0° to 90°. Source: Rec. ITU-R
// P.618-14 §2.2.1.2.
func rainProbability(p0, elDeg, slantKm float64) (float64, error) {
	err := firstError(within("probability of rain", p0, "", 0, 1, "give a fraction"),
		within("elevation", elDeg, "deg", 0, 90, ""), notNegative("path below the rain height", slantKm, "km"))
	if err != nil || p0 == 0 || p0 == 1 {
		return p0, err
	}
	d := slantKm * math.Cos(radians(elDeg))
	rho := 0.59*math.Exp(-d/31) + 0.41*math.Exp(-d/800) // equation (11)
	c := bivariateTail(inverseQ(p0), rho)
	return 1 - (1-p0)*math.Pow((c-p0*p0)/(p0*(1-p0)), p0), nil // equation (14)
}

// bivariateTail returns the probability that two standard normal variables of
// correlation rho in [0, 1] both exceed a, equation (13). It is Q(a)² plus the
// integral of the density over the correlation from 0 to rho, with the sine of an
// angle for the correlation, which leaves no singularity at 1 (the identity is
// Plackett's, Biometrika 41, 1954, p. 351).
func bivariateTail(a, rho float64) float64 {
	q := upperTail(a)
	top := math.Asin(rho)
	const steps = 64
	var sum float64
	for i := range steps {
		mid, half := top*(float64(i)+0.5)/steps, top/(2*steps)
		for k, x := range gaussNodes {
			sum += gaussWeights[k] * half * math.Exp(-a*a/(1+math.Sin(mid+half*x)))
		}
	}
	return q*q + sum/(2*math.Pi)
}

// Gauss-Legendre nodes and weights of order 4 (Abramowitz and Stegun, table 25.4).
var (
	gaussNodes   = [4]float64{-0.861136311594053, -0.339981043584856, 0.339981043584856, 0.861136311594053}
	gaussWeights = [4]float64{0.347854845137454, 0.652145154862546, 0.652145154862546, 0.347854845137454}
)
