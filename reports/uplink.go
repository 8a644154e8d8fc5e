package reports

import (
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Uplink is the other direction of a pass: the station sends, the spacecraft receives.
type Uplink struct {
	Name, Antenna, Mode string
	ModeText            string // modulation and coding in words; may be empty
	Frequency           unit.Frequency
	DataRate            unit.BitRate // of the mode; 0 without one
	RequiredMarginDB    float64

	// By sample of the pass's profile: at the spacecraft's receiver, and how far off
	// Frequency the station must send so that the spacecraft hears its own. NaN where a
	// number does not exist.
	ReceivedDBm, MarginDB, SendShiftHz []float64

	Works           []downlink.Interval // while the margin is at least what is required
	Least, Greatest Moment              // of MarginDB; NaN and no time without a margin

	AOS, Culmination, LeastMargin downlink.Budget // LeastMargin counts only where there is a least margin

	Radiation *Radiation // nil: the antenna's gain is not known
}

// Radiation is how much the station's antenna radiates in an uplink.
type Radiation struct {
	station.Radiation
	At      []Density
	Caution string // which stands wherever the figures do
}

// Density is the power density on the axis of the main beam.
type Density struct {
	Distance unit.Length
	WattsM2  float64
}

// uplinkView is what the page shows of an uplink.
type uplinkView struct {
	Name, Antenna, Frequency, Mode, ModeText, Rate string
	HasMargin                                      bool
	Works                                          []string
	Of                                             string
	Least, Greatest, Required                      string
	Budget                                         budgetView
	Radiation                                      *radiationView
}

type radiationView struct {
	Table   budgetView
	Caution string
}

func uplinkViews(p *Pass) []uplinkView {
	var list []uplinkView
	for i := range p.Uplinks {
		u := &p.Uplinks[i]
		v := uplinkView{
			Name: u.Name, Antenna: u.Antenna, Frequency: fixed(u.Frequency.Megahertz(), 3) + " MHz", Mode: u.Mode, ModeText: u.ModeText,
			Rate: withUnit(u.DataRate.BitsPerSecond(), rateScales), HasMargin: finite(u.Greatest.Value), Of: span(worked(u)),
			Least: fixed(u.Least.Value, 1), Greatest: fixed(u.Greatest.Value, 1), Required: fixed(u.RequiredMarginDB, 1),
			Budget: uplinkTable(p, u),
		}
		for _, c := range u.Works {
			v.Works = append(v.Works, utcClock(c.From, layoutOf(p))+" to "+utcClock(c.To, layoutOf(p)))
		}
		if r := u.Radiation; r != nil {
			v.Radiation = &radiationView{budgetView{Name: "Radiation of the station", Corner: "figure", Heads: []string{"value"}, Parts: []budgetPart{{Rows: radiationRows(r)}}}, r.Caution}
		}
		list = append(list, v)
	}
	return list
}

// worked is how long commanding works.
func worked(u *Uplink) (sum time.Duration) {
	for _, c := range u.Works {
		sum += c.To.Sub(c.From)
	}
	return sum
}

func (u *Uplink) budgets(p *Pass) []namedBudget {
	ev := events(p)
	all := []namedBudget{{ev[0].key, ev[0].name, &u.AOS}, {ev[1].key, ev[1].name, &u.Culmination}}
	if finite(u.Least.Value) {
		all = append(all, namedBudget{"least_margin", "least margin", &u.LeastMargin})
	}
	return all
}

// uplinkTable lays the budgets of an uplink side by side.
func uplinkTable(p *Pass, u *Uplink) budgetView {
	all := u.budgets(p)
	view := budgetView{Name: "Uplink budget", Corner: "term"}
	for _, b := range all {
		view.Heads = append(view.Heads, b.name)
	}
	get := func(name, u, source string, decimals int, result bool, of func(*downlink.Budget) float64) budgetRow {
		return budgetRow{Name: name, Unit: u, Source: source, Result: result, Cells: value(all, decimals, of)}
	}
	view.Parts = []budgetPart{
		{"Power", append(termRows(all),
			get("received power", "dBm", "sum of the terms, at the input of the spacecraft's receiver", 2, true, func(b *downlink.Budget) float64 { return b.ReceivedPowerDBm }),
			get("power flux density", "dB(W/m²)", "whole carrier in free space at the spacecraft", 2, false, func(b *downlink.Budget) float64 { return b.PowerFluxDensity }))},
		{"Noise and data", []budgetRow{
			get("system noise", "K", "of the spacecraft's receiver", 1, false, func(b *downlink.Budget) float64 { return b.SystemNoise.Kelvins() }),
			get("C/N0", "dBHz", "", 2, false, func(b *downlink.Budget) float64 { return float64(b.CN0) }),
			get("Eb/N0", "dB", "", 2, false, func(b *downlink.Budget) float64 { return float64(b.EbN0) }),
			get("required Eb/N0", "dB", "of the code, without implementation loss", 2, false, func(b *downlink.Budget) float64 { return float64(b.RequiredEbN0) }),
			get("margin", "dB", "after implementation loss", 2, true, func(b *downlink.Budget) float64 { return float64(b.Margin) }),
			get("margin over the required "+fixed(u.RequiredMarginDB, 1)+" dB", "dB", "", 2, true, func(b *downlink.Budget) float64 { return float64(b.MarginOver) }),
		}},
	}
	return view
}

func radiationRows(r *Radiation) []budgetRow {
	row := func(name, unit, source string, v float64, decimals int) budgetRow {
		return budgetRow{Name: name, Unit: unit, Source: source, Cells: []string{fixed(v, decimals)}}
	}
	rows := []budgetRow{
		row("power that reaches the antenna", "W", "power less line loss", r.Fed.Watts(), 2),
		row("EIRP", "dBW", "on the axis of the main beam", r.EIRP.DBW(), 2),
	}
	if finite(r.NearFieldMost) {
		rows = append(rows,
			row("near field ends", "m", "D²/(4λ)", r.NearFieldEnd.Metres(), 1),
			row("power density in the near field, at most", "W/m²", "4P/A", r.NearFieldMost, 3),
			row("far field begins", "m", "2D²/λ", r.FarFieldFrom.Metres(), 1))
	}
	for _, d := range r.At {
		rows = append(rows, row("power density at "+fixed(d.Distance.Metres(), 0)+" m", "W/m²", "on the axis of the main beam", d.WattsM2, 4))
	}
	return rows
}

// uplinkFigures are the charts of the uplinks over time.
func uplinkFigures(p *Pass, fr *frame) []timeFigure {
	var list []timeFigure
	for i := range p.Uplinks {
		u := &p.Uplinks[i]
		number := fixed(float64(i+1), 0)
		sc := scaleFor(maxOf(u.SendShiftHz), freqScales)
		shift := timeFigure{
			id: "uplink-shift-" + number, title: "Frequency to send, " + u.Name, quantity: "shift to send", unit: sc.unit,
			caption: "How far off " + fixed(u.Frequency.Megahertz(), 3) + " MHz the station must send, in " + sc.unit + " over UTC, so that the spacecraft receives its own frequency; negative while it approaches.",
			series:  []series{{name: "shift to send", short: "send", dash: solid, values: u.SendShiftHz, divisor: sc.divisor}},
		}
		setDecimals(shift.series)
		list = append(list, timeFigure{
			id: "uplink-margin-" + number, title: "Uplink margin, " + u.Name, quantity: "uplink margin", unit: "dB", fromZero: true,
			caption: "Margin of uplink " + u.Name + " in mode " + u.Mode + " in dB over UTC, with the required " + fixed(u.RequiredMarginDB, 1) +
				" dB as a dashed line. Hatched: the time in which the margin is less than required.",
			series: []series{
				{name: "uplink margin", short: "uplink", dash: solid, values: u.MarginDB, divisor: 1, decimals: 2},
				{name: "required", dash: dashed, values: constant(u.RequiredMarginDB, len(fr.x)), divisor: 1, decimals: 2, still: true},
			},
			below: fr.outside(u.Works),
		}, shift)
	}
	return list
}

// uplinkColumns are an uplink's columns in CSV and JSON.
func uplinkColumns(u *Uplink) []column {
	stem := "uplink_" + underscored(u.Name) + "_"
	return []column{{stem + "received_power_dbm", 3, u.ReceivedDBm}, {stem + "margin_db", 3, u.MarginDB}, {stem + "send_shift_hz", 1, u.SendShiftHz}}
}
