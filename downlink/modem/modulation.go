package modem

import (
	"fmt"
	"strconv"

	"slantwise/orbit/unit"
)

// Modulation is a modulation that the catalogue knows.
type Modulation struct {
	Name          string
	BitsPerSymbol int
	Width         float64 // Hz of band for each symbol a second; 0: by the roll-off of its pulses, 1 + roll-off
	What          string
}

// Shaped tells whether the pulses' roll-off decides how wide the signal is.
func (m Modulation) Shaped() bool { return m.Width == 0 }

// WidthFactor returns the Hz of band for each symbol a second. The roll-off, from 0 to
// 1, counts for shaped pulses: 1 + roll-off, the whole of a root-raised-cosine spectrum.
// Frequency modulations have theirs from Carson's rule, twice the sum of peak deviation
// and half the symbol rate, which is on the wide side.
func (m Modulation) WidthFactor(rollOff float64) float64 {
	if m.Shaped() {
		return 1 + rollOff
	}
	return m.Width
}

// OccupiedBandwidth returns the width of the signal at a symbol rate. Fails with a
// *unit.RangeError.
func (m Modulation) OccupiedBandwidth(symbolRate unit.Frequency, rollOff float64) (unit.Frequency, error) {
	if err := checkSymbolRate(symbolRate); err != nil {
		return 0, err
	}
	if err := checkRollOff(rollOff); err != nil {
		return 0, err
	}
	return unit.Frequency(symbolRate.Hertz() * m.WidthFactor(rollOff)), nil
}

// Fits tells whether the signal at a symbol rate is at most as wide as a band.
func (m Modulation) Fits(symbolRate unit.Frequency, rollOff float64, band unit.Frequency) (bool, error) {
	if !(band > 0 && band <= largestRate) {
		return false, &unit.RangeError{Quantity: "allotted bandwidth", Value: band.Hertz(), Unit: "Hz", Allowed: "greater than 0 and at most 1e15 Hz"}
	}
	width, err := m.OccupiedBandwidth(symbolRate, rollOff)
	return err == nil && width <= band, err
}

// largestRate bounds symbol rates, data rates and bandwidths, far from what is built.
const largestRate = 1e15

func checkSymbolRate(s unit.Frequency) error {
	if !(s > 0 && s <= largestRate) {
		return &unit.RangeError{Quantity: "symbol rate", Value: s.Hertz(), Unit: "baud", Allowed: "greater than 0 and at most 1e15 baud"}
	}
	return nil
}

func checkRollOff(a float64) error {
	if !(a >= 0 && a <= 1) {
		return &unit.RangeError{Quantity: "roll-off", Value: a, Allowed: "0 to 1"}
	}
	return nil
}

func readModulations(text string) ([]Modulation, error) {
	rows, err := readTable(text, "modulation,bits_per_symbol,width_per_symbol,what")
	if err != nil {
		return nil, err
	}
	out := make([]Modulation, 0, len(rows))
	for i, r := range rows {
		m := Modulation{Name: r[0], What: r[3]}
		if m.BitsPerSymbol, err = strconv.Atoi(r[1]); err != nil || m.BitsPerSymbol < 1 {
			return nil, fmt.Errorf("row %d (%s): %q bits a symbol is not a whole number above 0", i+3, r[0], r[1])
		}
		if r[2] != "shaped" {
			if m.Width, err = strconv.ParseFloat(r[2], 64); err != nil || !(m.Width > 0 && m.Width <= 1000) {
				return nil, fmt.Errorf("row %d (%s): %q Hz/baud is neither shaped nor a number above 0 and at most 1000", i+3, r[0], r[2])
			}
		}
		out = append(out, m)
	}
	return out, nil
}
