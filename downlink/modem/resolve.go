package modem

import (
	"errors"
	"fmt"

	"slantwise/orbit/unit"
)

// Resolved is a mode with everything that the catalogue adds to it.
type Resolved struct {
	Mode

	Required        unit.DB // Eb/N0, the code's own
	RequiredSource  string
	ErrorRateText   string         // "1e-05 bit error rate"; empty where the threshold is the mode's own
	BitsPerSymbol   int            // of the modulation
	CodeRate        float64        // 0: not known
	InformationRate unit.BitRate   // 0: the mode gives no speed
	Symbols         unit.Frequency // a second; 0: not known
	Shaping         float64        // the roll-off that counts
	ShapingGiven    bool
}

// Resolve looks a mode up in the catalogue. The information rate is the data rate,
// or symbol rate × bits a symbol × code rate.
//
// A coding that the catalogue lacks is accepted with RequiredEbN0, when the code rate
// or the data rate is given as well; else the error is an *UnknownError that lists
// the nearest names. All faults come at once.
func (m Mode) Resolve() (Resolved, error) {
	r := Resolved{Mode: m, CodeRate: m.CodeRate, Shaping: DefaultRollOff}
	faults := m.faults()
	if m.RollOff != nil {
		r.Shaping, r.ShapingGiven = *m.RollOff, true
	}
	modulation, err := FindModulation(m.Modulation)
	if err != nil {
		return Resolved{}, errors.Join(append(faults, err)...)
	}
	r.BitsPerSymbol = modulation.BitsPerSymbol
	if err := r.lookUp(); err != nil {
		faults = append(faults, err)
	}
	if len(faults) > 0 {
		return Resolved{}, errors.Join(faults...)
	}
	r.setRates()
	return r, nil
}

// lookUp fills the threshold and the code rate.
func (r *Resolved) lookUp() error {
	e, err := Find(r.Modulation, r.Coding, r.ErrorRate)
	if err != nil {
		if r.RequiredEbN0 == nil {
			return err
		}
		if r.Mode.CodeRate == 0 && r.DataRate == 0 {
			return fmt.Errorf("coding %q is not in the catalogue; beside its required Eb/N0 give its code rate or the data rate", r.Coding)
		}
		r.Required, r.RequiredSource = *r.RequiredEbN0, "scenario"
		return nil
	}
	if r.CodeRate == 0 {
		r.CodeRate = e.CodeRate
	}
	if r.RequiredEbN0 != nil {
		r.Required, r.RequiredSource = *r.RequiredEbN0, "scenario"
		return nil
	}
	r.Required, r.RequiredSource = e.RequiredEbN0, e.Source
	r.ErrorRateText = formatRate(e.ErrorRate) + " " + e.Metric
	return nil
}

func (r *Resolved) setRates() {
	perSymbol := float64(r.BitsPerSymbol) * r.CodeRate
	r.InformationRate, r.Symbols = r.DataRate, r.SymbolRate
	switch {
	case r.SymbolRate > 0:
		r.InformationRate = unit.BitRate(r.SymbolRate.Hertz() * perSymbol)
	case r.DataRate > 0 && perSymbol > 0:
		r.Symbols = unit.Frequency(r.DataRate.BitsPerSecond() / perSymbol)
	}
}

// BandwidthRate returns the information rate that fits into a bandwidth, b/(1+roll-off)
// symbols a second; ok is false when the code rate is not known.
func (r *Resolved) BandwidthRate(b unit.Frequency) (rate unit.BitRate, ok bool) {
	if r.CodeRate == 0 {
		return 0, false
	}
	return unit.BitRate(b.Hertz() / (1 + r.Shaping) * float64(r.BitsPerSymbol) * r.CodeRate), true
}

// faults returns what is wrong with the mode's own numbers.
func (m Mode) faults() []error {
	var out []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			out = append(out, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	positive := func(v float64) bool { return v >= 0 && v <= 1e15 }
	check("data rate", float64(m.DataRate), "bit/s", "greater than 0 and at most 1e15 bit/s", positive(float64(m.DataRate)))
	check("symbol rate", float64(m.SymbolRate), "baud", "greater than 0 and at most 1e15 baud", positive(float64(m.SymbolRate)))
	check("code rate", m.CodeRate, "", "greater than 0 and at most 1", m.CodeRate >= 0 && m.CodeRate <= 1)
	check("error rate", m.ErrorRate, "", "greater than 0 and less than 1", m.ErrorRate >= 0 && m.ErrorRate < 1)
	if m.RequiredEbN0 != nil {
		v := float64(*m.RequiredEbN0)
		check("required Eb/N0", v, "dB", "-20 to 100 dB", v >= -20 && v <= 100)
	}
	if m.RollOff != nil {
		check("roll-off", *m.RollOff, "", "0 to 1", *m.RollOff >= 0 && *m.RollOff <= 1)
	}
	if m.DataRate > 0 && m.SymbolRate > 0 {
		out = append(out, errors.New("data rate and symbol rate are both given; give one"))
	}
	return out
}
