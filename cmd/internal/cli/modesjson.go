package cli

import "math"

// modesAnswer is the JSON of modes. Fields get added, not renamed.
type modesAnswer struct {
	ErrorRate     rate       `json:"error_rate"` // as asked for; null: each row's own
	SymbolRate    number     `json:"symbol_rate_baud"`
	RollOff       number     `json:"roll_off"`
	Pilots        bool       `json:"pilots"`
	Modes         []modeJSON `json:"modes"`
	EnergyPerBit  string     `json:"eb_n0_is"`
	WidthOfSignal string     `json:"width_is"`
}

type modeJSON struct {
	Name       string  `json:"name"`
	Modulation string  `json:"modulation"`
	Coding     string  `json:"coding"`
	CodeRate   number  `json:"code_rate"`
	RateText   string  `json:"code_rate_fraction"`
	Bits       int     `json:"bits_per_symbol"`
	Efficiency number  `json:"spectral_efficiency_bit_per_symbol"`
	EbN0       number  `json:"required_eb_n0_db"`
	EsN0       number  `json:"required_es_n0_db"`
	Rate       rate    `json:"error_rate"`
	Metric     *string `json:"metric"`
	Provenance *string `json:"provenance"`
	Source     string  `json:"source"`

	Net         number     `json:"net_efficiency_bit_per_symbol"`
	Width       number     `json:"width_hz_per_baud"`
	Shannon     number     `json:"shannon_eb_n0_db"`
	Gap         number     `json:"over_shannon_db"`
	NetRate     number     `json:"net_data_rate_bps"`
	WidthHz     number     `json:"occupied_bandwidth_hz"`
	Frame       *frameJSON `json:"frame"`
	Curves      []knownTo  `json:"curves"`
	Explanation string     `json:"modulation_is"`
}

type frameJSON struct {
	Information   number `json:"information_bits"`
	Headers       number `json:"header_bits"`
	Sent          number `json:"sent_bits"`
	Marker        number `json:"marker_bits"`
	HeaderSymbols number `json:"header_symbols"`
	Charged       bool   `json:"headers_charged_to_eb_n0"`
	Provenance    string `json:"provenance"`
	Source        string `json:"source"`
}

// knownTo says over which error rates a curve is known.
type knownTo struct {
	Metric     string `json:"metric"`
	Low        rate   `json:"from_error_rate"`
	High       rate   `json:"to_error_rate"`
	Provenance string `json:"provenance"`
	Source     string `json:"source"`
}

// rate is an error rate in JSON: six digits, null where it does not exist.
type rate float64

// MarshalJSON writes the error rate, or null.
func (r rate) MarshalJSON() ([]byte, error) {
	if s := errorRateText(float64(r)); s != "" {
		return []byte(s), nil
	}
	return []byte("null"), nil
}

func (o *modesOptions) answer(rows []modeRow) modesAnswer {
	asked, speed := math.NaN(), math.NaN()
	if o.errorRate > 0 {
		asked = o.errorRate
	}
	if o.symbolRate > 0 {
		speed = o.symbolRate
	}
	a := modesAnswer{ErrorRate: rate(asked), SymbolRate: num(speed, 3), RollOff: num(o.rollOff, 4), Pilots: o.pilots, Modes: []modeJSON{},
		EnergyPerBit: "per information bit, code rate charged, without implementation loss", WidthOfSignal: "1 + roll-off of shaped pulses, Carson's rule else"}
	for i := range rows {
		a.Modes = append(a.Modes, o.mode(&rows[i], speed))
	}
	return a
}

func (o *modesOptions) mode(m *modeRow, speed float64) modeJSON {
	ebn0, esn0, gap, errorRate := m.figures()
	j := modeJSON{
		Name: m.Name(), Modulation: m.Modulation.Name, Coding: m.Coding.Name, CodeRate: num(m.Coding.Rate, 6), RateText: m.Coding.RateText,
		Bits: m.Modulation.BitsPerSymbol, Efficiency: num(m.SpectralEfficiency(), 6), EbN0: num(ebn0, 4), EsN0: num(esn0, 4), Rate: rate(errorRate),
		Metric: orNull(string(m.need.Metric)), Provenance: orNull(m.need.Provenance), Source: m.origin(), Net: num(m.NetEfficiency(o.pilots), 6),
		Width: num(m.Modulation.WidthFactor(o.rollOff), 4), Shannon: num(float64(m.ShannonEbN0()), 4), Gap: num(gap, 4),
		NetRate: num(speed*m.NetEfficiency(o.pilots), 3), WidthHz: num(speed*m.Modulation.WidthFactor(o.rollOff), 3), Curves: []knownTo{}, Explanation: m.Modulation.What,
	}
	if f := m.Coding.Frame; f.InformationBits > 0 {
		j.Frame = &frameJSON{num(f.InformationBits, 3), num(f.HeaderBits, 3), num(f.SentBits, 3), num(f.MarkerBits, 3), num(f.HeaderSymbols, 3), f.Charged, f.Provenance, f.Source}
	}
	for _, c := range m.Curves {
		j.Curves = append(j.Curves, knownTo{string(c.Metric), rate(c.Low), rate(c.High), c.Provenance, c.Source})
	}
	return j
}
