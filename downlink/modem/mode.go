package modem

import (
	"errors"

	"slantwise/orbit/unit"
)

// Mode is a way in which a transmitter sends: modulation, coding and speed.
type Mode struct {
	Name       string
	Modulation string // "qpsk"
	Coding     string // "none", "ccsds-conv-1-2+rs-255-223"

	DataRate     unit.BitRate   // information bits, sync markers and headers not taken off; 0 where SymbolRate is given
	SymbolRate   unit.Frequency // symbols a second; 0 where DataRate is given
	RequiredEbN0 *unit.DB       // replaces the catalogue's threshold; nil: the catalogue's
	CodeRate     float64        // (0, 1], for a coding that the catalogue lacks; 0: the catalogue's
	ErrorRate    float64        // for which the threshold is asked of the catalogue; 0: the row's first threshold
	RollOff      *float64       // of the pulse shaping, [0, 1], for the bandwidth; nil: DefaultRollOff
	Pilots       bool           // pilots are sent, in codings that know them

	Catalogue *Catalogue // in which modulation and coding are looked up; nil: Standard
}

// DefaultRollOff is the roll-off of the pulse shaping where a mode gives none: the
// widest of the three in ETSI EN 302 307-1, section 5.4.4.
const DefaultRollOff = 0.35

func (m *Mode) catalogue() *Catalogue {
	if m.Catalogue != nil {
		return m.Catalogue
	}
	return Standard()
}

// faults returns what is wrong with the mode's own numbers.
func (m *Mode) faults() []error {
	var out []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			out = append(out, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	positive := func(v float64) bool { return v >= 0 && v <= largestRate }
	check("data rate", float64(m.DataRate), "bit/s", "greater than 0 and at most 1e15 bit/s", positive(float64(m.DataRate)))
	check("symbol rate", float64(m.SymbolRate), "baud", "greater than 0 and at most 1e15 baud", positive(float64(m.SymbolRate)))
	check("code rate", m.CodeRate, "", "greater than 0 and at most 1", m.CodeRate >= 0 && m.CodeRate <= 1)
	check("error rate", m.ErrorRate, "", "greater than 0 and less than 1", m.ErrorRate >= 0 && m.ErrorRate < 1)
	if m.RequiredEbN0 != nil {
		v := float64(*m.RequiredEbN0)
		check("required Eb/N0", v, "dB", "-20 to 100 dB", v >= -20 && v <= 100)
	}
	if m.RollOff != nil {
		out = append(out, checkRollOff(*m.RollOff))
	}
	if m.DataRate > 0 && m.SymbolRate > 0 {
		out = append(out, errors.New("data rate and symbol rate are both given; give one"))
	}
	return compact(out)
}

// compact drops the errors that are nil.
func compact(errs []error) []error {
	var out []error
	for _, err := range errs {
		if err != nil {
			out = append(out, err)
		}
	}
	return out
}
