package fluxdensity

import (
	"fmt"
	"math"
	"strings"
	"time"

	"slantwise/orbit/unit"
)

// Outcome is the answer of a check.
type Outcome int

// Outcomes. A check passes only where every direction is known.
const (
	NotAssessed Outcome = iota
	Failed
	Passed
)

// String returns "not assessed", "fail" or "pass".
func (o Outcome) String() string { return [...]string{"not assessed", "fail", "pass"}[o] }

// Finding is one limit against one set of transmitters. Numbers that do not exist are
// NaN: all of the worst point where no direction is known, OffBoresight where no
// antenna has a boresight.
type Finding struct {
	Limit        *Limit // nil: none is known for the emission's band
	Transmitters []string
	Outcome      Outcome
	Reason       string // why it is not assessed; empty else

	Distance     unit.DB    // limit less flux density at the worst known point; negative: exceeded
	FluxDBWM2    float64    // in the reference bandwidth, there
	LimitDBWM2   float64    // there
	Arrival      unit.Angle // there, over the horizontal plane; of a point of the geostationary orbit NaN
	OffNadir     unit.Angle // of that point, as the spacecraft sees it
	OffBoresight unit.Angle
	Range        unit.Length
	Time         time.Time   // zero for the worst geometry
	Altitude     unit.Length // of the worst geometry, over its sphere; NaN along a track
}

// finding makes a finding of what a scan has seen.
func (c *check) finding(t *tally) Finding {
	nan := math.NaN()
	f := Finding{
		Limit: c.limit, Transmitters: c.names, Distance: unit.DB(nan), FluxDBWM2: nan, LimitDBWM2: nan, Arrival: unit.Angle(nan),
		OffNadir: unit.Angle(nan), OffBoresight: unit.Angle(nan), Range: unit.Length(nan), Altitude: unit.Length(nan),
	}
	if t.any && !math.IsInf(t.worst.distance, 0) {
		w := &t.worst
		f.Distance, f.FluxDBWM2, f.LimitDBWM2 = unit.DB(w.distance), w.flux, w.limit
		f.OffNadir, f.OffBoresight, f.Range = unit.Angle(w.offNadir), unit.Angle(w.off), unit.Length(w.slant)
		if c.limit.Place == Ground {
			f.Arrival = unit.Angle(math.Asin(max(0, min(1, w.arrivalSin))))
		}
	}
	switch {
	case f.Distance < 0:
		f.Outcome = Failed
	case t.unknown:
		f.Reason = c.unknownText(t)
	case math.IsNaN(float64(f.Distance)):
		f.Reason = "no power is known to arrive anywhere"
	default:
		f.Outcome = Passed
	}
	return f
}

// unknownText says which patterns are not known where.
func (c *check) unknownText(t *tally) string {
	var parts []string
	for i := range c.radiators {
		r := &c.radiators[i]
		switch {
		case r.pattern == nil:
			parts = append(parts, fmt.Sprintf("the gain of %q is not known in any direction: its EIRP holds toward the station alone", c.names[i]))
		case r.axis == axisAny && !r.whole:
			parts = append(parts, fmt.Sprintf("the pattern of %q is known to %.4g deg off boresight, and any side of it may face the ground", c.names[i], deg(r.knownTo)))
		case !r.whole && t.to > r.knownTo:
			parts = append(parts, fmt.Sprintf("the pattern of %q is known to %.4g deg off boresight; it is needed to %.4g deg", c.names[i], deg(r.knownTo), deg(t.to)))
		}
	}
	if len(parts) == 0 {
		parts = append(parts, fmt.Sprintf("a pattern is not known between %.4g and %.4g deg", deg(t.from), deg(t.to)))
	}
	return strings.Join(parts, "; ")
}

func deg(rad float64) float64 { return math.Round(rad*(180/math.Pi)*1e4) / 1e4 }
