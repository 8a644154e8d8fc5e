package scenario

import (
	"fmt"
	"time"
)

var (
	planLimitKeys  = []string{"name", "stations", "antenna", "spacecraft", "contract", "in", "most_contacts", "most_minutes", "most_price"}
	planSharedKeys = []string{"name", "station", "antennas", "at_once", "from_setup"}
)

// planLimits reads the limits by day.
func (o object) planLimits(s *Scenario) []PlanLimit {
	items := o.objects("limits", "limits", maxParts, planLimitKeys)
	called := names("limit", items)
	var out []PlanLimit
	for i, it := range items {
		it.about = "contact plan, limit " + called[i]
		l := PlanLimit{Name: called[i]}
		l.Stations = it.namesOf("stations", stationNames(s))
		l.Spacecraft = it.namesOf("spacecraft", craftNames(s))
		l.Contract, _ = it.text("contract")
		if a, ok := it.text("antenna"); ok {
			l.Antenna = a
			if len(l.Stations) != 1 {
				it.fault(it.get("antenna"), "antenna", "it stands beside %d stations", "name the one station that it belongs to", len(l.Stations))
			} else {
				it.knownName("antenna", a, antennaNames(s, l.Stations[0]))
			}
		}
		l.In, _ = it.word("in", UTCDay, LocalDay, Any24h, WholePlan)
		if !it.has("in") {
			it.assume("in left out: the limit holds for each UTC day")
		}
		if l.In == LocalDay {
			l.Zone = it.zoneOf(s, l.Stations)
		}
		it.most(&l)
		out = append(out, l)
	}
	return out
}

// most reads how much a limit allows.
func (o object) most(l *PlanLimit) {
	if o.has("most_contacts") {
		n := o.countOf("most_contacts", 0, 1e6)
		l.Contacts = &n
	}
	if v, ok := o.number("most_minutes", atLeast(0, 1e6, "min")); ok {
		l.Minutes = &v
	}
	if v, ok := o.number("most_price", atLeast(0, 1e12, "")); ok {
		l.Price = &v
		if l.In == Any24h {
			o.fault(o.get("most_price"), "most_price", "a price is counted by day or over the whole plan", "let the limit hold in utc_day, local_day or whole_plan")
		}
	}
	if len(o.present("most_contacts", "most_minutes", "most_price")) == 0 {
		o.missing("most_contacts", "what is limited: most_contacts, most_minutes or most_price")
	}
}

// namesOf reads a list of names of the scenario.
func (o object) namesOf(key string, known []string) (out []string) {
	for i, n := range o.items(key, "names", maxStations) {
		at := fmt.Sprintf("%s[%d]", key, i)
		if name, ok := o.textAt(n, at, false); ok {
			o.knownNameAt(n, at, name, known)
			out = append(out, name)
		}
	}
	return out
}

// zoneOf returns the time zone that stations share.
func (o object) zoneOf(s *Scenario, stations []string) *time.Location {
	var zone *time.Location
	for i := range s.Stations {
		site := &s.Stations[i].Site
		for _, name := range stations {
			if site.Name != name {
				continue
			}
			switch {
			case site.TimeZone == nil:
				o.fault(o.get("in"), "in", "station %s has no time_zone, so that nobody knows its day", "give the station one", quote(name))
			case zone != nil && zone.String() != site.TimeZone.String():
				o.fault(o.get("in"), "in", "the stations keep days of their own, %s and %s", "give a limit for each time zone", zone, site.TimeZone)
			default:
				zone = site.TimeZone
			}
		}
	}
	if len(stations) == 0 {
		o.fault(o.get("in"), "in", "local_day needs to know whose day", "name the stations")
	}
	return zone
}

// planShared reads what antennas share.
func (o object) planShared(s *Scenario) []PlanShared {
	items := o.objects("shared", "things that antennas share", maxParts, planSharedKeys)
	called := names("shared thing", items)
	var out []PlanShared
	for i, it := range items {
		x := PlanShared{Name: called[i], Station: it.needText("station", "the station that has it")}
		if x.Station != "" {
			it.knownName("station", x.Station, stationNames(s))
		}
		x.Antennas = it.namesOf("antennas", antennaNames(s, x.Station))
		if x.AtOnce = it.countOf("at_once", 1, 1000); x.AtOnce == 0 {
			x.AtOnce = 1
		}
		if !it.has("at_once") {
			it.assume("at_once left out: %s serves one contact at a time", x.Name)
		}
		x.FromSetUp = it.flag("from_setup")
		out = append(out, x)
	}
	return out
}
