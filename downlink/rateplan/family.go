package rateplan

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

// Family is a set of codings and of symbol rates to choose from.
type Family struct {
	Rows []modem.Row // codings on modulations, one or more

	Rates     []unit.Frequency // symbol rates to choose from; empty: any from Low to High
	Low, High unit.Frequency
	Band      unit.Frequency // allotted; what is wider is left out; 0: any
	RollOff   float64        // of shaped pulses, 0 to 1
	Pilots    bool           // pilots are sent, in codings that know them

	Metric             modem.Metric // with ErrorRate; empty: each row's own
	ErrorRate          float64      // for which the codings' thresholds are asked; 0: each row's first
	ImplementationLoss unit.DB
	RequiredMargin     unit.DB
}

// member is a row with what it needs.
type member struct {
	row         modem.Row
	needES      float64 // Es/N0 with loss and margin, in decibels
	information float64 // bits a symbol, to which the required Eb/N0 belongs
	net         float64 // bits a symbol that are left for the user
	width       float64 // Hz of band for each symbol a second
	high        float64 // highest symbol rate that fits into the band
}

// members checks the family and returns its rows. All faults come at once.
func (f *Family) members() ([]member, error) {
	faults := f.faults()
	var out []member
	for _, row := range f.Rows {
		need, err := row.At(f.Metric, f.ErrorRate)
		if err != nil {
			faults = append(faults, err)
			continue
		}
		m := member{row: row, information: row.Efficiency(f.Pilots), net: row.NetEfficiency(f.Pilots), width: row.Modulation.WidthFactor(f.RollOff)}
		m.needES = float64(row.EsN0(need.EbN0) + f.ImplementationLoss + f.RequiredMargin)
		if m.high = f.High.Hertz(); len(f.Rates) > 0 {
			m.high = slices.Max(f.Rates).Hertz()
		}
		if f.Band > 0 {
			m.high = min(m.high, f.Band.Hertz()/m.width)
		}
		out = append(out, m)
	}
	return out, errors.Join(faults...)
}

func (f *Family) faults() []error {
	var out []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			out = append(out, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	rate := func(what string, v unit.Frequency) {
		check(what, v.Hertz(), "baud", "greater than 0 and at most 1e15 baud", v > 0 && v <= 1e15)
	}
	if len(f.Rows) == 0 {
		out = append(out, errors.New("no coding to choose from; give one or more"))
	}
	for _, v := range f.Rates {
		rate("symbol rate", v)
	}
	if len(f.Rates) == 0 {
		rate("lowest symbol rate", f.Low)
		rate("highest symbol rate", f.High)
		check("highest symbol rate", f.High.Hertz(), "baud", fmt.Sprintf("at least the lowest, %g baud", f.Low.Hertz()), !(f.High < f.Low))
	}
	check("allotted bandwidth", f.Band.Hertz(), "Hz", "0 (any) to 1e16 Hz", f.Band >= 0 && f.Band <= 1e16)
	check("roll-off", f.RollOff, "", "0 to 1", f.RollOff >= 0 && f.RollOff <= 1)
	check("implementation loss", float64(f.ImplementationLoss), "dB", "0 to 100 dB", f.ImplementationLoss >= 0 && f.ImplementationLoss <= 100)
	check("required margin", float64(f.RequiredMargin), "dB", "-100 to 100 dB", math.Abs(float64(f.RequiredMargin)) <= 100)
	return out
}

// mode returns the member's mode at a symbol rate. With pilots fewer information bits
// ride on a symbol that needs as much as before.
func (m *member) mode(symbolRate float64) Mode {
	return Mode{
		Name:       fmt.Sprintf("%s at %.6g baud", m.row.Name(), symbolRate),
		SymbolRate: unit.Frequency(symbolRate), InformationRate: unit.BitRate(symbolRate * m.information), NetRate: unit.BitRate(symbolRate * m.net),
		Bandwidth: unit.Frequency(symbolRate * m.width), NeedDBHz: m.needES + 10*math.Log10(symbolRate),
	}
}

// steps returns the symbol rates of the family: the list, or so many from the lowest to
// the highest, each as many times the one before.
func (f *Family) steps(n int) []float64 {
	var out []float64
	for _, r := range f.Rates {
		out = append(out, r.Hertz())
	}
	if len(out) > 0 {
		slices.Sort(out)
		return slices.Compact(out)
	}
	if f.High == f.Low {
		return []float64{f.Low.Hertz()}
	}
	for i := range n {
		out = append(out, f.Low.Hertz()*math.Pow(float64(f.High/f.Low), float64(i)/float64(n-1)))
	}
	return out
}

// Modes returns the modes of the family that fit into the band: every coding at every
// symbol rate of the list, or at steps rates from the lowest to the highest of the
// range. Modes that another surpasses are left out.
func (f *Family) Modes(steps int) ([]Mode, error) {
	members, err := f.members()
	if len(f.Rates) == 0 && (steps < 2 || steps > mostModes) {
		err = errors.Join(err, &unit.RangeError{Quantity: "steps of the symbol rate", Value: float64(steps), Allowed: fmt.Sprintf("2 to %d", mostModes)})
	}
	if err != nil {
		return nil, err
	}
	var out []Mode
	for _, rate := range f.steps(steps) {
		for i := range members {
			if rate <= members[i].high*(1+1e-12) {
				out = append(out, members[i].mode(rate))
			}
		}
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("no symbol rate of the plan fits into the band of %g MHz; give lower ones", f.Band.Hertz()/1e6)
	}
	return Unsurpassed(out), nil
}

// Unsurpassed returns the modes, by rising C/N0 that they need, without those for which
// another brings as much or more with no more C/N0. Of two equals the first stays.
func Unsurpassed(modes []Mode) []Mode {
	sorted := slices.Clone(modes)
	slices.SortStableFunc(sorted, func(a, b Mode) int {
		switch {
		case a.NeedDBHz != b.NeedDBHz:
			return sign(a.NeedDBHz - b.NeedDBHz)
		default:
			return sign(float64(b.NetRate - a.NetRate))
		}
	})
	out := sorted[:0]
	for _, m := range sorted {
		if len(out) == 0 || m.NetRate > out[len(out)-1].NetRate {
			out = append(out, m)
		}
	}
	return out
}

func sign(x float64) int {
	if x < 0 {
		return -1
	}
	return 1
}
