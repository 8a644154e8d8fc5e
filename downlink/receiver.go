package downlink

import (
	"errors"
	"fmt"
	"math"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Direction tells which end of a link sends.
type Direction int

// Directions.
const (
	Down Direction = iota // the spacecraft sends
	Up                    // the station sends
)

// String returns "down" or "up".
func (d Direction) String() string { return [...]string{"down", "up"}[d] }

// Receiver is a spacecraft's receiver with its antenna, the far end of an uplink. What
// it shares with a transmitter stands in the same fields: name, carrier, pattern and
// attitude, polarisation, modes, losses, required margin; LineLoss lies between antenna
// and receiver. Power, EIRP, the spectrum's peak and the other polarisation are not used.
//
// Its noise is known in one of three ways: Noise, GOverT, Sensitivity.
type Receiver struct {
	Transmitter

	// Noise is the antenna temperature with the receiver's stages, or the system noise
	// at the receiver's input. Each figure is one, the same at every elevation.
	Noise *station.Noise
	// GOverT is in dB/K, with the gain on the pattern's boresight less LineLoss.
	GOverT *unit.DB
	// AntennaUnknown says that GOverT holds in every direction and no pattern is known:
	// then received power and noise do not exist.
	AntennaUnknown bool
	Sensitivity    *Sensitivity
}

// Sensitivity is the least power at a receiver's input at which a mode works as it
// must, as data sheets give it.
type Sensitivity struct {
	Power unit.Level
	Rate  unit.BitRate // information bits, at which it was found, greater than 0
	Mode  string       // the mode that it was found in; empty: the receiver's only one
}

// Validate returns every fault of the receiver at once, its modes included.
func (r *Receiver) Validate() error {
	t := r.Transmitter
	t.EIRP, t.Power = nil, unit.LevelDBW(0)
	var faults []error
	if err := t.Validate(); err != nil {
		faults = append(faults, err)
	}
	ways := 0
	for _, given := range []bool{r.Noise != nil, r.GOverT != nil, r.Sensitivity != nil} {
		if given {
			ways++
		}
	}
	switch {
	case ways == 0:
		faults = append(faults, errors.New("the receiver's noise is not known; give noise, G/T, or a sensitivity with its data rate"))
	case ways > 1:
		faults = append(faults, errors.New("noise, G/T and sensitivity say the same in another way; give one of them"))
	case r.AntennaUnknown && r.GOverT == nil:
		faults = append(faults, errors.New("the receive antenna's pattern is missing; only a G/T can do without it"))
	}
	faults = append(faults, r.noiseFaults()...)
	return errors.Join(faults...)
}

func (r *Receiver) noiseFaults() []error {
	var faults []error
	check := func(what string, v, low, high float64, u string) {
		if !(v >= low && v <= high) {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: fmt.Sprintf("%g to %g %s", low, high, u)})
		}
	}
	if r.GOverT != nil {
		check("G/T", float64(*r.GOverT), -100, 100, "dB/K")
	}
	if s := r.Sensitivity; s != nil {
		check("sensitivity", s.Power.DBm(), -250, 100, "dBm")
		if v := s.Rate.BitsPerSecond(); !(v > 0 && v <= 1e15) {
			faults = append(faults, &unit.RangeError{Quantity: "data rate of the sensitivity", Value: v, Unit: "bit/s", Allowed: "greater than 0 and at most 1e15 bit/s", Next: "a sensitivity says nothing without the rate that it was found at"})
		}
		if _, err := r.sensitiveMode(); err != nil {
			faults = append(faults, err)
		}
	}
	if n := r.Noise; n != nil {
		probe := station.Antenna{Kind: station.Directive, Gain: station.Constant(0), Noise: n}
		if err := probe.Validate(); err != nil {
			faults = append(faults, err)
		}
		for _, t := range []*station.Tabulated{n.AntennaTemperature, n.SystemTemperature} {
			if t != nil && !t.IsConstant() {
				faults = append(faults, errors.New("the noise of a spacecraft's receiver is one figure; a table over the station's elevation has no meaning there"))
			}
		}
		if n.SpillOver != nil {
			faults = append(faults, errors.New("a spacecraft's antenna has no spill-over on the ground; give its antenna temperature"))
		}
	}
	return faults
}

// sensitiveMode is the mode that the sensitivity was found in.
func (r *Receiver) sensitiveMode() (modem.Resolved, error) {
	name := r.Sensitivity.Mode
	if name == "" && len(r.Modes) == 1 {
		name = r.Modes[0].Name
	}
	for i := range r.Modes {
		if r.Modes[i].Name == name {
			m, err := r.Modes[i].Resolve()
			if err != nil {
				return m, fmt.Errorf("sensitivity: mode %q: %w", name, err)
			}
			return m, nil
		}
	}
	switch {
	case len(r.Modes) == 0:
		return modem.Resolved{}, errors.New("a sensitivity needs the mode that it was found in, with its modulation and coding or its required Eb/N0")
	case name == "":
		return modem.Resolved{}, fmt.Errorf("a sensitivity holds for one mode, and there are %d; name the mode", len(r.Modes))
	}
	return modem.Resolved{}, fmt.Errorf("sensitivity: there is no mode %q", name)
}

// ImpliedNoise returns the system noise at the receiver's input at which a sensitivity
// S at a rate R is what it says, S / (k R e), with e the required Eb/N0 of its mode and
// the implementation loss: there the signal has just what the mode needs. So the margin
// of that mode is the received power over S, less 10 log10 of its rate over R, whatever
// its threshold. The receiver must be valid and have a sensitivity.
func (r *Receiver) ImpliedNoise() unit.Temperature {
	m, err := r.sensitiveMode()
	if err != nil {
		return unit.Temperature(math.NaN())
	}
	s := r.Sensitivity
	db := s.Power.DBW() - 10*math.Log10(s.Rate.BitsPerSecond()) - float64(m.Required) - float64(r.ImplementationLoss) - float64(unit.BoltzmannDB)
	return unit.Temperature(math.Pow(10, db/10))
}
