package scenario

import (
	"fmt"
	"math"
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink"
	"slantwise/orbit/unit"
)

var (
	oscillatorKeys = []string{"offset_hz", "offset_ppm", "drift_hz_per_day", "drift_ppm_per_day", "at_utc", "measured"}
	measuredKeys   = []string{"at_utc", "offset_hz", "offset_ppm"}
	coherentKeys   = []string{"uplink", "turnaround"}

	offsetHz  = span{low: -1e9, high: 1e9, unit: "Hz"}
	offsetPPM = span{low: -1000, high: 1000, unit: "ppm"}
)

// oscillator reads how far the spacecraft's oscillator is off, nil where nothing is
// said. carrier is what parts in a million are of.
func (o object) oscillator(carrier unit.Frequency) *downlink.Oscillator {
	if !o.has("oscillator") {
		return nil
	}
	c := o.child("oscillator", oscillatorKeys)
	c.about = o.about + ", oscillator"
	if c.has("measured") {
		c.useless("beside measured, from which it follows", "offset_hz", "offset_ppm", "drift_hz_per_day", "drift_ppm_per_day", "at_utc")
		return c.fitted(carrier)
	}
	out := &downlink.Oscillator{Offset: c.hertz("offset", carrier)}
	drift, given := c.exclusive("drift_hz_per_day", "drift_ppm_per_day")
	if !given {
		c.useless("without a drift, as the offset holds at every time", "at_utc")
		return out
	}
	if drift == "drift_hz_per_day" {
		out.Drift = c.numberOr(drift, offsetHz, 0) / 86400
	} else {
		out.Drift = c.numberOr(drift, offsetPPM, 0) * 1e-6 * carrier.Hertz() / 86400
	}
	out.Epoch = c.mustInstant("at_utc", "the instant at which the offset held, since it drifts")
	return out
}

// hertz reads offset_hz or offset_ppm, of which one must be there.
func (o object) hertz(what string, carrier unit.Frequency) unit.Frequency {
	which, given := o.exclusive(what+"_hz", what+"_ppm")
	switch {
	case !given:
		o.missing(what+"_hz", "how far the frequency is off, true less nominal, or "+what+"_ppm")
	case which == what+"_hz":
		return unit.Frequency(o.numberOr(which, offsetHz, 0))
	default:
		return unit.Frequency(o.numberOr(which, offsetPPM, 0) * 1e-6 * carrier.Hertz())
	}
	return 0
}

// mustInstant reads an instant that must be there.
func (o object) mustInstant(key, what string) time.Time {
	if !o.has(key) {
		o.missing(key, what)
	}
	t, _ := o.instant(key)
	return t
}

// fitted is the line through measured offsets.
func (o object) fitted(carrier unit.Frequency) *downlink.Oscillator {
	before := o.r.faults.count()
	var points []downlink.OscillatorPoint
	for _, p := range o.objects("measured", "measured offsets", maxRows, measuredKeys) {
		points = append(points, downlink.OscillatorPoint{Time: p.mustInstant("at_utc", "when it was measured"), Offset: p.hertz("offset", carrier)})
	}
	if o.r.faults.count() > before {
		return nil
	}
	out, err := downlink.FitOscillator(points)
	if err != nil {
		o.addAll(o.get("measured"), "measured", err)
		return nil
	}
	o.assume("measured understood as: %s", out)
	return out
}

// coherent reads the transponder's ratio of a transmitter, nil where it has none.
func (o object) coherent() *downlink.Turnaround {
	if !o.has("coherent") {
		return nil
	}
	c := o.child("coherent", coherentKeys)
	t := &downlink.Turnaround{Uplink: c.needText("uplink", "the name of the uplink that it is locked to")}
	if !c.has("turnaround") {
		c.missing("turnaround", "the ratio of what is sent to what is received as two whole numbers, for instance [240, 221]")
		return nil
	}
	whole := span{low: 1, high: 1e6}
	r, ok := c.two("turnaround", whole)
	if !ok {
		return nil
	}
	for i, v := range r {
		if v != math.Trunc(v) {
			c.fault(c.get("turnaround"), fmt.Sprintf("turnaround[%d]", i), "%g is not allowed; it must be a whole number", "give the ratio as two whole numbers, for instance [240, 221]", v)
			return nil
		}
	}
	t.Down, t.Up = int(r[0]), int(r[1])
	return t
}

// coherentTolerance is how far a carrier may be from the turned-around uplink: rounded
// figures, no more.
const coherentTolerance = 1e-5

// checkCoherent holds the transponders of a spacecraft to its uplinks.
func (r *reader) checkCoherent(owner object, s *Spacecraft) {
	n := owner.get("transmitters")
	if n == nil || n.Kind != tree.List || len(n.Items) != len(s.Transmitters) {
		return
	}
	var known []string
	for i := range s.Uplinks {
		known = append(known, s.Uplinks[i].Name)
	}
	for i := range s.Transmitters {
		t := &s.Transmitters[i]
		if t.Turnaround == nil || t.Turnaround.Uplink == "" {
			continue
		}
		key := fmt.Sprintf("transmitters[%d].coherent", i)
		at := n.Items[i].Get("coherent")
		u := s.Uplink(t.Turnaround.Uplink)
		if u == nil {
			owner.knownNameAt(at.Get("uplink"), key+".uplink", t.Turnaround.Uplink, known)
			continue
		}
		got, want := t.Frequency.Megahertz(), u.Frequency.Megahertz()*t.Turnaround.Ratio()
		if math.Abs(got/want-1) > coherentTolerance {
			owner.fault(at, key, "%d/%d of the uplink's %g MHz is %.6f MHz, and the transmitter's frequency_mhz is %g", "give the frequencies that belong together", t.Turnaround.Down, t.Turnaround.Up, u.Frequency.Megahertz(), want, got)
		}
	}
}
