package cli

import (
	"context"
	"math"
	"time"

	"slantwise/downlink/sizing"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// greatestAltitudeKm bounds the search for an altitude.
const greatestAltitudeKm = 3000.0

// altitudeShare is how closely an altitude is found.
const altitudeShare = 0.02

// altitudeLimit returns the altitude in km up to which a dish meets all, the orbit of
// the same inclination (or Sun-synchronous at the same local time) and eccentricity, to
// 2 %; NaN where it does not at its own altitude.
func (d *dishStudy) altitudeLimit(ctx context.Context, env *Env, needs []sizing.Need, v sizing.Variant) (float64, error) {
	el := d.kept.Elements()
	f, err := el.Facts()
	if err != nil {
		return 0, &InputError{Err: err}
	}
	over := func(of *dishStudy) (float64, error) {
		x, err := of.study.Worst(needs, v)
		if err != nil {
			return 0, &InputError{Err: err}
		}
		return x, nil
	}
	low := (f.SemiMajorAxis - orbit.EquatorialRadius).Kilometres()
	atLow, err := over(d)
	if err != nil || !(atLow >= 0) {
		return none, err
	}
	at := func(km float64) (float64, error) {
		of, err := d.atAltitude(ctx, env, km)
		if err != nil {
			return 0, err
		}
		return over(of)
	}
	high, atHigh := low, atLow
	for atHigh >= 0 {
		if low, atLow = high, atHigh; low >= greatestAltitudeKm {
			return low, nil
		}
		high = min(1.3*low, max(greatestAltitudeKm, low))
		if atHigh, err = at(high); err != nil {
			return 0, err
		}
	}
	for i := 0; high-low > altitudeShare*low; i++ {
		// Where the straight line between the two crosses 0, a little to one side of it in turn, so
		// that both ends close in; the middle where the values are of no use.
		share := atLow / (atLow - atHigh)
		share += []float64{-0.4, 0.4}[i%2] * altitudeShare * low / (high - low)
		if i > 4 || !(share > 0.1 && share < 0.9) {
			share = max(0.1, min(0.9, share))
			if i > 4 || math.IsNaN(share) {
				share = 0.5
			}
		}
		mid := low + share*(high-low)
		x, err := at(mid)
		if err != nil {
			return 0, err
		}
		if x >= 0 {
			low, atLow = mid, x
		} else {
			high, atHigh = mid, x
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
	out.step = stepAt(km)
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

// stepAt is the step between the samples of an orbit at an altitude in km: a higher one crosses
// the sky more slowly: about as many degrees a sample as at 500 km in 10 s, up to 40 s.
func stepAt(km float64) time.Duration {
	slower := max(1, min(4, km/500))
	return time.Duration(slower * float64(sizing.DefaultStep)).Round(time.Second)
}
