package scenario

import (
	"fmt"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
)

var (
	sizingKeys      = []string{"spacecraft", "transmitter", "antenna", "sites", "diameter_m", "days", "requirements"}
	requirementKeys = []string{"bytes_per_day", "margin_at_elevation", "availability_percent", "longest_gap_h", "latency_p95_h"}
	marginAtKeys    = []string{"elevation_deg", "margin_db"}
)

// sizing checks the block that the search for a dish will use; nothing reads it yet.
func (r *reader) sizing(top object, s *Scenario) {
	o := top.child("sizing", sizingKeys)
	if o.node == nil {
		return
	}
	o.about = "sizing"
	o.assume("the block was checked and has no effect yet")
	o.sizingNames(s)
	if d, ok := o.two("diameter_m", above(0, 1000, "m")); ok && !(d[1] > d[0]) {
		o.fault(o.get("diameter_m"), "diameter_m", "%g to %g m is not a range", "give the smaller diameter first", d[0], d[1])
	}
	o.number("days", above(0, 36_525, "d"))
	q := o.child("requirements", requirementKeys)
	q.bytes("bytes_per_day", above(0, 1e18, "B"))
	q.number("availability_percent", above(0, 100, "%"))
	q.number("longest_gap_h", above(0, 876_600, "h"))
	q.number("latency_p95_h", above(0, 876_600, "h"))
	if m := q.child("margin_at_elevation", marginAtKeys); m.node != nil {
		m.required("elevation_deg", span{low: 0, high: 90, unit: "deg"}, "the elevation")
		m.required("margin_db", marginDB, "the margin that must be reached there")
	}
}

func (o object) sizingNames(s *Scenario) {
	var craft, transmitters, sites, antennas []string
	for _, c := range s.Spacecraft {
		craft = append(craft, c.Name)
		for _, t := range c.Transmitters {
			transmitters = append(transmitters, t.Name)
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
	}{{"spacecraft", craft}, {"transmitter", transmitters}, {"antenna", antennas}} {
		if name, ok := o.text(k.key); ok {
			o.knownName(k.key, name, k.known)
		}
	}
	for i, n := range o.items("sites", "station names", maxStations) {
		key := fmt.Sprintf("sites[%d]", i)
		if name, ok := o.textAt(n, key, false); ok {
			o.knownName(key, name, sites)
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
