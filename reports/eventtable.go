package reports

import "time"

// eventTable lays AOS, culmination and LOS side by side.
func eventTable(p *Pass) budgetView {
	f, ev, layout := p.Profile, events(p), layoutOf(p)
	view := budgetView{Name: "Begin, culmination and end", Corner: "event"}
	line := func(name, unit string, write func(event) string) budgetRow {
		r := budgetRow{Name: name, Unit: unit}
		for _, e := range ev {
			r.Cells = append(r.Cells, write(e))
		}
		return r
	}
	for _, e := range ev {
		view.Heads = append(view.Heads, e.name)
	}
	rows := []budgetRow{line("time", "UTC", func(e event) string { return utcClock(e.at, layout) })}
	if zone := p.Site.TimeZone; zone != nil {
		rows = append(rows, localRow(zone, layout, ev[0].at, ev[1].at, ev[2].at))
	}
	rows = append(rows,
		line("azimuth", "deg", func(e event) string { return fixed(e.azimuthDeg, 1) + " " + compass(e.azimuthDeg) }),
		line("elevation, geometric", "deg", func(e event) string { return fixed(e.elevationDeg, 1) }),
		line("slant range", "km", func(e event) string { return fixed(f.RangeKm[e.sample], 0) }),
	)
	if p.Radio != nil {
		rows = append(rows, line("received power", "dBm", func(e event) string { return fixed(f.ReceivedPowerDBm[e.sample], 1) }))
		if finite(p.Radio.Greatest.Value) {
			rows = append(rows, line("margin", "dB", func(e event) string { return fixed(f.MarginDB[e.sample], 1) }))
			if c := p.Radio.ClearSky; c != nil {
				rows = append(rows, line("margin under a clear sky", "dB", func(e event) string { return fixed(c.MarginDB[e.sample], 1) }))
			}
		}
	}
	if p.Surety != nil {
		rows = append(rows, suretyRows(p.Surety, p.Radio != nil)...)
	}
	view.Parts = []budgetPart{{Rows: rows}}
	return view
}

// localRow writes instants in the station's zone, whose name is the unit where one
// name serves all.
func localRow(zone *time.Location, layout string, at ...time.Time) budgetRow {
	r := budgetRow{Name: "time at the station", Unit: at[0].In(zone).Format("MST")}
	for _, t := range at {
		if t.In(zone).Format("MST") != r.Unit {
			r.Unit = ""
		}
	}
	for _, t := range at {
		text := localText(t, zone, layout)
		if r.Unit != "" {
			text = text[:len(text)-len(r.Unit)-1]
		}
		r.Cells = append(r.Cells, text)
	}
	return r
}
