package scenario

import (
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

var modeKeys = []string{
	"name", "modulation", "coding", "data_rate_bps", "symbol_rate_baud",
	"required_eb_n0_db", "code_rate", "error_rate", "roll_off",
}

func (o object) modes() []modem.Mode {
	items := o.objects("modes", "modes", maxParts, modeKeys)
	called := names("mode", items)
	if !o.has("modes") {
		o.assume("modes left out: a carrier without data, so neither Eb/N0 nor margin")
	}
	var out []modem.Mode
	for i, it := range items {
		it.about = o.about + ", mode " + called[i]
		out = append(out, it.mode(called[i]))
	}
	return out
}

func (o object) mode(name string) modem.Mode {
	before := o.r.faults.count()
	m := modem.Mode{Name: name, Catalogue: o.r.catalogue}
	m.Modulation = o.needText("modulation", "a modulation, for instance qpsk")
	m.Coding = o.needText("coding", "a coding, none where there is none")
	which, given := o.exclusive("data_rate_bps", "symbol_rate_baud")
	switch {
	case !given:
		o.missing("data_rate_bps", "the rate of information bits, or symbol_rate_baud")
	case which == "data_rate_bps":
		m.DataRate = unit.BitRate(o.numberOr(which, bitsASecond, 0))
	default:
		m.SymbolRate = unit.Frequency(o.numberOr(which, above(0, 1e15, "baud"), 0))
	}
	if v, ok := o.number("required_eb_n0_db", span{low: -20, high: 100, unit: "dB"}); ok {
		required := unit.DB(v)
		m.RequiredEbN0 = &required
	}
	m.CodeRate = o.numberOr("code_rate", fraction, 0)
	m.ErrorRate = o.numberOr("error_rate", span{low: 0, high: 1, lowOpen: true, highOpen: true}, 0)
	if v, ok := o.number("roll_off", atLeast(0, 1, "")); ok {
		m.RollOff = &v
	} else if !o.has("roll_off") {
		o.assume("roll_off left out: %g for the occupied bandwidth", modem.DefaultRollOff)
	}
	if o.r.faults.count() == before && !o.r.codingsUnread {
		_, err := m.Resolve()
		o.addAll(o.node, "", err)
	}
	return m
}

// needText returns the text of a key that must be there, or "" with a fault.
func (o object) needText(key, what string) string {
	if !o.has(key) {
		o.missing(key, what)
		return ""
	}
	s, _ := o.text(key)
	return s
}
