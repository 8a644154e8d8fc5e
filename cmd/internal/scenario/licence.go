package scenario

import (
	"fmt"
	"strings"
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/licence"
	"slantwise/orbit/unit"
)

var (
	licenceKeys = []string{
		"name", "spacecraft", "transmitter", "stations", "least_elevation_to_radiate_deg", "least_elevation_to_receive_deg",
		"blocked_sectors", "highest_eirp_dbw", "highest_eirp_dbm", "widest_bandwidth_mhz", "band_mhz", "hours_utc",
	}
	sectorKeys = []string{"from_azimuth_deg", "to_azimuth_deg", "below_elevation_deg"}
	hoursKeys  = []string{"from", "to", "days"}
)

// licences reads what may be sent and received. Names must be the scenario's.
func (r *reader) licences(top object, s *Scenario) []licence.Licence {
	items := top.objects("licence", "licences", maxParts, licenceKeys)
	called := names("licence", items)
	var out []licence.Licence
	for i, o := range items {
		o.about = "licence " + called[i]
		before := r.faults.count()
		l := o.licence(called[i])
		o.licenceNames(&l, s)
		if r.faults.count() == before {
			o.addAll(o.node, "", l.Check())
		}
		out = append(out, l)
	}
	return out
}

func (o object) licence(name string) licence.Licence {
	l := licence.Licence{Name: name}
	l.Spacecraft, _ = o.text("spacecraft")
	l.Transmitter, _ = o.text("transmitter")
	for i, n := range o.items("stations", "station names", maxStations) {
		if s, ok := o.textAt(n, fmt.Sprintf("stations[%d]", i), false); ok {
			l.Stations = append(l.Stations, s)
		}
	}
	elevation := span{low: -5, high: 90, unit: "deg"}
	l.LeastToRadiate = o.angleOrNil("least_elevation_to_radiate_deg", elevation)
	l.LeastToReceive = o.angleOrNil("least_elevation_to_receive_deg", elevation)
	for _, b := range o.objects("blocked_sectors", "sectors", maxParts, sectorKeys) {
		l.Sectors = append(l.Sectors, b.sector())
	}
	if which, given := o.exclusive("highest_eirp_dbw", "highest_eirp_dbm"); given {
		l.HighestEIRP = o.level(which)
	}
	l.Widest = unit.Frequency(o.numberOr("widest_bandwidth_mhz", above(0, 1e6, "MHz"), 0)) * unit.Megahertz
	if band, ok := o.two("band_mhz", frequencyMHz); ok {
		l.Low, l.High = unit.Frequency(band[0])*unit.Megahertz, unit.Frequency(band[1])*unit.Megahertz
	}
	for _, h := range o.objects("hours_utc", "hours", maxParts, hoursKeys) {
		l.Hours = append(l.Hours, h.hours())
	}
	return l
}

func (o object) angleOrNil(key string, in span) *unit.Angle {
	v, ok := o.number(key, in)
	if !ok {
		return nil
	}
	a := unit.Angle(v) * unit.Degree
	return &a
}

func (o object) sector() licence.Sector {
	azimuth := span{low: 0, high: 360, unit: "deg"}
	return licence.Sector{
		From:  unit.Angle(o.required("from_azimuth_deg", azimuth, "the azimuth at which it begins, clockwise")) * unit.Degree,
		To:    unit.Angle(o.required("to_azimuth_deg", azimuth, "the azimuth at which it ends")) * unit.Degree,
		Below: unit.Angle(o.numberOr("below_elevation_deg", span{low: -5, high: 90, lowOpen: true, unit: "deg"}, 90)) * unit.Degree,
	}
}

var weekdays = map[string]time.Weekday{
	"monday": time.Monday, "tuesday": time.Tuesday, "wednesday": time.Wednesday, "thursday": time.Thursday,
	"friday": time.Friday, "saturday": time.Saturday, "sunday": time.Sunday,
}

var weekdayNames = []string{"monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday"}

func (o object) hours() licence.Hours {
	h := licence.Hours{From: o.timeOfDay("from"), To: o.timeOfDay("to")}
	for i, n := range o.items("days", "weekdays", 7) {
		name := fmt.Sprintf("days[%d]", i)
		s, ok := o.textAt(n, name, false)
		if !ok {
			continue
		}
		d, known := weekdays[strings.ToLower(s)]
		if !known {
			o.notWord(n, name, s, weekdayNames)
		}
		h.Days = append(h.Days, d)
	}
	return h
}

// timeOfDay reads a time of day, 00:00 to 24:00.
func (o object) timeOfDay(key string) time.Duration {
	s := o.needText(key, `a time of day in UTC as "06:30"`)
	if s == "" {
		return 0
	}
	if s == "24:00" {
		return 24 * time.Hour
	}
	for _, layout := range []string{"15:04", "15:04:05"} {
		if t, err := time.Parse(layout, s); err == nil {
			return t.Sub(time.Date(0, 1, 1, 0, 0, 0, 0, time.UTC))
		}
	}
	o.fault(o.get(key), key, "%s is not a time of day", `give hours and minutes in UTC as "06:30", at most "24:00"`, quote(s))
	return 0
}

// licenceNames holds the names of a licence to those of the scenario.
func (o object) licenceNames(l *licence.Licence, s *Scenario) {
	var craft, transmitters, sites []string
	for _, c := range s.Spacecraft {
		craft = append(craft, c.Name)
		for _, t := range c.Transmitters {
			if l.Spacecraft == "" || l.Spacecraft == c.Name {
				transmitters = append(transmitters, t.Name)
			}
		}
		for _, u := range c.Uplinks {
			if l.Spacecraft == "" || l.Spacecraft == c.Name {
				transmitters = append(transmitters, u.Name)
			}
		}
	}
	for _, st := range s.Stations {
		sites = append(sites, st.Site.Name)
	}
	check := func(at *tree.Node, key, name string, known []string) {
		if name != "" && at != nil {
			o.knownNameAt(at, key, name, known)
		}
	}
	check(o.get("spacecraft"), "spacecraft", l.Spacecraft, craft)
	check(o.get("transmitter"), "transmitter", l.Transmitter, transmitters)
	if n := o.get("stations"); n != nil && len(n.Items) == len(l.Stations) {
		for i, name := range l.Stations {
			check(n.Items[i], fmt.Sprintf("stations[%d]", i), name, sites)
		}
	}
}
