package scenario

import (
	"fmt"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

var patternKeys = []string{"pattern", "peak_gain_dbi", "exponent", "back_lobe_dbi", "table"}

// pattern reads the pattern of a transmit antenna.
func (o object) pattern() downlink.Pattern {
	if !o.has("antenna") {
		o.missing("antenna", "the transmit antenna, for instance antenna: {pattern: isotropic}, or eirp_dbw in place of power and antenna")
		return downlink.Pattern{}
	}
	a := o.child("antenna", patternKeys)
	a.about = o.about + ", antenna"
	word, given := a.word("pattern", "isotropic", "cosine_power", "table")
	if !a.has("pattern") {
		a.missing("pattern", "isotropic, cosine_power or table")
	}
	if !given {
		return downlink.Pattern{}
	}
	switch word {
	case "cosine_power":
		return a.cosinePower()
	case "table":
		return a.gainTable()
	}
	a.useless("with pattern: isotropic", "exponent", "back_lobe_dbi", "table")
	return downlink.Pattern{Kind: downlink.Isotropic, PeakGain: unit.DB(a.zeroLeftOut("peak_gain_dbi", gainDBi))}
}

func (o object) cosinePower() downlink.Pattern {
	o.useless("with pattern: cosine_power", "table")
	p := downlink.Pattern{Kind: downlink.CosinePower}
	p.PeakGain = unit.DB(o.required("peak_gain_dbi", gainDBi, "the gain on boresight"))
	p.Exponent = o.required("exponent", atLeast(0, 1e4, ""), "the exponent n of cos^n, the power gain's")
	if v, ok := o.number("back_lobe_dbi", gainDBi); ok {
		back := unit.DB(v)
		p.BackLobe = &back
	} else if !o.has("back_lobe_dbi") {
		o.assume("back_lobe_dbi left out: nothing is radiated beyond 90 deg off boresight")
	}
	return p
}

func (o object) gainTable() downlink.Pattern {
	o.useless("with pattern: table", "peak_gain_dbi", "exponent", "back_lobe_dbi")
	p := downlink.Pattern{Kind: downlink.GainTable}
	if !o.has("table") {
		o.missing("table", "rows of [angle off boresight in deg, gain in dBi]")
		return p
	}
	rows, ok := o.pairs("table", "[angle off boresight in deg, gain in dBi]", span{low: 0, high: 180, unit: "deg"}, gainDBi)
	if !ok {
		return p
	}
	at := o.get("table").Items
	for i, row := range rows {
		switch {
		case i == 0 && row[0] != 0:
			o.fault(at[i], "table[0]", "the first angle is %g deg; it must be 0 deg", "give the gain on boresight first", row[0])
		case i > 0 && !(row[0] > rows[i-1][0]):
			o.fault(at[i], fmt.Sprintf("table[%d]", i), "angle %g deg does not rise over %g deg", "sort the rows by angle, each once", row[0], rows[i-1][0])
		}
		p.Table = append(p.Table, downlink.PatternPoint{OffBoresight: unit.Angle(row[0]) * unit.Degree, Gain: unit.DB(row[1])})
	}
	if last := rows[len(rows)-1][0]; last < 180 {
		o.assume("the table ends at %g deg off boresight: its last gain holds from there on", last)
	}
	return p
}
