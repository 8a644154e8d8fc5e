package scenario

import (
	"fmt"
	"strings"
	"time"
)

var (
	planStationKeys  = []string{"name", "setup_s", "teardown_s", "booking_lead_h", "cancel_notice_h", "operators_at_once", "shifts", "antennas"}
	planAntennaKeys  = []string{"name", "setup_s", "teardown_s", "contract", "price_per_contact", "price_per_minute"}
	shiftKeys        = []string{"days", "from_local", "to_local"}
	planCraftKeys    = []string{"name", "contract", "transmitters", "stations_at_once", "least_between_s", "repoint_s", "overlap_s", "same_data", "half_duplex_uplink_percent", "most_contact_s_per_orbit", "share_value", "value_per_byte", "data", "commands"}
	planDataKeys     = []string{"name", "value_per_byte", "due_h", "fade_h"}
	planCommandsKeys = []string{"lead_s", "valid_h", "loaded_utc"}
)

var (
	planHours = atLeast(0, 8760, "h")
	planMoney = atLeast(0, 1e9, "")
)

func hours(v float64) time.Duration { return time.Duration(v * float64(time.Hour)) }

// planStations reads what the plan says of stations.
func (o object) planStations(s *Scenario, p *ContactPlan) []PlanStation {
	items := o.objects("stations", "stations", maxStations, planStationKeys)
	called := names("station", items)
	var out []PlanStation
	for i, it := range items {
		it.about = "contact plan, station " + called[i]
		if called[i] != "" {
			it.knownName("name", called[i], stationNames(s))
		}
		st := PlanStation{Name: called[i], SetUp: p.SetUp, TearDown: p.TearDown}
		it.ownTimes(&st.SetUp, &st.TearDown)
		st.Lead, st.Notice = hours(it.numberOr("booking_lead_h", planHours, 0)), hours(it.numberOr("cancel_notice_h", planHours, 0))
		st.Operators = it.countOf("operators_at_once", 1, 1000)
		st.Shifts = it.workTimes()
		antennas := it.objects("antennas", "antennas", maxParts, planAntennaKeys)
		for k, name := range names("antenna", antennas) {
			a := antennas[k]
			if name != "" {
				a.knownName("name", name, antennaNames(s, called[i]))
			}
			x := PlanAntenna{Name: name, SetUp: st.SetUp, TearDown: st.TearDown}
			a.ownTimes(&x.SetUp, &x.TearDown)
			x.Contract, _ = a.text("contract")
			x.PerContact, x.PerMinute = a.numberOr("price_per_contact", planMoney, 0), a.numberOr("price_per_minute", planMoney, 0)
			st.Antennas = append(st.Antennas, x)
		}
		out = append(out, st)
	}
	return out
}

// ownTimes reads set-up and tear-down where they are stated.
func (o object) ownTimes(up, down *time.Duration) {
	if v, ok := o.number("setup_s", planSeconds); ok {
		*up = inSeconds(v)
	}
	if v, ok := o.number("teardown_s", planSeconds); ok {
		*down = inSeconds(v)
	}
}

// countOf reads a whole number in a range, 0 where the key is left out.
func (o object) countOf(key string, low, high float64) int {
	v, ok := o.number(key, atLeast(low, high, ""))
	if !ok {
		return 0
	}
	return o.whole(key, v)
}

func (o object) workTimes() []Shift {
	var out []Shift
	for _, it := range o.objects("shifts", "times of a day", maxParts, shiftKeys) {
		h := Shift{From: it.localTime("from_local"), To: it.localTime("to_local")}
		if it.has("from_local") && it.has("to_local") && h.From == h.To {
			it.fault(it.get("to_local"), "to_local", "the shift ends when it begins", `give "00:00" to "24:00" for the whole day`)
		}
		for i, n := range it.items("days", "weekdays", 7) {
			name := fmt.Sprintf("days[%d]", i)
			if s, ok := it.textAt(n, name, false); ok {
				d, known := weekdays[strings.ToLower(s)]
				if !known {
					it.notWord(n, name, s, weekdayNames)
				}
				h.Days = append(h.Days, d)
			}
		}
		out = append(out, h)
	}
	return out
}

// localTime reads a time of day by the station's clock, 00:00 to 24:00.
func (o object) localTime(key string) time.Duration {
	s := o.needText(key, `a time of day by the station's clock as "06:30"`)
	if s == "" {
		return 0
	}
	if s == "24:00" {
		return 24 * time.Hour
	}
	t, err := time.Parse("15:04", s)
	if err != nil {
		o.fault(o.get(key), key, "%s is not a time of day", `give hours and minutes by the station's clock as "06:30", at most "24:00"`, quote(s))
		return 0
	}
	return time.Duration(t.Hour())*time.Hour + time.Duration(t.Minute())*time.Minute
}

