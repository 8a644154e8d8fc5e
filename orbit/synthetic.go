package orbit

import (
	"errors"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// SyntheticOrbit describes the orbit of a spacecraft that does not fly yet.
type SyntheticOrbit struct {
	Name          string
	CatalogNumber int
	Epoch         time.Time

	Altitude     unit.Length // of the mean orbit: semi-major axis less EquatorialRadius
	Eccentricity float64
	Inclination  *unit.Angle // nil: Sun-synchronous
	LocalTime    *unit.Angle // of the ascending node, mean solar, 180° at noon; nil: by RAAN
	RAAN         unit.Angle
	ArgPerigee   unit.Angle
	MeanAnomaly  unit.Angle
}

// EquatorialRadius is the radius that heights of orbits count from, that of WGS-72,
// which SGP4 is bound to.
const EquatorialRadius unit.Length = wgs72RadiusKm * 1000

// Elements returns the SGP4 mean elements of the orbit, without drag: anyone can check
// them with SGP4. It fails with what Elements.Validate returns, with a *unit.RangeError
// for an altitude outside 100 to 400,000 km or a perigee in the ground, and where no
// inclination makes the orbit Sun-synchronous.
func (o *SyntheticOrbit) Elements() (Elements, error) {
	h := o.Altitude.Kilometres()
	if !(h >= 100 && h <= 400_000) {
		return Elements{}, &unit.RangeError{Quantity: "altitude of the orbit", Value: h, Unit: "km", Allowed: "100 to 400000 km"}
	}
	if !(o.Eccentricity >= 0 && o.Eccentricity < 1) {
		return Elements{}, &unit.RangeError{Quantity: "eccentricity", Value: o.Eccentricity, Allowed: "0 to below 1"}
	}
	axis := (h + wgs72RadiusKm) / wgs72RadiusKm
	if perigee := (axis*(1-o.Eccentricity) - 1) * wgs72RadiusKm; !(perigee >= 100) {
		return Elements{}, &unit.RangeError{Quantity: "perigee of the orbit", Value: math.Round(perigee*1000) / 1000, Unit: "km", Allowed: "100 km or more", Next: "give a greater altitude or a smaller eccentricity"}
	}
	el := Elements{Name: o.Name, CatalogNumber: o.CatalogNumber, Classification: "U", Epoch: o.Epoch, Eccentricity: o.Eccentricity,
		RAAN: o.RAAN.Wrapped(), ArgPerigee: o.ArgPerigee.Wrapped(), MeanAnomaly: o.MeanAnomaly.Wrapped()}
	if o.Inclination != nil {
		el.Inclination = *o.Inclination
	} else {
		i, err := SunSynchronousInclination(o.Altitude, o.Eccentricity)
		if err != nil {
			return Elements{}, err
		}
		el.Inclination = i
	}
	if o.LocalTime != nil {
		// The local time under right ascension 0 is short of it by what the node must turn.
		el.RAAN = (*o.LocalTime - LocalTimeOfNode(0, o.Epoch)).Wrapped()
	}
	el.MeanMotion = kozaiMotion(axis, &el)
	return el, el.Validate()
}

// kozaiMotion returns the mean motion in revolutions a day from which SGP4 recovers a
// semi-major axis in Earth radii; the rest of the elements must be set.
func kozaiMotion(axis float64, el *Elements) float64 {
	want := 60 / math.Sqrt(wgs72RadiusKm*wgs72RadiusKm*wgs72RadiusKm/wgs72Mu) / math.Pow(axis, 1.5) // rad/min
	try := *el
	try.MeanMotion = want * 1440 / (2 * math.Pi)
	for range 20 { // the correction is a few parts in a thousand, and so is what is left of it each time
		got, _ := try.recovered()
		try.MeanMotion *= want / got
	}
	return try.MeanMotion
}

// errNeverSunSynchronous says that the flattening does not turn the node fast enough.
var errNeverSunSynchronous = errors.New("no inclination makes the orbit Sun-synchronous: it is too high; give the inclination")

// SunSynchronousInclination returns the inclination at which the flattening of the Earth
// turns the node with the mean Sun, for a mean orbit's altitude over EquatorialRadius
// and an eccentricity. Altitudes of near-circular orbits reach to 5970 km.
func SunSynchronousInclination(altitude unit.Length, eccentricity float64) (unit.Angle, error) {
	axis := (altitude.Kilometres() + wgs72RadiusKm) / wgs72RadiusKm
	motion := math.Sqrt(wgs72Mu / math.Pow(axis*wgs72RadiusKm, 3)) // rad/s
	rate := func(i float64) float64 {
		_, _, node := secularRates(motion, axis, eccentricity, math.Cos(i))
		return node
	}
	low, high := math.Pi/2, math.Pi // the node's rate rises from 0
	if !(rate(high) >= meanSunRate) {
		return 0, errNeverSunSynchronous
	}
	for range 60 {
		if mid := (low + high) / 2; rate(mid) < meanSunRate {
			low = mid
		} else {
			high = mid
		}
	}
	return unit.Angle((low + high) / 2), nil
}
