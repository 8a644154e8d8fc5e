package sizing

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Requirements are what a station has to reach; NaN (nil) asks for nothing. None makes
// them at the start.
type Requirements struct {
	BytesPerDay           float64 // mean over the year, weather included
	WorstWeekBytesPerDay  float64 // mean over the seven days of geometry in a row that bring the least
	WorstMonthBytesPerDay float64 // mean over the geometry of the year under the weather of the average worst month

	Margin       *MarginAt // as in the budget, at the orbit's range there
	MarginShare  *MarginOver
	Availability float64 // percent of contact time with the mode's margin over the required one at 0 or more
	LongestGap   float64 // hours between contacts that close
	Latency      float64 // hours, the age at delivery of 95 % of the data
}

// MarginAt asks for a margin at an elevation, under the weather that is planned with.
type MarginAt struct {
	Elevation unit.Angle
	Margin    unit.DB
}

// MarginOver asks for a margin during a share of the contact time, in percent, by the
// path's statistics.
type MarginOver struct {
	Percent float64
	Margin  unit.DB
}

// None asks for nothing.
func None() Requirements {
	nan := math.NaN()
	return Requirements{BytesPerDay: nan, WorstWeekBytesPerDay: nan, WorstMonthBytesPerDay: nan, Availability: nan, LongestGap: nan, Latency: nan}
}

// Check returns every fault of the requirements.
func (r *Requirements) Check() error {
	var faults []error
	check := func(what string, v, low, high float64, u string) {
		if !(math.IsNaN(v) || v > low && v <= high) {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: fmt.Sprintf("above %g to %g %s", low, high, u)})
		}
	}
	check("bytes per day", r.BytesPerDay, 0, 1e18, "B")
	check("bytes per day of the worst week", r.WorstWeekBytesPerDay, 0, 1e18, "B")
	check("bytes per day of the worst month", r.WorstMonthBytesPerDay, 0, 1e18, "B")
	check("availability", r.Availability, 0, 100, "%")
	check("longest gap", r.LongestGap, 0, 876_600, "h")
	check("latency", r.Latency, 0, 876_600, "h")
	if r.Margin != nil {
		check("elevation of the margin", r.Margin.Elevation.Degrees(), -5, 90, "deg")
	}
	if r.MarginShare != nil {
		check("share of contact time", r.MarginShare.Percent, 0, 100, "%")
	}
	return errors.Join(faults...)
}

// Kind names a requirement.
type Kind string

// Requirements by the key that asks for them.
const (
	Bytes           Kind = "bytes_per_day"
	WorstWeekBytes  Kind = "worst_week_bytes_per_day"
	WorstMonthBytes Kind = "worst_month_bytes_per_day"
	MarginThere     Kind = "margin_at_elevation"
	MarginTime      Kind = "margin_for_contact_share"
	AvailableShare  Kind = "availability_percent"
	Gap             Kind = "longest_gap_h"
	Age             Kind = "latency_p95_h"
)

// Need is one requirement with how it is measured.
type Need struct {
	Kind     Kind
	Unit     string
	Required float64
	Most     bool // the value must be at most what is required, not at least
	part     part
	of       func(*Outcome) float64
}

// Reached returns what an outcome reaches of the requirement, NaN where nothing does.
func (n *Need) Reached(o *Outcome) float64 { return n.of(o) }

// Over returns by how much an outcome is better than required, negative where it is
// not; -Inf where there is no value.
func (n *Need) Over(o *Outcome) float64 {
	d := n.of(o) - n.Required
	if n.Most {
		d = -d
	}
	if math.IsNaN(d) {
		return math.Inf(-1)
	}
	return d
}

// Met tells whether an outcome satisfies the requirement, rounding aside.
func (n *Need) Met(o *Outcome) bool { return n.Over(o) >= -1e-12*math.Abs(n.Required) }

// List returns the requirements that are asked for, in a fixed order.
func (r *Requirements) List() []Need {
	var out []Need
	add := func(k Kind, u string, p part, required float64, most bool, of func(*Outcome) float64) {
		if !math.IsNaN(required) {
			out = append(out, Need{k, u, required, most, p, of})
		}
	}
	add(Bytes, "B/d", planned, r.BytesPerDay, false, func(o *Outcome) float64 { return o.BytesPerDay })
	add(WorstWeekBytes, "B/d", planned, r.WorstWeekBytesPerDay, false, func(o *Outcome) float64 { return o.WorstWeekBytesPerDay })
	add(WorstMonthBytes, "B/d", planned|months, r.WorstMonthBytesPerDay, false, func(o *Outcome) float64 { return o.WorstMonthBytesPerDay })
	if r.Margin != nil {
		add(MarginThere, "dB", margins, float64(r.Margin.Margin), false, func(o *Outcome) float64 { return o.MarginDB })
	}
	if r.MarginShare != nil {
		add(MarginTime, "dB", margins, float64(r.MarginShare.Margin), false, func(o *Outcome) float64 { return o.ShareMarginDB })
	}
	add(AvailableShare, "%", availability, r.Availability, false, func(o *Outcome) float64 { return o.AvailabilityPercent })
	add(Gap, "h", gaps, r.LongestGap, true, func(o *Outcome) float64 { return o.LongestGapH })
	add(Age, "h", planned, r.Latency, true, func(o *Outcome) float64 { return o.LatencyH })
	return out
}
