package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// BlockedRayError says that a ray meets the ground before it reaches the station.
type BlockedRayError struct {
	Kind      string     // "apparent" or "geometric"
	Elevation unit.Angle // of the ray at the station
	Least     unit.Angle // from which a ray still arrives, in the same kind
}

// Error names the elevation, the least one that is free, and what to do.
func (e *BlockedRayError) Error() string {
	return fmt.Sprintf("%s elevation: %.4f deg is under the horizon: a ray arrives from %.4f deg up at this height; raise the elevation",
		e.Kind, e.Elevation.Degrees(), e.Least.Degrees())
}

// GasAttenuation returns the attenuation of gases in the layers above the station,
// along the bent ray that arrives at an apparent elevation, down to the horizon
// and below it where the ray passes above sea level; a *BlockedRayError where it
// does not. Source: Rec. ITU-R P.676-13 Annex 1 §2.2.1 and §2.2.2.
func (l *Layers) GasAttenuation(f unit.Frequency, apparent unit.Angle) (unit.DB, []Note, error) {
	var n notes
	fGHz, el := f.Gigahertz(), apparent.Degrees()
	err := firstError(checkGasFrequency(fGHz, &n), within("apparent elevation", el, "deg", -90, 90, ""))
	if err != nil {
		return 0, nil, err
	}
	if el >= 0 {
		return unit.DB(l.attenuation(l.absorption(fGHz), el)), n, nil
	}
	a, err := l.grazing(fGHz, el)
	return unit.DB(a), n, err
}

// grazing returns the attenuation of a ray that comes from below the horizontal:
// from its lowest point up to the station and out into space.
func (l *Layers) grazing(fGHz, apparentDeg float64) (float64, error) {
	below, err := l.belowHorizontal(apparentDeg)
	if err != nil {
		return 0, err
	}
	g := below.absorption(fGHz)
	a, _ := below.belowTo(g, l.baseKm)
	return below.attenuation(g, 0) + a, nil
}

// belowHorizontal returns the layers above the lowest point of a ray that arrives from
// under the horizontal.
func (l *Layers) belowHorizontal(apparentDeg float64) (*Layers, error) {
	lowest, err := l.lowestPoint(apparentDeg)
	if err != nil {
		return nil, err
	}
	return newLayers(l.atmosphere, lowest, 0.01)
}

// leastApparentDeg returns the apparent elevation of the sea's edge, 0 for a station
// at or under sea level.
func (l *Layers) leastApparentDeg() float64 {
	return -degrees(math.Acos(math.Min(1, l.nr(math.Min(0, l.baseKm))/l.nr(l.baseKm))))
}

// lowestPoint returns the height at which a ray that arrives from under the
// horizontal runs level: n r there is n r cos(elevation) at the station, P.676-13
// Annex 1 §2.2.2.
func (l *Layers) lowestPoint(apparentDeg float64) (float64, error) {
	k := l.nr(l.baseKm) * math.Cos(radians(apparentDeg))
	low, high := math.Min(0, l.baseKm), l.baseKm
	if l.nr(low) > k || low == high {
		return 0, &BlockedRayError{"apparent", unit.Angle(apparentDeg) * unit.Degree, unit.Angle(l.leastApparentDeg()) * unit.Degree}
	}
	for range 60 {
		mid := (low + high) / 2
		if l.nr(mid) > k {
			high = mid
		} else {
			low = mid
		}
	}
	return (low + high) / 2, nil
}

// nr returns the refractive index times the radius at a height in km.
func (l *Layers) nr(hKm float64) float64 {
	s := l.atmosphere.at(hKm)
	return (1 + 1e-6*refractivity(s.dry(), vapourPressure(s.rho, s.tK), s.tK)) * (earthRadiusKm + hKm)
}

// Geometric returns the geometric elevation of a satellite far away which appears
// at an apparent elevation of 0° to 90°.
func (l *Layers) Geometric(apparent unit.Angle) (unit.Angle, error) {
	if err := within("apparent elevation", apparent.Degrees(), "deg", 0, 90, ""); err != nil {
		return 0, err
	}
	return unit.Angle(l.geometricDeg(apparent.Degrees(), math.Inf(1))) * unit.Degree, nil
}

// Apparent returns the elevation at which a satellite far away appears, from its
// geometric elevation: from the one that appears on the horizon up to 90°. Lower
// ones fail with a *BlockedRayError.
func (l *Layers) Apparent(geometric unit.Angle) (unit.Angle, error) {
	if err := within("geometric elevation", geometric.Degrees(), "deg", -90, 90, ""); err != nil {
		return 0, err
	}
	deg, err := l.apparentDeg(geometric.Degrees(), math.Inf(1))
	return unit.Angle(deg) * unit.Degree, err
}

// roundOffDeg is what conversions between radians and degrees may do to an elevation.
const roundOffDeg = 1e-9

// apparentDeg inverts geometricDeg, which rises with the elevation, by the secant
// method held inside a bracket.
func (l *Layers) apparentDeg(geometricDeg, satelliteRadiusKm float64) (float64, error) {
	horizon := l.geometricDeg(0, satelliteRadiusKm)
	if geometricDeg < horizon-roundOffDeg {
		return 0, &BlockedRayError{"geometric", unit.Angle(geometricDeg) * unit.Degree, unit.Angle(horizon) * unit.Degree}
	}
	low, high := 0.0, 90.0
	guess := math.Max(low, math.Min(high, apparentElevation(math.Max(geometricDeg, -0.5), math.Max(0, l.baseKm))))
	for range 60 {
		diff := l.geometricDeg(guess, satelliteRadiusKm) - geometricDeg
		if math.Abs(diff) < 1e-11 {
			break
		}
		if diff > 0 {
			high = guess
		} else {
			low = guess
		}
		// The slope is 1 to about 1.6: a step of the difference itself converges.
		if guess -= diff; guess <= low || guess >= high {
			guess = (low + high) / 2
		}
		if high-low < 1e-12 {
			break
		}
	}
	return guess, nil
}
