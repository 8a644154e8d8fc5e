package rateplan

import (
	"errors"
	"fmt"
	"math"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

// Mode is a way of sending as the plan needs it.
type Mode struct {
	Name            string
	SymbolRate      unit.Frequency // 0: not known
	InformationRate unit.BitRate   // to which the required Eb/N0 belongs; greater than 0
	NetRate         unit.BitRate   // of the user's bits; greater than 0, at most the information rate
	Bandwidth       unit.Frequency // occupied; 0: not known
	NeedDBHz        float64        // C/N0 that it needs, implementation loss and required margin included
}

// NewMode returns the mode of a modem's mode. The C/N0 that it needs is the required
// Eb/N0 plus implementation loss, required margin and 10 log of the information rate.
func NewMode(r modem.Resolved, implementationLoss, requiredMargin unit.DB) (Mode, error) {
	if r.InformationRate == 0 {
		return Mode{}, fmt.Errorf("mode %q has neither data rate nor symbol rate; give one of them", r.Name)
	}
	m := Mode{Name: r.Name, SymbolRate: r.Symbols, InformationRate: r.InformationRate, NetRate: r.NetRate, Bandwidth: r.Bandwidth}
	m.NeedDBHz = float64(r.Required+implementationLoss+requiredMargin) + 10*math.Log10(r.InformationRate.BitsPerSecond())
	return m, m.check()
}

func (m *Mode) check() error {
	fault := func(what string, v float64, u, allowed string) error {
		return fmt.Errorf("mode %q: %w", m.Name, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
	}
	switch rate, net := m.InformationRate.BitsPerSecond(), m.NetRate.BitsPerSecond(); {
	case !(rate > 0 && rate <= 1e15):
		return fault("information rate", rate, "bit/s", "greater than 0 and at most 1e15 bit/s")
	case !(net > 0 && net <= rate*(1+1e-12)):
		return fault("net rate", net, "bit/s", fmt.Sprintf("greater than 0 and at most the information rate, %g bit/s", rate))
	case !(m.SymbolRate >= 0 && m.SymbolRate <= 1e15):
		return fault("symbol rate", m.SymbolRate.Hertz(), "baud", "0 (not known) to 1e15 baud")
	case !(m.Bandwidth >= 0 && m.Bandwidth <= 1e16):
		return fault("bandwidth", m.Bandwidth.Hertz(), "Hz", "0 (not known) to 1e16 Hz")
	case !(math.Abs(m.NeedDBHz) <= 1000):
		return fault("required C/N0", m.NeedDBHz, "dBHz", "-1000 to 1000 dBHz")
	}
	return nil
}

// mostModes bounds a list of modes.
const mostModes = 4096

// checkModes finds all that is wrong with a list of modes, for a band (0: any).
func checkModes(modes []Mode, band unit.Frequency) error {
	if len(modes) == 0 || len(modes) > mostModes {
		return fmt.Errorf("%d modes; give 1 to %d", len(modes), mostModes)
	}
	var faults []error
	seen := map[string]bool{}
	for i := range modes {
		m := &modes[i]
		if err := m.check(); err != nil {
			faults = append(faults, err)
		}
		if seen[m.Name] {
			faults = append(faults, fmt.Errorf("two modes are named %q; give each a name of its own", m.Name))
		}
		seen[m.Name] = true
		if band > 0 && m.Bandwidth > band {
			faults = append(faults, fmt.Errorf("mode %q takes %.6g MHz, more than the allotted %.6g MHz; leave it out or lower its symbol rate", m.Name, m.Bandwidth.Megahertz(), band.Megahertz()))
		}
	}
	return errors.Join(faults...)
}
