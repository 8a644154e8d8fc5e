package modem

import (
	"fmt"
	"strconv"
)

// Frame is how a coding packs information: what goes into a frame, what is sent of it,
// and what is sent beside it. Sent bits may be fractions of one on the average, where a
// punctured code does not end with the frame.
type Frame struct {
	InformationBits float64 // taken in by the coding for a frame, headers among them; 0: no frame is known
	HeaderBits      float64 // of the information bits, for frame headers and checksums
	SentBits        float64 // coded bits of a frame
	MarkerBits      float64 // sent beside the coded bits: sync marker, flags, stuffed bits
	HeaderSymbols   float64 // symbols sent ahead of each frame
	Charged         bool    // headers are charged to efficiency and Eb/N0, as the coding's own standard does
	Provenance      string  // of the figures above: as in Threshold, or "memory"
	Source          string
}

// Pilots of DVB-S2: 36 symbols after every 16 slots of 90 symbols, but not after the
// last slot (ETSI EN 302 307-1, section 5.5.3).
const (
	pilotSymbols = 36
	pilotSpacing = 16 * slotSymbols
	slotSymbols  = 90
)

// hasPilots tells whether pilots may be sent; frames that begin with a header in
// symbols are those of DVB-S2.
func (f Frame) hasPilots() bool { return f.HeaderSymbols > 0 }

// symbols returns the symbols of a frame with everything that is sent beside it.
func (f Frame) symbols(bitsPerSymbol int, pilots bool) float64 {
	body := (f.SentBits + f.MarkerBits) / float64(bitsPerSymbol)
	n := body + f.HeaderSymbols
	if pilots && f.hasPilots() {
		n += pilotSymbols * float64(int((body-1)/pilotSpacing))
	}
	return n
}

// net returns the information bits of a frame without its headers.
func (f Frame) net() float64 { return f.InformationBits - f.HeaderBits }

func (f Frame) check() error {
	good := f.InformationBits >= 0 && f.HeaderBits >= 0 && f.MarkerBits >= 0 && f.HeaderSymbols >= 0 && f.net() >= 0 &&
		f.InformationBits <= 1e9 && f.SentBits <= 1e9 && f.MarkerBits <= 1e9 && f.HeaderSymbols <= 1e9
	switch {
	case !good:
		return fmt.Errorf("frame of %g information bits with %g in headers, %g sent and %g beside them, %g symbols ahead: each must be 0 to 1e9 and the headers at most the information",
			f.InformationBits, f.HeaderBits, f.SentBits, f.MarkerBits, f.HeaderSymbols)
	case f.InformationBits > 0 && !(f.SentBits >= f.InformationBits && f.net() > 0):
		return fmt.Errorf("frame of %g information bits, %g of them in headers, as %g sent bits: some information must be left and at least as many bits be sent", f.InformationBits, f.HeaderBits, f.SentBits)
	}
	return nil
}

// Coding is a coding with its frame.
type Coding struct {
	Name     string
	RateText string  // as a fraction, "223/510"
	Rate     float64 // of the code by itself, (0, 1]
	Frame    Frame
}

// codingRow is a row of codings.csv: a coding with the modulations that carry it.
type codingRow struct {
	Coding
	modulations []string
}

func readCodings(text string) ([]codingRow, error) {
	rows, err := readTable(text, "coding,modulations,code_rate,information_bits,sent_bits,marker_bits,header_bits,header_symbols,charged,known,source")
	if err != nil {
		return nil, err
	}
	out := make([]codingRow, 0, len(rows))
	for i, r := range rows {
		c := codingRow{Coding: Coding{Name: r[0], RateText: r[2]}, modulations: words(r[1])}
		c.Frame = Frame{Charged: r[8] == "yes", Provenance: r[9], Source: r[10]}
		if c.Rate, err = fraction(r[2]); err != nil || !(c.Rate > 0 && c.Rate <= 1) {
			return nil, fmt.Errorf("row %d (%s): the code rate %q is no fraction above 0 and at most 1", i+3, r[0], r[2])
		}
		for j, to := range []*float64{&c.Frame.InformationBits, &c.Frame.SentBits, &c.Frame.MarkerBits, &c.Frame.HeaderBits, &c.Frame.HeaderSymbols} {
			if *to, err = strconv.ParseFloat(r[3+j], 64); err != nil {
				return nil, fmt.Errorf("row %d (%s): %q is not a number", i+3, r[0], r[3+j])
			}
		}
		if err := c.Frame.check(); err != nil {
			return nil, fmt.Errorf("row %d (%s): %w", i+3, r[0], err)
		}
		out = append(out, c)
	}
	return out, nil
}
