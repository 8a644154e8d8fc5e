package reports

import (
	"math"
	"strings"
	"time"
)

func newShiftBlock(s *Shift, i int) shiftBlock {
	c := &s.Contacts[i]
	b := shiftBlock{Number: i + 1, ID: "contact-" + fixed(float64(i+1), 0), Begin: clock(c.Start), End: clock(c.End), Spacecraft: c.Spacecraft,
		Length: span(c.End.Sub(c.Start)) + ", " + fixed(c.Events[1].ElevationDeg, 1) + "° high"}
	if !midnight(c.Start).Equal(midnight(s.From)) {
		b.Begin = dayClock(c.Start) // a sheet through midnight
	}
	if s.Zone != nil {
		b.Local = localSpan(c.Start, c.End, s.Zone)
	}
	b.Facts = c.facts()
	for _, e := range c.Events {
		b.Heads = append(b.Heads, e.Name)
	}
	b.Points = c.points(s)
	b.Words = c.words()
	for _, u := range c.Uplinks {
		b.Alarm = append(b.Alarm, u.alarm())
	}
	b.Alarm = append(b.Alarm, c.Cautions...)
	b.addSignal(c)
	return b
}

// facts is the line under the head.
func (c *ShiftContact) facts() string {
	var parts []string
	if c.Transmitter != "" {
		parts = append(parts, c.Transmitter+" at "+fixed(c.Frequency.Megahertz(), 3)+" MHz by "+c.Antenna)
	} else if c.Antenna != "" {
		parts = append(parts, "by "+c.Antenna)
	}
	if c.Bytes > 0 {
		parts = append(parts, withUnit(c.Bytes, byteScales)+" expected")
	}
	if c.Name != "" {
		parts = append(parts, "contact "+c.Name)
	}
	if !c.Start.Equal(c.AOS) || !c.End.Equal(c.LOS) {
		parts = append(parts, "pass "+clock(c.AOS)+" to "+clock(c.LOS))
	}
	return strings.Join(append(parts, c.Orbit), "; ")
}

// points are the rows of the table of events.
func (c *ShiftContact) points(s *Shift) []shiftRow {
	row := func(name string, of func(e *ShiftEvent) string) shiftRow {
		r := shiftRow{Name: name}
		for i := range c.Events {
			r.Cells = append(r.Cells, of(&c.Events[i]))
		}
		return r
	}
	list := []shiftRow{row("UTC", func(e *ShiftEvent) string { return clock(e.Time) })}
	if s.Zone != nil {
		list = append(list, shiftLocalRow(c, s.Zone))
	}
	list = append(list, row("az, el, deg", func(e *ShiftEvent) string { return fixed(turned(e.AzimuthDeg, 1), 1) + ", " + fixed(e.ElevationDeg, 1) }))
	if c.Transmitter != "" {
		list = append(list,
			row("receive, MHz", func(e *ShiftEvent) string { return fixed(e.ReceivedHz/1e6, 6) }),
			row("Doppler, kHz", func(e *ShiftEvent) string { return withSign(e.ShiftHz/1e3, 3) }))
	}
	for _, o := range c.Others {
		list = append(list, carrierRow("and "+o.Name+", MHz", o.Hz))
	}
	for _, u := range c.Uplinks {
		name := "send, MHz"
		if len(c.Uplinks) > 1 {
			name = "send " + u.Name + ", MHz"
		}
		list = append(list, carrierRow(name, u.Hz))
	}
	return list
}

// localSpan writes a span by the clock of a zone: with the date where it is another than in UTC, and
// the zone's name once where the clock is not changed within it.
func localSpan(from, to time.Time, zone *time.Location) string {
	first, last := localText(from, zone, clockLayout), localText(to, zone, clockLayout)
	name, _ := from.In(zone).Zone()
	if after, _ := to.In(zone).Zone(); after == name {
		first = strings.TrimSuffix(first, " "+name)
	}
	if date, _, ok := strings.Cut(first, " "); ok && strings.HasPrefix(last, date+" ") {
		last = strings.TrimPrefix(last, date+" ")
	}
	return first + " to " + last
}