// planCraft reads what the plan says of spacecraft.
func (o object) planCraft(s *Scenario) []PlanSpacecraft {
	items := o.objects("spacecraft", "spacecraft", maxSpacecraft, planCraftKeys)
	called := names("spacecraft", items)
	var out []PlanSpacecraft
	for i, it := range items {
		it.about = "contact plan, spacecraft " + called[i]
		if called[i] != "" {
			it.knownName("name", called[i], craftNames(s))
		}
		out = append(out, it.planOneCraft(called[i], s))
	}
	return out
}

func (o object) planOneCraft(name string, s *Scenario) PlanSpacecraft {
	c := PlanSpacecraft{Name: name, AtOnce: 1, ValuePerByte: 1}
	c.Contract, _ = o.text("contract")
	if n := o.countOf("stations_at_once", 1, 100); n > 0 {
		c.AtOnce = n
	}
	c.Between, c.Repoint = o.duration("least_between_s", planSeconds), o.duration("repoint_s", planSeconds)
	if v, ok := o.two("overlap_s", planSeconds); ok {
		c.Overlap = [2]time.Duration{inSeconds(v[0]), inSeconds(v[1])}
		if !(v[0] <= v[1]) {
			o.fault(o.get("overlap_s"), "overlap_s", "%g to %g s is not a range", "give the shorter overlap first", v[0], v[1])
		}
	}
	c.SameData = o.flag("same_data")
	if c.AtOnce < 2 {
		o.useless("where the spacecraft talks to one station at a time", "overlap_s", "same_data")
	}
	c.UplinkShare = o.numberOr("half_duplex_uplink_percent", span{low: 0, high: 100, highOpen: true, unit: "%"}, 0) / 100
	c.PerOrbit = o.duration("most_contact_s_per_orbit", above(0, 86_400, "s"))
	c.Share = o.numberOr("share_value", atLeast(0, 1e15, ""), 0)
	c.ValuePerByte = o.numberOr("value_per_byte", planValue, 1)
	var craft *Spacecraft
	for i := range s.Spacecraft {
		if s.Spacecraft[i].Name == name {
			craft = &s.Spacecraft[i]
		}
	}
	if craft == nil {
		craft = &Spacecraft{}
	}
	c.Transmitters = o.planTransmitters(craft)
	c.Data = o.planData(craft, c.ValuePerByte)
	c.Commands = o.planCommands()
	return c
}

func (o object) planTransmitters(craft *Spacecraft) (out []string) {
	var known []string
	for i := range craft.Transmitters {
		known = append(known, craft.Transmitters[i].Name)
	}
	for i, n := range o.items("transmitters", "transmitter names", maxParts) {
		key := fmt.Sprintf("transmitters[%d]", i)
		if name, ok := o.textAt(n, key, false); ok {
			o.knownNameAt(n, key, name, known)
			out = append(out, name)
		}
	}
	return out
}

// planData reads what the kinds of data of a recorder are worth.
func (o object) planData(craft *Spacecraft, worth float64) (out []PlanData) {
	items := o.objects("data", "kinds of data", maxParts, planDataKeys)
	if craft.Recorder == nil && len(items) > 0 {
		o.fault(o.get("data"), "data", "the spacecraft has no recorder", "add the key recorder to it, or remove this one")
		return nil
	}
	var known []string
	if craft.Recorder != nil {
		for _, d := range craft.Recorder.Data {
			known = append(known, d.Name)
		}
	}
	for i, name := range names("kind of data", items) {
		it := items[i]
		if name != "" {
			it.knownName("name", name, known)
		}
		d := PlanData{Name: name, ValuePerByte: it.numberOr("value_per_byte", planValue, worth)}
		d.Due, d.Fade = hours(it.numberOr("due_h", planHours, 0)), hours(it.numberOr("fade_h", above(0, 8760, "h"), 0))
		if it.has("due_h") && !it.has("fade_h") {
			it.missing("fade_h", "the time after due_h in which the data lose their worth")
		}
		out = append(out, d)
	}
	return out
}

func (o object) planCommands() *PlanCommands {
	c := o.child("commands", planCommandsKeys)
	if c.node == nil {
		return nil
	}
	out := &PlanCommands{Lead: c.duration("lead_s", planSeconds), Valid: hours(c.numberOr("valid_h", planHours, 0))}
	for i, n := range c.items("loaded_utc", "instants", maxParts) {
		key := fmt.Sprintf("loaded_utc[%d]", i)
		if s, ok := c.textAt(n, key, false); ok {
			t, err := ParseUTC(s)
			if err != nil {
				c.fault(n, key, "%v", "", err)
			}
			out.Loaded = append(out.Loaded, t)
		}
	}
	return out
}
