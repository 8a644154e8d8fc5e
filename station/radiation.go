package station

import (
	"math"

	"slantwise/orbit/unit"
)

// Radiation is how much a sending antenna radiates along the axis of its main beam. It
// says nothing of side lobes, of the feed and its struts, of reflections (which may
// double the field) and of what people and equipment may be exposed to: that is for
// local limits and a licensed person.
type Radiation struct {
	Fed  unit.Level // what reaches the antenna
	EIRP unit.Level // on the axis, surface and blockage taken off

	// Of a dish whose diameter is known, else NaN.
	NearFieldEnd  unit.Length // D²/(4λ)
	FarFieldFrom  unit.Length // 2D²/λ
	NearFieldMost float64     // W/m², 4P/A: no more anywhere on the axis
}

// RadiationAt returns the radiation of an antenna's transmit side at a frequency. a is
// what Sending returned; ok is false where its gain is not known.
//
// On the axis of a uniformly lit circular aperture of area A fed with P the density
// is (4P/A) sin²(πD²/(8λR)) by Fresnel's integral (TestNearField), at most 4P/A, last so
// at R = D²/(4λ), and falls from there on to EIRP/(4πR²) at an efficiency of one. FCC
// OET Bulletin 65 (1997) has the same bound and extent; 2D²/λ is the far field's usual
// begin, IEEE Std 145 (both from memory).
func (a *Antenna) RadiationAt(f unit.Frequency) (r Radiation, ok bool) {
	gain, known := a.GainAt(f)
	if !known || a.Transmit == nil {
		return r, false
	}
	_, most := gain.bounds()
	if a.Gain == nil {
		most -= float64(SurfaceLoss(a.SurfaceRMS, f) + BlockageLoss(a.BlockageFraction))
	}
	for _, x := range a.ExtraLosses {
		most -= float64(x.Loss)
	}
	r.Fed = a.Transmit.Power.Minus(a.Transmit.LineLoss)
	r.EIRP = r.Fed.Plus(unit.DB(most))
	nan := math.NaN()
	r.NearFieldEnd, r.FarFieldFrom, r.NearFieldMost = unit.Length(nan), unit.Length(nan), nan
	if d := a.Diameter.Metres(); d > 0 {
		lambda := f.Wavelength().Metres()
		r.NearFieldEnd = unit.Length(d * d / (4 * lambda))
		r.FarFieldFrom = unit.Length(2 * d * d / lambda)
		r.NearFieldMost = 4 * r.Fed.Watts() / (math.Pi * d * d / 4)
	}
	return r, true
}

// DensityAt returns the power density in W/m² on the axis of the main beam at a distance
// greater than 0. Of a dish it is the bound 4P/A in the near field, from there to the far
// field that of a uniformly lit aperture, which is more than a real one has, and EIRP/(4πR²)
// beyond. Where the diameter is not known it is EIRP/(4πR²), which holds in the far field alone.
func (r *Radiation) DensityAt(distance unit.Length) float64 {
	d := distance.Metres()
	switch u := r.NearFieldEnd.Metres() / d; {
	case math.IsNaN(u) || distance >= r.FarFieldFrom:
		return r.EIRP.Watts() / (4 * math.Pi * d * d)
	case u >= 1:
		return r.NearFieldMost
	default:
		s := math.Sin(math.Pi / 2 * u)
		return r.NearFieldMost * s * s
	}
}
