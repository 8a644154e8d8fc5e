package scenario

import (
	"fmt"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink"
	"slantwise/orbit/unit"
)

var patternKeys = append([]string{"pattern", "peak_gain_dbi", "exponent", "back_lobe_dbi", "table", "table_file"}, mountingKeys...)

// pattern reads the pattern of a spacecraft's antenna and where it sits on the body.
func (o object) pattern() (downlink.Pattern, downlink.Body) {
	if !o.has("antenna") {
		o.missing("antenna", "the transmit antenna, for instance antenna: {pattern: isotropic}, or eirp_dbw in place of power and antenna")
		return downlink.Pattern{}, downlink.Body{}
	}
	a := o.child("antenna", patternKeys)
	a.about = o.about + ", antenna"
	return a.patternAlone(), a.mounting()
}

func (a object) patternAlone() downlink.Pattern {
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
	a.useless("with pattern: isotropic", "exponent", "back_lobe_dbi", "table", "table_file", "pattern_turn_deg")
	return downlink.Pattern{Kind: downlink.Isotropic, PeakGain: unit.DB(a.zeroLeftOut("peak_gain_dbi", gainDBi))}
}

func (o object) cosinePower() downlink.Pattern {
	o.useless("with pattern: cosine_power", "table", "table_file", "pattern_turn_deg")
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

const patternRow = "[angle off boresight in deg, gain in dBi] or [angle off boresight in deg, angle around it in deg, gain in dBi]"

// gainTable reads a pattern in one angle or in two, from the scenario or from a file.
func (o object) gainTable() downlink.Pattern {
	o.useless("with pattern: table", "peak_gain_dbi", "exponent", "back_lobe_dbi")
	p := downlink.Pattern{Kind: downlink.GainTable}
	which, given := o.exclusive("table", "table_file")
	switch {
	case !given:
		o.missing("table", "rows of "+patternRow+", or table_file")
		return p
	case which == "table_file":
		p = o.patternFile()
	default:
		p = o.patternRows()
	}
	if p.Kind == downlink.GainTable {
		o.useless("with a pattern in one angle", "pattern_turn_deg")
	}
	if !p.WholeSphere() {
		o.assume("the pattern's table ends short of 180 deg off boresight: beyond its end there is no gain, and a pass that needs one is refused")
	}
	return p
}

// patternRows reads the rows of a table, all with one angle or all with two.
func (o object) patternRows() downlink.Pattern {
	p := downlink.Pattern{Kind: downlink.GainTable}
	items := o.items("table", "rows of "+patternRow, maxRows)
	before := o.r.faults.count()
	var grid []downlink.PatternRow
	for i, row := range items {
		name := fmt.Sprintf("table[%d]", i)
		if row.Kind != tree.List || len(row.Items) < 2 || len(row.Items) > 3 {
			o.fault(row, name, "%s is not allowed; it must be %s", "", showRow(row), patternRow)
			continue
		}
		last := len(row.Items) - 1
		off, _ := o.numberAt(row.Items[0], name+"[0]", span{low: 0, high: 180, unit: "deg"})
		gain, _ := o.numberAt(row.Items[last], fmt.Sprintf("%s[%d]", name, last), gainDBi)
		if last == 2 {
			around, _ := o.numberAt(row.Items[1], name+"[1]", span{low: 0, high: 360, unit: "deg"})
			grid = append(grid, downlink.PatternRow{Off: unit.Angle(off) * unit.Degree, Around: unit.Angle(around) * unit.Degree, Gain: unit.DB(gain)})
			continue
		}
		switch n := len(p.Table); {
		case n == 0 && off != 0:
			o.fault(row, name, "the first angle is %g deg; it must be 0 deg", "give the gain on boresight first", off)
		case n > 0 && !(off > roundTo(p.Table[n-1].OffBoresight.Degrees(), 1e9)):
			o.fault(row, name, "angle %g deg does not rise over %g deg", "sort the rows by angle, each once", off, roundTo(p.Table[n-1].OffBoresight.Degrees(), 1e9))
		}
		p.Table = append(p.Table, downlink.PatternPoint{OffBoresight: unit.Angle(off) * unit.Degree, Gain: unit.DB(gain)})
	}
	if o.r.faults.count() > before || len(items) == 0 {
		return downlink.Pattern{}
	}
	if len(grid) == 0 {
		return p
	}
	if len(p.Table) > 0 {
		o.fault(o.get("table"), "table", "some rows have an angle around the boresight and some have none", "give it in all rows or in none")
		return downlink.Pattern{}
	}
	g, err := downlink.NewPatternGrid(grid)
	o.addAll(o.get("table"), "table", err)
	if err != nil {
		return downlink.Pattern{}
	}
	return downlink.Pattern{Kind: downlink.GainGrid, Grid: g}
}

// patternFile reads a pattern from a CSV file.
func (o object) patternFile() downlink.Pattern {
	name, ok := o.text("table_file")
	if !ok {
		return downlink.Pattern{}
	}
	f := o.file("table_file", name)
	if f == nil {
		return downlink.Pattern{}
	}
	defer f.Close()
	p, err := downlink.ReadPatternCSV(f)
	if err != nil {
		o.fault(o.get("table_file"), "table_file", "%s: %v", "", name, err)
		return downlink.Pattern{}
	}
	return p
}
