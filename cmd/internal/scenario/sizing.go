package scenario

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/sizing"
	"slantwise/orbit/unit"
)

var (
	sizingKeys      = []string{"spacecraft", "transmitter", "mode", "antenna", "antenna_family", "sites", "diameter_m", "days", "requirements"}
	requirementKeys = []string{"bytes_per_day", "worst_week_bytes_per_day", "worst_month_bytes_per_day", "margin_at_elevation", "margin_for_contact_share", "availability_percent", "longest_gap_h", "latency_p95_h"}
	marginAtKeys    = []string{"elevation_deg", "margin_db"}
	marginShareKeys = []string{"contact_percent", "margin_db"}
)

// Sizing is the question which dish a station needs. Names that are left out are empty.
type Sizing struct {
	Spacecraft, Transmitter, Mode, Antenna string

	Sites  []string     // together; empty: all stations that have the antenna
	Range  sizing.Range // both ends 0 where none is given
	Days   float64
	Family sizing.Family
	Needs  sizing.Requirements
}

// DefaultSizingDays is how long a dish's passes are flown where the scenario does not say.
const DefaultSizingDays = 365

// sizing reads the block that the search for a dish takes; nil where there is none.
func (r *reader) sizing(top object, s *Scenario) *Sizing {
	o := top.child("sizing", sizingKeys)
	if o.node == nil {
		return nil
	}
	o.about = "sizing"
	out := &Sizing{}
	o.sizingNames(s, out)
	if d, ok := o.two("diameter_m", above(0, 1000, "m")); ok {
		if !(d[1] > d[0]) {
			o.fault(o.get("diameter_m"), "diameter_m", "%g to %g m is not a range", "give the smaller diameter first", d[0], d[1])
		}
		out.Range.Low, out.Range.High = unit.Length(d[0]), unit.Length(d[1])
	} else if !o.has("diameter_m") {
		out.Range.Low, out.Range.High = 0.5, 20
		o.assume("diameter_m left out: %g to %g m", out.Range.Low.Metres(), out.Range.High.Metres())
	}
	out.Days = o.numberOr("days", atLeast(sizing.LeastDays, sizing.MostDays, "d"), DefaultSizingDays)
	if !o.has("days") {
		o.assume("days left out: %g d", out.Days)
	}
	out.Needs = o.requirements()
	out.Family = o.antennaFamily()
	return out
}

func (o object) requirements() sizing.Requirements {
	q := o.child("requirements", requirementKeys)
	need := sizing.None()
	read := func(key string, in span, into *float64) {
		if v, ok := q.number(key, in); ok {
			*into = v
		}
	}
	hours := above(0, 876_600, "h")
	amount := func(key string, into *float64) {
		if v, ok := q.bytes(key, above(0, 1e18, "B")); ok {
			*into = v
		}
	}
	amount("bytes_per_day", &need.BytesPerDay)
	amount("worst_week_bytes_per_day", &need.WorstWeekBytesPerDay)
	amount("worst_month_bytes_per_day", &need.WorstMonthBytesPerDay)
	read("availability_percent", above(0, 100, "%"), &need.Availability)
	read("longest_gap_h", hours, &need.LongestGap)
	read("latency_p95_h", hours, &need.Latency)
	if m := q.child("margin_at_elevation", marginAtKeys); m.node != nil {
		el := m.required("elevation_deg", span{low: 0, high: 90, unit: "deg"}, "the elevation")
		db := m.required("margin_db", marginDB, "the margin that must be reached there")
		need.Margin = &sizing.MarginAt{Elevation: unit.Angle(el) * unit.Degree, Margin: unit.DB(db)}
	}
	if m := q.child("margin_for_contact_share", marginShareKeys); m.node != nil {
		share := m.required("contact_percent", above(0, 100, "%"), "the share of the contact time")
		db := m.required("margin_db", marginDB, "the margin that must be reached so long")
		need.MarginShare = &sizing.MarginOver{Percent: share, Margin: unit.DB(db)}
	}
	return need
}

func (o object) sizingNames(s *Scenario, into *Sizing) {
	var craft, transmitters, modes, sites, antennas []string
	for _, c := range s.Spacecraft {
		craft = append(craft, c.Name)
		for _, t := range c.Transmitters {
			transmitters = append(transmitters, t.Name)
			for _, m := range t.Modes {
				modes = append(modes, m.Name)
			}
		}
	}
	for _, st := range s.Stations {
		sites = append(sites, st.Site.Name)
		for _, a := range st.Antennas {
			antennas = append(antennas, a.Name)
		}
	}
	for _, k := range []struct {
		key   string
		known []string
		into  *string
	}{{"spacecraft", craft, &into.Spacecraft}, {"transmitter", transmitters, &into.Transmitter}, {"mode", modes, &into.Mode}, {"antenna", antennas, &into.Antenna}} {
		if name, ok := o.text(k.key); ok {
			o.knownName(k.key, name, k.known)
			*k.into = name
		}
	}
	for i, n := range o.items("sites", "station names", maxStations) {
		key := fmt.Sprintf("sites[%d]", i)
		if name, ok := o.textAt(n, key, false); ok {
			o.knownName(key, name, sites)
			if slices.Contains(into.Sites, name) {
				o.fault(n, key, "%s stands twice", "name each site once", quote(name))
			}
			into.Sites = append(into.Sites, name)
		}
	}
}

// knownName adds a fault where a name is none of the scenario's.
func (o object) knownName(key, name string, known []string) {
	o.knownNameAt(o.node, key, name, known)
}

// knownNameAt is knownName for a name that stands at a node of its own.
func (o object) knownNameAt(at *tree.Node, key, name string, known []string) {
	for _, k := range known {
		if k == name {
			return
		}
	}
	next := ""
	if near := nearest.Names(name, known, 1); len(near) > 0 {
		next = "did you mean " + quote(near[0]) + "?"
	}
	o.fault(at, key, "%s is not in the scenario", next, quote(name))
}
