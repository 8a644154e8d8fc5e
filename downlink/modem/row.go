package modem

import (
	"math"

	"slantwise/orbit/unit"
)

// Row is a row of the catalogue: a coding on a modulation.
type Row struct {
	Modulation Modulation
	Coding     Coding
	Thresholds []Threshold // one or more; the first counts where no error rate is named
	Curves     []Curve     // may be empty; the first of a metric that reaches an error rate counts
}

// Name returns "qpsk ccsds-ldpc-4-5".
func (r *Row) Name() string { return r.Modulation.Name + " " + r.Coding.Name }

// SpectralEfficiency returns information bits a symbol: bits a symbol times code rate,
// with the headers taken off where the coding's standard charges them.
func (r *Row) SpectralEfficiency() float64 { return r.Efficiency(false) }

// Efficiency is the spectral efficiency with or without pilots, in codings that know them.
func (r *Row) Efficiency(pilots bool) float64 {
	if f := r.Coding.Frame; f.Charged {
		return f.net() / f.symbols(r.Modulation.BitsPerSymbol, pilots)
	}
	return float64(r.Modulation.BitsPerSymbol) * r.Coding.Rate
}

// EsN0 returns the energy of a symbol over the noise density for an Eb/N0.
func (r *Row) EsN0(ebn0 unit.DB) unit.DB {
	return ebn0 + unit.DB(10*math.Log10(r.SpectralEfficiency()))
}

// NetEfficiency returns the bits a symbol that are left for the user, after coding, sync
// markers, frame headers and, where they are sent, pilots. Without a known frame
// it is the spectral efficiency.
func (r *Row) NetEfficiency(pilots bool) float64 {
	f := r.Coding.Frame
	if f.InformationBits == 0 {
		return r.SpectralEfficiency()
	}
	return f.net() / f.symbols(r.Modulation.BitsPerSymbol, pilots)
}

// NetRate returns the rate of the user's bits at a symbol rate. Fails with a
// *unit.RangeError.
func (r *Row) NetRate(symbolRate unit.Frequency, pilots bool) (unit.BitRate, error) {
	if err := checkSymbolRate(symbolRate); err != nil {
		return 0, err
	}
	return unit.BitRate(symbolRate.Hertz() * r.NetEfficiency(pilots)), nil
}

// SymbolRate returns the symbol rate that carries a rate of the user's bits. Fails with
// a *unit.RangeError.
func (r *Row) SymbolRate(net unit.BitRate, pilots bool) (unit.Frequency, error) {
	if !(net > 0 && net <= largestRate) {
		return 0, &unit.RangeError{Quantity: "data rate", Value: net.BitsPerSecond(), Unit: "bit/s", Allowed: "greater than 0 and at most 1e15 bit/s"}
	}
	return unit.Frequency(net.BitsPerSecond() / r.NetEfficiency(pilots)), nil
}

// ShannonEbN0 returns the least Eb/N0 with which any coding could carry the row's
// information: (2^η - 1)/η, with η information bits a second and hertz (C. E. Shannon,
// 1949). The band is as wide as the symbol rate; for a frequency modulation as its
// occupied bandwidth. A bit error rate of 1e-5 lowers it by less than 0.001 dB.
func (r *Row) ShannonEbN0() unit.DB {
	density := r.SpectralEfficiency()
	if !r.Modulation.Shaped() {
		density /= r.Modulation.Width
	}
	return unit.DB(10 * math.Log10(math.Expm1(density*math.Ln2)/density))
}

// ShannonGap returns how far an Eb/N0 lies above Shannon's bound.
func (r *Row) ShannonGap(ebn0 unit.DB) unit.DB { return ebn0 - r.ShannonEbN0() }
