package orbit

import (
	"math"
	"time"
)

// leastNodeInclination is the tilt under which an orbit's crossings of the equator
// are an accident of the short-period terms rather than a node.
const leastNodeInclination = 0.01 * math.Pi / 180

// NextAscendingNode returns the first instant after t at which the orbit crosses
// the true equator northwards, rounded to the millisecond. It fails with a
// *PropagationError where SGP4 does before the node, with an *ElementError where the
// orbit lies within 0.01 degrees of the equator's plane, and as NewEphemeris does.
func (e *Elements) NextAscendingNode(t time.Time) (time.Time, error) {
	if math.Sin(e.Inclination.Radians()) < math.Sin(leastNodeInclination) {
		return time.Time{}, &ElementError{Field: "inclination", Value: printed(e.Inclination.Degrees()) + " deg",
			Allowed: "0.01 to 179.99 deg for an orbit to have a node"}
	}
	f, err := e.Facts()
	if err != nil {
		return time.Time{}, err
	}
	// A revolution holds one node; a tenth more covers the drift of the elements.
	length := min(f.Period, farthestFromEpoch)
	eph, err := NewEphemeris(*e, t, t.Add(length+length/10), EarthOrientation{})
	if err != nil {
		return time.Time{}, err
	}
	if s, ok := eph.risesThroughEquator(); ok {
		return eph.Time(s).Round(time.Millisecond), nil
	}
	if why := eph.Truncated(); why != nil {
		return time.Time{}, why
	}
	return time.Time{}, &PropagationError{Name: e.Name, CatalogNumber: e.CatalogNumber, Time: t, Epoch: e.Epoch,
		Reason: Diverged, Detail: "no ascending node within 1.1 revolutions"}
}

// risesThroughEquator returns the first time at which the orbit passes the plane of
// the equator from south to north.
func (e *Ephemeris) risesThroughEquator() (float64, bool) {
	height := func(s float64) float64 { return e.PositionAt(s).Z }
	for low := 0.0; low < e.end; low += e.step {
		high := min(low+e.step, e.end)
		if !(height(low) < 0 && height(high) >= 0) {
			continue
		}
		for high-low > 1e-5 {
			if mid := (low + high) / 2; height(mid) < 0 {
				low = mid
			} else {
				high = mid
			}
		}
		return high, true
	}
	return 0, false
}
