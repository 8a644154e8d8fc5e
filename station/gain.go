package station

import (
	"math"

	"slantwise/orbit/unit"
)

// DishGain returns the gain in dBi of a circular aperture, 10 log10(η (π D/λ)²), for
// d > 0, f > 0 and an efficiency in (0, 1]; outside them it is NaN. Surface error and
// blockage are losses of their own. Source: textbooks; it gives the printed 48.9 dBi of Roddy,
// Satellite Communications, example 12.2 (TestPublishedAntennas).
func DishGain(d unit.Length, f unit.Frequency, efficiency float64) unit.DB {
	if !(d > 0 && f > 0 && efficiency > 0 && efficiency <= 1) {
		return unit.DB(math.NaN())
	}
	x := math.Pi * d.Metres() / f.Wavelength().Metres()
	return unit.DB(10 * math.Log10(efficiency*x*x))
}

// DishBeamwidth returns the angle k λ/D between the half-power points of a dish.
func DishBeamwidth(d unit.Length, f unit.Frequency, factor unit.Angle) unit.Angle {
	return unit.Angle(factor.Radians() * f.Wavelength().Metres() / d.Metres())
}

// SurfaceLoss returns the loss of a dish whose surface deviates by rms from the
// ideal, 10 log10(e) (4π s/λ)² dB (Ruze). It holds for deviations up to about λ/20
// that are alike over a small part of the dish only (SurfaceLossHolds).
func SurfaceLoss(rms unit.Length, f unit.Frequency) unit.DB {
	phase := 4 * math.Pi * rms.Metres() / f.Wavelength().Metres()
	return unit.DB(10 * math.Log10E * phase * phase)
}

// SurfaceLossHolds tells whether rms lies within λ/20, where Ruze's formula is good.
func SurfaceLossHolds(rms unit.Length, f unit.Frequency) bool {
	return rms.Metres() <= f.Wavelength().Metres()/20
}

// BlockageLoss returns the loss of a dish of whose aperture the fraction b in [0, 1)
// lies in shadow, -20 log10(1-b) dB: the field on the axis falls with the area that
// is left, and what strikes the obstacle is scattered. Uniform illumination.
func BlockageLoss(b float64) unit.DB { return unit.DB(-20 * math.Log10(1-b)) }

// GainAt returns the antenna's gain in dBi at frequency f: as measured, else the
// dish's; ok is false when the gain is not known. Over elevation it stays tabulated.
func (a *Antenna) GainAt(f unit.Frequency) (gain *Tabulated, ok bool) {
	switch {
	case a.Gain != nil:
		return a.Gain.AtFrequency(f), true
	case a.hasAperture():
		return Constant(float64(DishGain(a.Diameter, f, a.Efficiency))), true
	}
	return nil, false
}

// BeamwidthAt returns the half-power beamwidth at frequency f, as measured or from
// the diameter; ok is false when it is not known.
func (a *Antenna) BeamwidthAt(f unit.Frequency) (width unit.Angle, ok bool) {
	switch {
	case a.Beamwidth > 0:
		return a.Beamwidth, true
	case a.Diameter > 0:
		return DishBeamwidth(a.Diameter, f, a.beamwidthFactor()), true
	}
	return 0, false
}

func (a *Antenna) hasAperture() bool { return a.Diameter > 0 && a.Efficiency > 0 }

func (a *Antenna) beamwidthFactor() unit.Angle {
	if a.BeamwidthFactor == 0 {
		return DefaultBeamwidthFactor
	}
	return a.BeamwidthFactor
}
