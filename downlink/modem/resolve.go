package modem

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Resolved is a mode with everything that the catalogue adds to it.
type Resolved struct {
	Mode

	Required        unit.DB // Eb/N0, the code's own
	RequiredSource  string
	ErrorRateText   string         // "1e-05 bit error rate"; empty where the threshold is the mode's own
	BitsPerSymbol   int            // of the modulation
	CodeRate        float64        // information bits to sent bits, charged headers and pilots taken off; 0: not known
	InformationRate unit.BitRate   // 0: the mode gives no speed
	NetRate         unit.BitRate   // of the user's bits, after sync markers and frame headers; the information rate where no frame is known
	Symbols         unit.Frequency // a second; 0: not known
	Bandwidth       unit.Frequency // occupied; 0: not known
	Shaping         float64        // the roll-off that counts
	ShapingGiven    bool
	Row             *Row // of the catalogue; nil: the catalogue lacks the coding

	width float64 // Hz of band for each symbol a second
}

// Resolve looks a mode up in its catalogue. The information rate is the data rate,
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
	modulation, err := m.catalogue().FindModulation(m.Modulation)
	if err != nil {
		return Resolved{}, errors.Join(append(faults, err)...)
	}
	r.BitsPerSymbol, r.width = modulation.BitsPerSymbol, modulation.WidthFactor(r.Shaping)
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
	row, err := r.catalogue().Find(r.Modulation, r.Coding)
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
	r.Row = row
	if r.Pilots && !row.Coding.Frame.hasPilots() {
		return fmt.Errorf("coding %q has no pilots; leave them out", r.Coding)
	}
	if r.CodeRate == 0 {
		r.CodeRate = row.Efficiency(r.Pilots) / float64(r.BitsPerSymbol)
	}
	if r.RequiredEbN0 != nil {
		r.Required, r.RequiredSource = *r.RequiredEbN0, "scenario"
		return nil
	}
	need, err := row.At("", r.ErrorRate)
	if err != nil {
		return err
	}
	// Pilots take energy from the information; a symbol needs what it needs.
	pilots := 10 * math.Log10(row.SpectralEfficiency()/row.Efficiency(r.Pilots))
	r.Required, r.RequiredSource, r.ErrorRateText = need.EbN0+unit.DB(pilots), need.Source, need.String()
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
	r.NetRate = r.InformationRate
	if r.Row != nil {
		r.NetRate *= unit.BitRate(r.Row.NetEfficiency(r.Pilots) / r.Row.Efficiency(r.Pilots))
	}
	r.Bandwidth = unit.Frequency(r.Symbols.Hertz() * r.width)
}

// BandwidthRate returns the information rate that fits into a bandwidth; ok is false
// when the code rate is not known.
func (r *Resolved) BandwidthRate(b unit.Frequency) (rate unit.BitRate, ok bool) {
	if r.CodeRate == 0 {
		return 0, false
	}
	return unit.BitRate(b.Hertz() / r.width * float64(r.BitsPerSymbol) * r.CodeRate), true
}
