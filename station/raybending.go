package station

import "math"

// ray is a ray through the exponential atmosphere, told by its elevation at a
// reference height: (r+x) n(x) cos φ stays what it is there (Snell's law in spherical
// layers). Heights are in km.
type ray struct{ height, sin, cos float64 }

// seaHorizon returns the apparent elevation in rad of a ray that grazes the sea, for
// a station at h km: θm = -arccos(r n(0) / ((r+h) n(h))), Rec. ITU-R P.834-9,
// section 4. A station at or below sea level looks along its own horizon.
func seaHorizon(h float64) float64 {
	if h <= 0 {
		return 0
	}
	// By the half angle, since the arc cosine loses the digits of small heights.
	return -2 * math.Asin(math.Sqrt(-growth(-h, h)/2))
}

// growth returns (r+x) n(x) / ((r+h) n(h)) - 1 for x = h + rise, in km.
func growth(rise, h float64) float64 {
	n := 1 + refractionA*math.Exp(-refractionB*h)
	dn := (n - 1) * math.Expm1(-refractionB*rise)
	return (rise*(n+dn) + (refractionRadius+h)*dn) / ((refractionRadius + h) * n)
}

// growthRate is the derivative of growth at the height x, in 1/km.
func growthRate(x, h float64) float64 {
	nx, nh := refractionA*math.Exp(-refractionB*x), refractionA*math.Exp(-refractionB*h)
	return (1 + nx - (refractionRadius+x)*refractionB*nx) / ((refractionRadius + h) * (1 + nh))
}

// bendingIntegral returns the bending in rad of a ray that arrives at a station at
// h km under the apparent elevation theta:
//
//	τ = -∫ n'(x) / (n(x) tan φ) dx,  (r+x) n(x) cos φ = (r+h) n(h) cos θ
//
// over the ray, x the height in km. Source: Rec. ITU-R P.834-9, section 4.
func bendingIntegral(h, theta float64) float64 {
	sin, cos := math.Sincos(theta)
	top := h + refractionTop
	if theta >= 0 {
		// The ray's lowest point, continued below the station, is near h - depth; more
		// depth than half the radius makes the integrand no smoother.
		depth := math.Min(sin*sin/(2*cos*cos*growthRate(h, h)), refractionRadius/2)
		return ray{h, sin, cos}.bending(h-depth, h, top)
	}
	low := math.Min(h, lowestPoint(h, sin*sin/(1+cos)))
	level := ray{low, 0, 1}
	return level.bending(low, low, h) + level.bending(low, low, top)
}

// lowestPoint returns the height in km where a ray that leaves h downwards is level,
// by Newton's method; versine is 1 - cos θ at h.
func lowestPoint(h, versine float64) float64 {
	x := h
	for range 20 {
		step := (growth(x-h, h) + versine) / growthRate(x, h)
		x -= step
		if math.Abs(step) < 1e-12 {
			break
		}
	}
	return x
}

// bending integrates the bending of the ray between two heights in km. The variable
// is s with x = base + s², base near the ray's lowest point, where 1/tan φ goes as
// 1/s: that takes the singularity away.
func (y ray) bending(base, from, to float64) float64 {
	lo, hi := math.Sqrt(from-base), math.Sqrt(to-base)
	under := base - y.height // 0 for a level ray, whose growth must not be a difference
	if !(hi > lo) {
		return 0
	}
	const panels = 4
	width := (hi - lo) / panels
	sum := 0.0
	for p := range panels {
		mid := lo + (float64(p)+0.5)*width
		for i, node := range gaussNodes {
			sum += gaussWeights[i] * (y.rate(under, mid-node*width/2) + y.rate(under, mid+node*width/2))
		}
	}
	return sum * width / 2
}

// rate is the integrand in s, in rad, at under + s² km over the ray's reference.
func (y ray) rate(under, s float64) float64 {
	rise := under + s*s
	q := growth(rise, y.height)
	n1 := refractionA * math.Exp(-refractionB*(y.height+rise))
	// tan² φ = (sin² θ + 2q + q²) / cos² θ.
	tan := math.Sqrt(y.sin*y.sin+q*(2+q)) / y.cos
	return 2 * s * refractionB * n1 / ((1 + n1) * tan)
}

// Positive nodes and weights of the ten-point Gauss-Legendre rule (Abramowitz and
// Stegun, Handbook of Mathematical Functions, 1964, table 25.4).
var (
	gaussNodes   = [5]float64{0.148874338981631, 0.433395394129247, 0.679409568299024, 0.865063366688985, 0.973906528517172}
	gaussWeights = [5]float64{0.295524224714753, 0.269266719309996, 0.219086362515982, 0.149451349150581, 0.066671344308688}
)
