package fluxdensity

import (
	"math"
	"strings"

	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

// FromTransmitter returns what a transmitter emits in a mode, which may be nil: then
// all power may fall in one reference bandwidth. Losses of the spacecraft beyond the
// line to its antenna (ExtraLosses) are not taken off: they may be smaller.
//
// A stated EIRP holds toward the station. Unless it is said to be the greatest in any
// direction the pattern counts as unknown. A stated peak of the spectrum goes before
// that of the mode.
func FromTransmitter(t *downlink.Transmitter, mode *modem.Resolved) Emission {
	e := Emission{Name: t.Name, Centre: t.Frequency, Attitude: t.Attitude}
	switch {
	case t.EIRP == nil:
		e.Power = t.Power.Minus(t.LineLoss)
		pattern := t.Pattern
		e.Pattern = &pattern
		if t.Body.Boresight.OffZ != 0 {
			e.Attitude = downlink.AttitudeUnstated // the boresight is not where the attitude points
		}
	default:
		e.Power = *t.EIRP
		if t.EIRPIsGreatest {
			e.Pattern = &downlink.Pattern{Kind: downlink.Isotropic}
		}
	}
	if mode != nil && mode.Symbols > 0 {
		e.Spectrum = spectrumOf(mode)
		if e.Spectrum.Kind == LinearSpectrum && mode.ShapingGiven { // rectangular pulses have no width to speak of
			e.Width = unit.Frequency(mode.Symbols.Hertz() * (1 + mode.Shaping))
		}
	}
	if t.SpectrumPeak != nil {
		e.Spectrum = Spectrum{Kind: StatedSpectrum, PeakPerHz: *t.SpectrumPeak}
	}
	return e
}

// Peak densities of constant-envelope modulations, times the bit rate and over the
// power. That of MSK follows from its spectrum, 16/π² (cos 2πfT/(1 - 16f²T²))² T;
// that of GMSK is a bound for bandwidth-time products of 0.25 and more, from
// simulation (TestMinimumShiftPeaks).
const (
	mskPeak  = 16 / (math.Pi * math.Pi)
	gmskPeak = 2.4
)

// spectrumOf returns the peak of a mode's spectrum where it is known.
func spectrumOf(m *modem.Resolved) Spectrum {
	rate := m.Symbols.Hertz()
	switch m.Modulation {
	case "msk":
		return Spectrum{Kind: StatedSpectrum, PeakPerHz: unit.DB(10 * math.Log10(mskPeak/rate))}
	case "gmsk":
		return Spectrum{Kind: StatedSpectrum, PeakPerHz: unit.DB(10 * math.Log10(gmskPeak/rate))}
	}
	for _, family := range []string{"psk", "qam"} { // apsk, oqpsk and their like, too
		if strings.HasSuffix(m.Modulation, family) {
			return Spectrum{Kind: LinearSpectrum, SymbolRate: m.Symbols}
		}
	}
	return Spectrum{}
}