// shiftLocalRow has the zone's name once where the clock is not changed within the contact.
func shiftLocalRow(c *ShiftContact, zone *time.Location) shiftRow {
	r := shiftRow{Name: "local"}
	one := true
	first, _ := c.Events[0].Time.In(zone).Zone()
	for _, e := range c.Events {
		name, _ := e.Time.In(zone).Zone()
		one = one && name == first
		r.Cells = append(r.Cells, e.Time.Round(time.Second).In(zone).Format(clockLayout+" MST")) // the date stands at the head
	}
	if one {
		r.Name += ", " + first
		for i := range r.Cells {
			r.Cells[i] = strings.TrimSuffix(r.Cells[i], " "+first)
		}
	}
	return r
}

func carrierRow(name string, hz [3]float64) shiftRow {
	r := shiftRow{Name: name}
	for _, f := range hz {
		r.Cells = append(r.Cells, fixed(f/1e6, 6))
	}
	return r
}

// turned brings what would be written as 360 back to 0.
func turned(deg float64, decimals int) float64 {
	if math.Round(deg*powersOfTen[decimals]) >= 360*powersOfTen[decimals] {
		return 0
	}
	return deg
}

// trimmed writes a number of a few digits without noughts at its end.
func trimmed(v float64) string {
	text := fixed(v, 3)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}

// addSignal lays out what is expected: the ends and whole minutes, fewer of them in long contacts.
func (b *shiftBlock) addSignal(c *ShiftContact) {
	n := len(c.Minutes)
	if n == 0 || c.Transmitter == "" {
		return
	}
	every := 1
	for _, m := range []int{1, 2, 5, 10, 15, 30, 60, 120, 240, 480, 1440} {
		if every = m; (n-2)/m+2 <= mostSignalColumns {
			break
		}
	}
	b.SignalName = "Expected each minute"
	if every > 1 {
		b.SignalName = "Expected every " + fixed(float64(every), 0) + " minutes"
	}
	show := []struct {
		name string
		of   func(m *ShiftMinute) float64
	}{
		{"elevation, deg", func(m *ShiftMinute) float64 { return m.ElevationDeg }},
		{"power, dBm", func(m *ShiftMinute) float64 { return m.ReceivedDBm }},
		{"C/N0, dBHz", func(m *ShiftMinute) float64 { return m.CN0DBHz }},
		{"margin, dB", func(m *ShiftMinute) float64 { return m.MarginDB }},
	}
	rows := []shiftRow{{Name: "UTC"}, {Name: show[0].name}, {Name: show[1].name}, {Name: show[2].name}, {Name: show[3].name}}
	exists := make([]bool, len(show))
	for i := range c.Minutes {
		m := &c.Minutes[i]
		name := m.Time.UTC().Format("15:04")
		switch {
		case i == 0:
			name = c.Events[0].Name
		case i == n-1:
			name = c.Events[2].Name
		case m.Time.UTC().Hour()*60+m.Time.UTC().Minute() == 0 && every > 1440:
			continue
		case (m.Time.UTC().Hour()*60+m.Time.UTC().Minute())%every != 0:
			continue
		}
		rows[0].Cells = append(rows[0].Cells, name)
		for k := range show {
			x := show[k].of(m)
			rows[k+1].Cells = append(rows[k+1].Cells, fixed(x, 1))
			exists[k] = exists[k] || finite(x)
		}
	}
	b.Signal = append(b.Signal, rows[0])
	for k := range show {
		// Power and margin say what C/N0 says, which stands where one of them does not exist.
		if exists[k] && (k != 2 || !exists[1] || !exists[3]) {
			b.Signal = append(b.Signal, rows[k+1])
		}
	}
}
