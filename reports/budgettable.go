package reports

import (
	"math"
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// budgetView is a table with a column for each instant.
type budgetView struct {
	Name   string // what the table holds, for those who hear it
	Corner string // heading of the first column
	Heads  []string
	Parts  []budgetPart
}

// Columns counts the columns, that of the names included.
func (v budgetView) Columns() int { return len(v.Heads) + 1 }

// budgetPart is a group of lines under a heading.
type budgetPart struct {
	Title string
	Rows  []budgetRow
}

// budgetRow is a line of the budget.
type budgetRow struct {
	Name, Unit, Source string
	Cells              []string
	Result             bool // a sum or an answer, set off from the terms
}

// budgetTable lays the budgets of a pass side by side, from the geometry down to the
// margin and the rate.
func budgetTable(p *Pass) budgetView {
	all := budgetsOf(p)
	view := budgetView{Name: "Link budget", Corner: "term"}
	for _, b := range all {
		view.Heads = append(view.Heads, b.name)
	}
	view.Parts = []budgetPart{
		{"Geometry", geometryRows(p, all)},
		{"Power", append(termRows(all), powerRows(all)...)},
		{"Noise and data", dataRows(p, all)},
	}
	return view
}

func times(all []namedBudget) []time.Time {
	list := make([]time.Time, len(all))
	for i, b := range all {
		list[i] = b.budget.Time
	}
	return list
}

// cells writes one value of each budget.
func cells(all []namedBudget, write func(*downlink.Budget) string) []string {
	list := make([]string, len(all))
	for i, b := range all {
		list[i] = write(b.budget)
	}
	return list
}

func value(all []namedBudget, decimals int, of func(*downlink.Budget) float64) []string {
	return cells(all, func(b *downlink.Budget) string { return fixed(of(b), decimals) })
}

func geometryRows(p *Pass, all []namedBudget) []budgetRow {
	deg := func(of func(*downlink.Budget) unit.Angle) []string {
		return value(all, 2, func(b *downlink.Budget) float64 { return of(b).Degrees() })
	}
	rows := []budgetRow{{Name: "time", Unit: "UTC", Cells: cells(all, func(b *downlink.Budget) string { return utcClock(b.Time, layoutOf(p)) })}}
	if zone := p.Site.TimeZone; zone != nil {
		rows = append(rows, localRow(zone, layoutOf(p), times(all)...))
	}
	return append(rows,
		budgetRow{Name: "azimuth", Unit: "deg", Cells: deg(func(b *downlink.Budget) unit.Angle { return b.Azimuth })},
		budgetRow{Name: "elevation, geometric", Unit: "deg", Cells: deg(func(b *downlink.Budget) unit.Angle { return b.Elevation })},
		budgetRow{Name: "slant range", Unit: "km", Cells: value(all, 1, func(b *downlink.Budget) float64 { return b.Range.Kilometres() })},
		budgetRow{Name: "angle off the transmit antenna's boresight", Unit: "deg", Cells: deg(func(b *downlink.Budget) unit.Angle { return b.OffBoresight })},
	)
}

// termRows merges the terms of the budgets by name, in their order; a term that a
// budget does not have is a dash there.
func termRows(all []namedBudget) []budgetRow {
	var order []downlink.TermInfo
	seen := map[string]bool{}
	for _, b := range all {
		for _, t := range b.budget.Terms {
			if !seen[t.Name] {
				seen[t.Name] = true
				order = append(order, t.TermInfo)
			}
		}
	}
	rows := make([]budgetRow, 0, len(order))
	for _, t := range order {
		rows = append(rows, budgetRow{Name: t.Name, Unit: t.Unit, Source: t.Source, Cells: cells(all, func(b *downlink.Budget) string {
			for _, have := range b.Terms {
				if have.Name == t.Name {
					return signed(float64(have.Sign) * have.Value)
				}
			}
			return fixed(math.NaN(), 0)
		})})
	}
	return rows
}

// signed writes a term as it enters the sum, with its sign.
func signed(v float64) string {
	s := fixed(v, 2)
	if finite(v) && v >= 0 && s != "0.00" {
		return "+" + s
	}
	return s
}

func powerRows(all []namedBudget) []budgetRow {
	return []budgetRow{
		{Name: "received power", Unit: "dBm", Source: "sum of the terms, at the input of the first amplifier", Result: true,
			Cells: value(all, 2, func(b *downlink.Budget) float64 { return b.ReceivedPowerDBm })},
		{Name: "power flux density", Unit: "dB(W/m²)", Source: "whole carrier in free space at the site",
			Cells: value(all, 2, func(b *downlink.Budget) float64 { return b.PowerFluxDensity })},
	}
}

func dataRows(p *Pass, all []namedBudget) []budgetRow {
	rate := func(of func(*downlink.Budget) unit.BitRate) []string {
		return cells(all, func(b *downlink.Budget) string { return withUnit(of(b).BitsPerSecond(), rateScales) })
	}
	return []budgetRow{
		{Name: "system noise", Unit: "K", Cells: value(all, 1, func(b *downlink.Budget) float64 { return b.SystemNoise.Kelvins() })},
		{Name: "G/T", Unit: "dB/K", Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.GOverT) })},
		{Name: "C/N0", Unit: "dBHz", Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.CN0) })},
		{Name: "information rate", Cells: rate(func(b *downlink.Budget) unit.BitRate {
			if b.DataRate == 0 { // a carrier without data
				return unit.BitRate(math.NaN())
			}
			return b.DataRate
		})},
		{Name: "Eb/N0", Unit: "dB", Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.EbN0) })},
		{Name: "required Eb/N0", Unit: "dB", Source: "of the code, without implementation loss",
			Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.RequiredEbN0) })},
		{Name: "margin", Unit: "dB", Source: "after implementation loss", Result: true,
			Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.Margin) })},
		{Name: "margin over the required " + fixed(p.Profile.RequiredMarginDB, 1) + " dB", Unit: "dB", Result: true,
			Cells: value(all, 2, func(b *downlink.Budget) float64 { return float64(b.MarginOver) })},
		{Name: "achievable rate", Result: true, Cells: rate(func(b *downlink.Budget) unit.BitRate { return b.AchievableRate })},
		{Name: "achievable rate held by", Cells: cells(all, func(b *downlink.Budget) string { return limitName(b.AchievableLimit) })},
	}
}

// noiseTable lays the parts of the system noise side by side.
func noiseTable(p *Pass) budgetView {
	all := budgetsOf(p)
	var rows []budgetRow
	seen := map[string]bool{}
	for _, from := range all {
		for _, n := range from.budget.NoiseParts {
			if seen[n.Name] {
				continue
			}
			seen[n.Name] = true
			rows = append(rows, budgetRow{Name: n.Name, Unit: "K", Source: n.Source, Cells: value(all, 1, func(b *downlink.Budget) float64 { return partOf(b, n.Name) })})
		}
	}
	rows = append(rows, budgetRow{Name: "system noise", Unit: "K", Source: "sum, at the input of the first amplifier", Result: true,
		Cells: value(all, 1, func(b *downlink.Budget) float64 { return b.SystemNoise.Kelvins() })})
	view := budgetView{Name: "System noise", Corner: "part", Parts: []budgetPart{{Rows: rows}}}
	for _, b := range all {
		view.Heads = append(view.Heads, b.name)
	}
	return view
}

func partOf(b *downlink.Budget, name string) float64 {
	for _, n := range b.NoiseParts {
		if n.Name == name {
			return n.Temperature.Kelvins()
		}
	}
	return math.NaN()
}
