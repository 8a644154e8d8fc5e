package modem

import "slantwise/orbit/unit"

// Mode is a way in which a transmitter sends: modulation, coding and speed.
type Mode struct {
	Name       string
	Modulation string // "qpsk"
	Coding     string // "none", "ccsds-conv-1-2+rs-255-223"

	DataRate     unit.BitRate   // information bits; 0 where SymbolRate is given
	SymbolRate   unit.Frequency // symbols a second; 0 where DataRate is given
	RequiredEbN0 *unit.DB       // replaces the catalogue's threshold; nil: the catalogue's
	CodeRate     float64        // (0, 1], for a coding that the catalogue lacks; 0: the catalogue's
	ErrorRate    float64        // picks among the catalogue's rows for the code; 0: the code's first
	RollOff      *float64       // of the pulse shaping, [0, 1], for the bandwidth; nil: DefaultRollOff
}

// DefaultRollOff is the roll-off of the pulse shaping where a mode gives none: the
// widest of the three in ETSI EN 302 307-1, section 5.4.4.
const DefaultRollOff = 0.35
