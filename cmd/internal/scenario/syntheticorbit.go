package scenario

import (
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

var syntheticKeys = []string{"epoch_utc", "altitude_km", "eccentricity", "inclination_deg", "local_time_of_node_h", "argument_of_perigee_deg", "mean_anomaly_deg"}

// defaultNodeHour is the mean local time of the ascending node of a synthetic orbit where
// none is given.
const defaultNodeHour = 10.5

// syntheticOrbit reads the orbit of a spacecraft that does not fly yet; its epoch is the
// window's start where none is given.
func (o object) syntheticOrbit(name string, windowStart time.Time) (el orbit.Elements, ok bool) {
	g := o.child("synthetic_orbit", syntheticKeys)
	g.about = o.about + ", synthetic orbit"
	before := o.r.faults.count()
	s := orbit.SyntheticOrbit{Name: name, Epoch: windowStart}
	if g.has("epoch_utc") {
		s.Epoch, _ = g.instant("epoch_utc")
	} else {
		g.assume("epoch_utc left out: the start of the window")
	}
	s.Altitude = unit.Length(g.required("altitude_km", span{low: 100, high: 400_000, unit: "km"}, "the semi-major axis less 6378.135 km")) * unit.Kilometre
	s.Eccentricity = g.numberOr("eccentricity", span{low: 0, high: 1, highOpen: true}, 0)
	degrees := func(key string, high float64) unit.Angle {
		return unit.Angle(g.numberOr(key, span{low: 0, high: high, unit: "deg"}, 0)) * unit.Degree
	}
	if g.has("inclination_deg") {
		i := degrees("inclination_deg", 180)
		s.Inclination = &i
	}
	node := g.numberOr("local_time_of_node_h", span{low: 0, high: 24, unit: "h"}, defaultNodeHour)
	if !g.has("local_time_of_node_h") {
		g.assume("local_time_of_node_h left out: the ascending node stands at a mean local time of %g h", node)
	}
	at := unit.Angle(node*15) * unit.Degree
	s.LocalTime = &at
	s.ArgPerigee, s.MeanAnomaly = degrees("argument_of_perigee_deg", 360), degrees("mean_anomaly_deg", 360)
	if o.r.faults.count() > before || g.node == nil || s.Epoch.IsZero() {
		return el, false
	}
	el, err := s.Elements()
	if err != nil {
		g.fault(g.node, "altitude_km", "%s", "", err)
		return el, false
	}
	if s.Inclination == nil {
		g.assume("inclination_deg left out: Sun-synchronous, %.4f deg", el.Inclination.Degrees())
	}
	g.assume("SGP4 mean elements are made of the orbit, without drag; slantwise dish --element-set FILE writes them")
	return el, true
}
