package station

import (
	"math"
	"strconv"

	"slantwise/orbit/unit"
)

// Refraction turns geometric into apparent elevation and back for one height above
// sea level. It is prepared once, immutable, and costs some tens of nanoseconds a
// call.
//
// Model: the ray in the average exponential atmosphere, bent by the integral of Rec.
// ITU-R P.834-9 (12/2017), section 4, evaluated as it stands for every elevation from
// the sea horizon to the zenith. The closed forms that the Recommendation fits to
// this integral hold for heights to 3 km and elevations to 10°; there they agree with
// it to 0.012° (TestRefractionAgainstClosedForms).
//
// What it leaves out: the weather of the day (the bending at the horizon varies by a
// tenth and more), the ionosphere, and the distance: the source is taken infinitely
// far, which for a spacecraft 2500 km away on the horizon bends 0.05° too much.
type Refraction struct {
	horizon, span float64 // least apparent elevation and the way from it to the zenith, rad
	seen          float64 // geometric elevation that is seen at the horizon, rad
	bending       [refractionNodes + 1]float64
}

// refractionNodes is the number of intervals of the table of bending against
// sqrt((apparent - horizon)/span), where it is smooth: interpolation errs by less
// than 1e-5° (TestRefractionTable).
const refractionNodes = 256

// Average exponential atmosphere of Rec. ITU-R P.834-9, section 4 (the mean values of
// Rec. ITU-R P.453): n = 1 + a exp(-b x), x the height in km; Earth radius in km.
const (
	refractionA      = 0.000315
	refractionB      = 0.1361
	refractionRadius = 6370.0
	refractionTop    = 120.0 // km above the station, where the air bends no more: exp(-b x) is 8e-8
)

// NewRefraction prepares the refraction for a station; heightAboveSea -500 m to 9 km,
// else a *unit.RangeError.
func NewRefraction(heightAboveSea unit.Length) (*Refraction, error) {
	h := heightAboveSea.Kilometres()
	if !(h >= -0.5 && h <= 9) {
		return nil, &unit.RangeError{
			Quantity: "height above sea level", Value: heightAboveSea.Metres(), Unit: "m",
			Allowed: "-500 to 9000 m", Next: "check the station's altitude and geoid height",
		}
	}
	m := seaHorizon(h)
	r := &Refraction{horizon: m, span: math.Pi/2 - m}
	for i := range r.bending {
		w := float64(i) / refractionNodes
		r.bending[i] = bendingIntegral(h, m+r.span*w*w)
	}
	r.seen = m - r.bending[0]
	return r, nil
}

// Horizon returns the least apparent elevation that sees the sky over a smooth Earth
// at sea level; 0 for stations at or below sea level.
func (r *Refraction) Horizon() unit.Angle { return unit.Angle(r.horizon) }

// Geometric returns the geometric elevation, in [-90°, 90°], of what is seen at an
// apparent one; ok is false outside [Horizon(), 90°], where no ray arrives.
func (r *Refraction) Geometric(apparent unit.Angle) (geometric unit.Angle, ok bool) {
	a := apparent.Radians()
	if !(a >= r.horizon && a <= math.Pi/2) {
		return 0, false
	}
	tau, _ := r.at(a)
	return unit.Angle(a - tau), true
}

// Apparent returns the apparent elevation of a spacecraft at a geometric elevation;
// ok is false where no ray arrives, below the horizon. It is the inverse of Geometric
// to 1e-10 rad.
func (r *Refraction) Apparent(geometric unit.Angle) (apparent unit.Angle, ok bool) {
	g := geometric.Radians()
	if !(g >= r.seen && g <= math.Pi/2) {
		return 0, false
	}
	// Newton's method on a - tau(a) = g; the left side rises with a slope near 1.
	// The error after a step is half the curvature of the table, under 2000 per rad at
	// the horizon, times the step squared: none is needed behind one of 1e-7 rad.
	a := min(max(g, r.horizon), math.Pi/2)
	for range 8 {
		tau, slope := r.at(a)
		step := (g + tau - a) / (1 - slope)
		a = min(max(a+step, r.horizon), math.Pi/2)
		if math.Abs(step) < 1e-7 {
			break
		}
	}
	return unit.Angle(a), true
}

// at interpolates the bending at an apparent elevation and its slope, both in rad:
// cubic Hermite in w with the slopes of central differences.
func (r *Refraction) at(a float64) (tau, slope float64) {
	w := math.Sqrt((a-r.horizon)/r.span) * refractionNodes
	i := min(int(w), refractionNodes-1)
	t := w - float64(i)
	y0, y1 := r.bending[i], r.bending[i+1]
	d0, d1 := r.slope(i), r.slope(i+1)
	c2, c3 := 3*(y1-y0)-2*d0-d1, 2*(y0-y1)+d0+d1
	tau = y0 + t*(d0+t*(c2+t*c3))
	if w == 0 {
		return tau, (r.bending[1] - y0) / r.span * (refractionNodes * refractionNodes)
	}
	// dw/da = N²/(2 span w), w counted in nodes.
	return tau, (d0 + t*(2*c2+3*t*c3)) * (refractionNodes * refractionNodes) / (2 * r.span * w)
}

// slope returns the derivative of the table at node i, per node. At the horizon it is
// 0, since the bending goes with w².
func (r *Refraction) slope(i int) float64 {
	switch i {
	case 0:
		return 0
	case refractionNodes:
		return r.bending[i] - r.bending[i-1]
	}
	return (r.bending[i+1] - r.bending[i-1]) / 2
}

// ApparentElevation returns the apparent elevation at one height above sea level; for
// many values prepare a Refraction. The error is a *unit.RangeError when the height
// is outside -500 m to 9 km or no ray arrives from that elevation.
func ApparentElevation(geometric unit.Angle, heightAboveSea unit.Length) (unit.Angle, error) {
	r, err := NewRefraction(heightAboveSea)
	if err != nil {
		return 0, err
	}
	a, ok := r.Apparent(geometric)
	if !ok {
		return 0, r.hidden("geometric elevation", geometric, unit.Angle(r.seen))
	}
	return a, nil
}

// GeometricElevation returns the geometric elevation of what is seen at an apparent
// one; errors as ApparentElevation.
func GeometricElevation(apparent unit.Angle, heightAboveSea unit.Length) (unit.Angle, error) {
	r, err := NewRefraction(heightAboveSea)
	if err != nil {
		return 0, err
	}
	g, ok := r.Geometric(apparent)
	if !ok {
		return 0, r.hidden("apparent elevation", apparent, r.Horizon())
	}
	return g, nil
}

func (r *Refraction) hidden(quantity string, v, least unit.Angle) error {
	return &unit.RangeError{
		Quantity: quantity, Value: given(v), Unit: "deg",
		Allowed: "from the sea horizon, " + strconv.FormatFloat(least.Degrees(), 'f', 3, 64) + " deg, to 90 deg",
		Next:    "no ray arrives from below the horizon",
	}
}

// Steepest returns the greatest derivative of geometric by apparent elevation, that
// at the horizon; from there it falls to 1 at the zenith.
func (r *Refraction) Steepest() float64 {
	_, slope := r.at(r.horizon)
	return 1 - slope
}
