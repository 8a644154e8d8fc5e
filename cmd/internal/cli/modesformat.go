package cli

import (
	"fmt"
	"math"
	"strconv"
)

var modeHeads = []string{"name", "modulation", "coding", "code_rate", "bits_per_symbol", "spectral_efficiency_bit_per_symbol",
	"required_eb_n0_db", "required_es_n0_db", "error_rate", "source"}

// figures returns the required Eb/N0 and Es/N0, Shannon's gap and the error rate, NaN
// where the row does not know them.
func (m *modeRow) figures() (ebn0, esn0, gap, rate float64) {
	if m.remark != "" {
		return math.NaN(), math.NaN(), math.NaN(), math.NaN()
	}
	return float64(m.need.EbN0), float64(m.EsN0(m.need.EbN0)), float64(m.ShannonGap(m.need.EbN0)), m.need.ErrorRate
}

// origin says what the error rate counts, how the figure is known and from where.
func (m *modeRow) origin() string {
	if m.remark != "" {
		return m.remark
	}
	return fmt.Sprintf("%s, %s: %s", m.need.Metric, m.need.Provenance, m.need.Source)
}

// errorRateText writes an error rate with as few digits as it has.
func errorRateText(rate float64) string {
	if math.IsNaN(rate) {
		return ""
	}
	return strconv.FormatFloat(rate, 'g', 6, 64)
}

func modesCSV(env *Env, rows []modeRow) error {
	return writeCSV(env.Out, modeHeads, func(yield func([]string) bool) {
		for i := range rows {
			m := &rows[i]
			ebn0, esn0, _, rate := m.figures()
			if !yield([]string{
				m.Name(), m.Modulation.Name, m.Coding.Name, fixed(m.Coding.Rate, 6), strconv.Itoa(m.Modulation.BitsPerSymbol),
				fixed(m.SpectralEfficiency(), 6), fixed(ebn0, 3), fixed(esn0, 3), errorRateText(rate), m.origin(),
			}) {
				return
			}
		}
	})
}

func (o *modesOptions) table(env *Env, rows []modeRow) error {
	columns := []column{
		textColumn("modulation"), textColumn("coding"), numberColumn("code rate"), numberColumn("bit/symbol"), numberColumn("net bit/symbol"),
		numberColumn("Eb/N0 dB"), numberColumn("Es/N0 dB"), numberColumn("over Shannon dB"), numberColumn("error rate"), textColumn("of"),
	}
	if o.symbolRate > 0 {
		columns = append(columns, numberColumn("net bit/s"), numberColumn("width MHz"))
	}
	columns = append(columns, textColumn("known"), textColumn("source"))
	table := make([][]string, len(rows))
	for i := range rows {
		m := &rows[i]
		ebn0, esn0, gap, rate := m.figures()
		line := []string{
			m.Modulation.Name, m.Coding.Name, m.Coding.RateText, fixed(m.SpectralEfficiency(), 4), fixed(m.NetEfficiency(o.pilots), 4),
			fixed(ebn0, 2), fixed(esn0, 2), fixed(gap, 2), errorRateText(rate), string(m.need.Metric),
		}
		if o.symbolRate > 0 {
			line = append(line, fixed(o.symbolRate*m.NetEfficiency(o.pilots), 0), fixed(o.width(&m.Row).Megahertz(), 6))
		}
		table[i] = append(line, m.need.Provenance, m.need.Source)
	}
	return writeTable(env.Out, env.outWidth(), columns, table)
}
