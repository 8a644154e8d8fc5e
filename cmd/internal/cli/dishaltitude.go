package cli

import (
	"context"

	"slantwise/downlink/sizing"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// greatestAltitudeKm bounds the search for an altitude.
const greatestAltitudeKm = 3000.0

// altitudeLimit returns the altitude in km up to which a dish meets all, the orbit of
// the same inclination (or Sun-synchronous at the same local time) and eccentricity, to
// 2 %; NaN where it does not at its own altitude.
func (d *dishStudy) altitudeLimit(ctx context.Context, env *Env, needs []sizing.Need, v sizing.Variant) (float64, error) {
	el := d.kept.Elements()
	f, err := el.Facts()
	if err != nil {
		return 0, &InputError{Err: err}
	}
	own := (f.SemiMajorAxis - orbit.EquatorialRadius).Kilometres()
	meets := func(km float64) (bool, error) {
		of, err := d.atAltitude(ctx, env, km)
		if err != nil {
			return false, err
		}
		ok, err := of.study.Meets(needs, v)
		if err != nil {
			return false, &InputError{Err: err}
		}
		return ok, nil
	}
	ok, err := meets(own)
	if err != nil || !ok {
		return none, err
	}
	low, high := own, own
	for ok && high < greatestAltitudeKm {
		low, high = high, min(1.3*high, greatestAltitudeKm)
		if ok, err = meets(high); err != nil {
			return 0, err
		}
	}
	if ok {
		return high, nil
	}
	for high-low > 0.02*low {
		mid := (low + high) / 2
		if ok, err = meets(mid); err != nil {
			return 0, err
		}
		if ok {
			low = mid
		} else {
			high = mid
		}
	}
	return low, nil
}

// atAltitude is the same question for an orbit of another altitude, each flown once.
func (d *dishStudy) atAltitude(ctx context.Context, env *Env, km float64) (*dishStudy, error) {
	if of := d.altitudes[km]; of != nil {
		return of, nil
	}
	el := d.kept.Elements()
	o := orbit.SyntheticOrbit{Name: el.Name, CatalogNumber: el.CatalogNumber, Epoch: el.Epoch, Altitude: unit.Length(km) * unit.Kilometre,
		Eccentricity: el.Eccentricity, RAAN: el.RAAN, ArgPerigee: el.ArgPerigee, MeanAnomaly: el.MeanAnomaly}
	if !d.kept.SunSynchronous() {
		o.Inclination = &el.Inclination
	}
	moved, err := o.Elements()
	if err != nil {
		return nil, &InputError{Err: err}
	}
	out := *d
	out.notes = nil
	if out.kept, err = orbit.KeepOrbit(moved); err != nil {
		return nil, &InputError{Err: err}
	}
	if err := out.fly(ctx, env, out.kept); err != nil {
		return nil, err
	}
	if err := out.prepare(); err != nil {
		return nil, err
	}
	if d.altitudes == nil {
		d.altitudes = map[float64]*dishStudy{}
	}
	d.altitudes[km] = &out
	return &out, nil
}
