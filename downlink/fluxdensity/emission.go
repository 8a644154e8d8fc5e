package fluxdensity

import (
	"errors"
	"fmt"
	"math"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// Emission is what one transmitter sends.
type Emission struct {
	Name     string
	Centre   unit.Frequency
	Width    unit.Frequency    // occupied bandwidth; 0: not known, then it meets every other emission
	Power    unit.Level        // fed to the antenna, all of it
	Pattern  *downlink.Pattern // nil: not known in any direction
	Attitude downlink.Attitude // nadir and station turn the boresight; with any other, as with none, every direction may face the ground
	Spectrum Spectrum
}

// SpectrumKind tells how the power is spread over frequency.
type SpectrumKind int

// Kinds of spectrum.
const (
	UnknownSpectrum SpectrumKind = iota // all power may fall in one reference bandwidth
	LinearSpectrum                      // randomised data on PSK, QAM or APSK: the peak density is power over symbol rate
	StatedSpectrum                      // the peak density is given
)

// Spectrum is the peak of an emission's spectral density.
type Spectrum struct {
	Kind       SpectrumKind
	SymbolRate unit.Frequency // of LinearSpectrum
	PeakPerHz  unit.DB        // of StatedSpectrum: peak density over total power, dB(1/Hz)
}

// Share returns the greatest share of the power in a reference bandwidth, in (0, 1].
//
// The density of linear modulation of independent symbols peaks at the carrier with
// P/Rs, for rectangular pulses (sinc²) as for root-raised-cosine ones; over a
// bandwidth the share is at most B/Rs, and never more than all.
func (s Spectrum) Share(reference unit.Frequency) float64 {
	switch s.Kind {
	case LinearSpectrum:
		return min(1, reference.Hertz()/s.SymbolRate.Hertz())
	case StatedSpectrum:
		return min(1, reference.Hertz()*s.PeakPerHz.Ratio())
	}
	return 1
}

// Check returns every fault of the emission.
func (e *Emission) Check() error {
	var faults []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("emission %q: %s", e.Name, what), Value: v, Unit: u, Allowed: allowed})
		}
	}
	f, w, p := e.Centre.Megahertz(), e.Width.Megahertz(), e.Power.DBW()
	check("frequency", f, "MHz", "greater than 0 and at most 1e6 MHz", f > 0 && f <= 1e6)
	check("occupied bandwidth", w, "MHz", "0 to 1e6 MHz", w >= 0 && w <= 1e6)
	check("power", p, "dBW", "-200 to 200 dBW", math.Abs(p) <= 200)
	switch s := e.Spectrum; s.Kind {
	case LinearSpectrum:
		check("symbol rate", s.SymbolRate.Hertz(), "baud", "greater than 0 and at most 1e15 baud", s.SymbolRate > 0 && s.SymbolRate <= 1e15)
	case StatedSpectrum:
		check("peak density", float64(s.PeakPerHz), "dB(1/Hz)", "-200 to 0 dB(1/Hz)", s.PeakPerHz >= -200 && s.PeakPerHz <= 0)
	}
	if e.Pattern != nil {
		if err := e.Pattern.Validate(); err != nil {
			faults = append(faults, fmt.Errorf("emission %q: %w", e.Name, err))
		}
	}
	return errors.Join(faults...)
}

// radiator is an emission made ready for many directions.
type radiator struct {
	pattern *downlink.Pattern
	knownTo float64 // rad off boresight; below 0: nowhere
	axis    axis
	watts   float64 // in the reference bandwidth
	peak    float64 // gain, as a ratio, the greatest that is known
	whole   bool    // known in every direction
}

// axis is where the boresight points.
type axis int

const (
	axisAny     axis = iota // no direction: the greatest gain counts everywhere
	axisNadir               // the Earth's centre
	axisStation             // the station
)

func newRadiator(e *Emission, reference unit.Frequency) radiator {
	r := radiator{pattern: e.Pattern, knownTo: -1, watts: e.Power.Watts() * e.Spectrum.Share(reference)}
	switch {
	case e.Pattern == nil:
		return r
	case e.Pattern.Kind == downlink.GainGrid: // no one gain for an angle off boresight: its greatest counts
	case e.Pattern.Kind != downlink.Isotropic && e.Attitude == downlink.AttitudeNadir:
		r.axis = axisNadir
	case e.Pattern.Kind != downlink.Isotropic && e.Attitude == downlink.AttitudeStation:
		r.axis = axisStation
	}
	r.whole = e.Pattern.WholeSphere()
	r.knownTo = math.Pi
	switch e.Pattern.Kind {
	case downlink.CosinePower:
		if e.Pattern.BackLobe == nil {
			r.knownTo = math.Nextafter(math.Pi/2, 0)
		}
	case downlink.GainTable:
		r.knownTo = e.Pattern.Table[len(e.Pattern.Table)-1].OffBoresight.Radians()
	}
	if r.whole {
		r.knownTo = math.Pi
	}
	r.peak = e.Pattern.Peak().Ratio()
	return r
}

// eirp returns the power per steradian and 4π toward a direction whose cosine to the
// axis is given, in W, and whether it is known; what is not known counts 0, but for
// an antenna without an axis, which turns its known peak to any direction.
func (r *radiator) eirp(cos float64) (watts float64, known bool) {
	if r.axis == axisAny {
		return r.watts * r.peak, r.whole
	}
	off := math.Acos(max(-1, min(1, cos)))
	if off > r.knownTo {
		return 0, false
	}
	g, err := r.pattern.GainAt(unit.Angle(off))
	if err != nil {
		return 0, false
	}
	return r.watts * g.Ratio(), true
}
