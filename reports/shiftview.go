package reports

import (
	"math"
	"strings"
	"time"
)

// shiftView is what the sheet shows, on a screen and on paper with the same words.
type shiftView struct {
	pageView
	Station, When, Local, Source string
	Blocks                       []shiftBlock
	None                         string
	Left, Warnings               []string
	Signs                        string      // what the short forms mean
	Tell                         []shiftTell // of the causes that occur, and of what is in no budget
	Cautions                     []string
	Pages                        int    // of paper
	Beyond                       string // what found no room on it; empty: all did
	Footer                       string
}

// shiftTell says how to tell a cause.
type shiftTell struct{ Name, Text string }

// shiftBlock is a contact.
type shiftBlock struct {
	Number                    int
	ID, Begin, End, Local     string
	Spacecraft, Length, Facts string
	Heads                     []string // of the events
	Points                    []shiftRow
	Words                     []shiftTell
	Alarm                     []string // what must not be overlooked
	Signal                    []shiftRow
	SignalName                string
	Page                      int  // of paper, from 1; 0: it found no room
	Turn                      bool // the first of a page but the first
}

type shiftRow struct {
	Name  string
	Cells []string
}

const mostSignalColumns = 20

func newShiftView(s *Shift) *shiftView {
	v := &shiftView{Station: s.Station, None: s.None, Left: s.Left, Footer: "slantwise " + s.Version + ", scenario " + s.Title}
	v.Title = "Shift sheet, " + s.Station
	v.When = dayMinute(s.From) + " to " + dayMinute(s.To) + " UTC"
	if s.Zone != nil {
		v.Local = localMinute(s.From, s.Zone) + " to " + localMinute(s.To, s.Zone)
	} else {
		v.Local = "no local time: the station has no time zone"
	}
	v.Source = "all passes worth taking"
	if s.Plan != "" {
		v.Source = "contact plan " + s.Plan
	}
	for i := range s.Contacts {
		v.Blocks = append(v.Blocks, newShiftBlock(s, i))
	}
	for _, n := range s.Notes {
		v.Warnings = append(v.Warnings, noteText(n))
	}
	basis := ""
	for i := range s.Contacts {
		if s.Contacts[i].Search.Assumed {
			basis = " (by the age of the elements, common practice and no measurement, where the scenario states nothing)"
		}
	}
	v.Signs = "Elevations are geometric. ± is one standard deviation" + basis + ", and the search goes to three. A time offset of + takes the spacecraft as late: the antenna runs behind on its track, toward the azimuth of AOS. Low: dB that a cause could take, at the lower end/at the highest point."
	v.addTell(s)
	v.Cautions = shiftCautions(s)
	v.layOut(s.Pages)
	return v
}

// dayMinute writes an instant to the minute.
func dayMinute(t time.Time) string { return t.UTC().Format("2006-01-02 15:04") }

func localMinute(t time.Time, zone *time.Location) string {
	return t.In(zone).Format("2006-01-02 15:04 MST")
}

// shiftTells says how to tell causes apart, by their kind.
var shiftTells = map[ShiftCauseKind]string{
	ShiftRain:         "grows toward the horizon, and the noise with it. Wait for height, or take a slower mode.",
	ShiftPointing:     "grows toward the zenith, where the beam turns fastest. Try time offsets, then offsets of the axes.",
	ShiftAttitude:     "comes and goes within seconds or minutes at any height. Take the slowest mode, and report it.",
	ShiftKeyhole:      "all of it, at the times that are named. It comes back by itself.",
	ShiftWrongMode:    "level as expected, no lock. Set the receiver to the mode that is named.",
	ShiftPolarisation: "the same from AOS to LOS. Look at the setting of the feed.",
}

func (v *shiftView) addTell(s *Shift) {
	for kind := ShiftRain; kind <= ShiftPolarisation; kind++ {
		for i := range s.Contacts {
			if hasCause(&s.Contacts[i], kind) {
				name := kind.Name()
				if kind == ShiftRain {
					name += " (" + trimmed(s.RainPercent) + " % of the year)"
				}
				v.Tell = append(v.Tell, shiftTell{name, shiftTells[kind]})
				break
			}
		}
	}
	if len(s.Contacts) > 0 {
		v.Tell = append(v.Tell,
			shiftTell{"obstacle", "all at once, below one height at one azimuth. Note both: the mask lacks it."},
			shiftTell{"noise", "level as expected, C/N0 low. Interference, the Sun or the amplifier, not the spacecraft."})
	}
}

func hasCause(c *ShiftContact, kind ShiftCauseKind) bool {
	for _, k := range c.Causes {
		if k.Kind == kind {
			return true
		}
	}
	return false
}

// shiftCautions are those that fit: of radiation where the station can send.
func shiftCautions(s *Shift) []string {
	out := []string{paperCautions[1]}
	for i := range s.Contacts {
		if len(s.Contacts[i].Uplinks) > 0 {
			return append([]string{s.RadiationCaution}, out...)
		}
	}
	return out
}

func newShiftBlock(s *Shift, i int) shiftBlock {
	c := &s.Contacts[i]
	b := shiftBlock{Number: i + 1, ID: "contact-" + fixed(float64(i+1), 0), Begin: clock(c.Start), End: clock(c.End), Spacecraft: c.Spacecraft,
		Length: span(c.End.Sub(c.Start)) + ", " + fixed(c.Events[1].ElevationDeg, 1) + "° high"}
	if s.Zone != nil {
		b.Local = localText(c.Start, s.Zone, clockLayout) + " to " + localText(c.End, s.Zone, clockLayout)
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

// shiftLocalRow has the zone's name once where the clock is not changed within the contact.
func shiftLocalRow(c *ShiftContact, zone *time.Location) shiftRow {
	r := shiftRow{Name: "local"}
	one := true
	first, _ := c.Events[0].Time.In(zone).Zone()
	for _, e := range c.Events {
		name, _ := e.Time.In(zone).Zone()
		one = one && name == first
		r.Cells = append(r.Cells, localText(e.Time, zone, clockLayout))
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
