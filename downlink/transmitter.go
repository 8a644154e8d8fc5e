package downlink

import (
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Transmitter is a spacecraft's transmitter with its antenna. Radiated power is
// known from Power, LineLoss and Pattern, or from EIRP as stated.
type Transmitter struct {
	Name      string
	Frequency unit.Frequency // of the carrier, greater than 0

	Power    unit.Level // at the transmitter's output
	LineLoss unit.DB    // from there to the antenna, 0 or greater
	Pattern  Pattern
	EIRP     *unit.Level // toward the station, in place of the three above; nil: from them

	EIRPIsGreatest bool     // EIRP is the greatest in any direction, not only toward the station
	SpectrumPeak   *unit.DB // peak spectral density over the whole power, dB(1/Hz); nil: from the mode

	Attitude            Attitude
	AttitudeProbability float64 // of a tumbling or spinning spacecraft, in (0, 1): the gain exceeded with it counts; 0: DefaultAttitudeProbability
	Body                Body    // where the antenna sits on the body, and what else the attitude needs

	Polarization *station.Polarization // nil: left out

	OtherPolarization bool         // the orthogonal polarisation carries an equal signal, too
	Modes             []modem.Mode // may be empty: then there is a carrier and no data

	ImplementationLoss unit.DB // of modulator and demodulator together, 0 or greater
	RequiredMargin     unit.DB
	ExtraLosses        []Loss // each a term of its own

	AllottedBandwidth unit.Frequency // caps the achievable rate; 0: not given
	HighestRate       unit.BitRate   // information bits; caps the achievable rate; 0: not given

	Oscillator *Oscillator // how far the carrier, or where a receiver listens, is off Frequency; nil: not at all
	Turnaround *Turnaround // of a transmitter that can be locked to an uplink; nil: it cannot
}

// Loss is a named loss on the spacecraft's side, a term of its own.
type Loss struct {
	Name string
	Loss unit.DB // 0 or greater
}
