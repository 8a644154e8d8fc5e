package scenario

import (
	"fmt"
	"path/filepath"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/orbit/unit"
)

var (
	contactPlanKeys = []string{
		"step_s", "setup_s", "teardown_s", "least_contact_s", "greatest_contact_s", "split_passes", "same_beam_deg", "budget",
		"weights", "stations", "spacecraft", "limits", "shared", "closed", "closed_files",
	}
	planWeightKeys = []string{"share", "price", "change"}
	planClosedKeys = []string{"station", "antenna", "spacecraft", "from_utc", "to_utc", "reason"}
)

// Defaults of a contact plan, each told where it is taken.
const (
	defaultPlanStep     = time.Second
	defaultLeastContact = time.Minute
)

var planSeconds = atLeast(0, 86_400, "s")

// planValue is what a byte, a unit of money or a change may be worth.
var planValue = atLeast(0, 1e9, "")

// contactPlan reads the block of the plan of contacts; without one all that can be left
// out is.
func (r *reader) contactPlan(top object, s *Scenario) ContactPlan {
	o := top.child("contact_plan", contactPlanKeys)
	out := ContactPlan{Step: defaultPlanStep, Least: defaultLeastContact}
	if o.node == nil {
		return out
	}
	o.about = "contact plan"
	if o.has("step_s") {
		out.Step = o.duration("step_s", span{low: 0.001, high: 3600, unit: "s"})
	}
	out.SetUp, out.TearDown = o.planTime("setup_s"), o.planTime("teardown_s")
	if o.has("least_contact_s") {
		out.Least = o.duration("least_contact_s", span{low: 0.001, high: 86_400, unit: "s"})
	} else {
		o.assume("least_contact_s left out: a contact lasts at least %g s", out.Least.Seconds())
	}
	out.Greatest = o.duration("greatest_contact_s", above(0, 86_400, "s"))
	if out.Greatest > 0 && out.Greatest < out.Least {
		o.fault(o.get("greatest_contact_s"), "greatest_contact_s", "%g s is less than least_contact_s, %g s", "let the greatest be the longer one", out.Greatest.Seconds(), out.Least.Seconds())
	}
	out.Split = o.flag("split_passes")
	out.SameBeam = unit.Angle(o.numberOr("same_beam_deg", above(0, 90, "deg"), 0)) * unit.Degree
	o.planWeights(&out)
	out.Stations = o.planStations(s, &out)
	out.Spacecraft = o.planCraft(s)
	out.Limits = o.planLimits(s)
	if b, ok := o.number("budget", atLeast(0, 1e12, "")); ok {
		if b == 0 {
			o.warn("budget: 0: only contacts without a price can be taken")
		}
		out.Limits = append(out.Limits, PlanLimit{Name: "budget", In: WholePlan, Price: &b})
	}
	out.Shared = o.planShared(s)
	out.Closed = append(o.planClosed(s), o.planClosedFiles(s)...)
	return out
}

// duration reads seconds, 0 where the key is left out.
func (o object) duration(key string, in span) time.Duration {
	return inSeconds(o.numberOr(key, in, 0))
}

// planTime reads a set-up or tear-down time and tells where it is left out.
func (o object) planTime(key string) time.Duration {
	return inSeconds(o.zeroLeftOut(key, planSeconds))
}

func (o object) planWeights(p *ContactPlan) {
	w := o.child("weights", planWeightKeys)
	p.Share = w.numberOr("share", planValue, 0)
	p.Price = w.numberOr("price", planValue, 0)
	p.Change = w.numberOr("change", atLeast(0, 1e15, ""), 0)
}

// planClosed reads the outages and reserved times that stand in the block.
func (o object) planClosed(s *Scenario) []planfiles.Outage {
	var out []planfiles.Outage
	for i, c := range o.objects("closed", "times in which something is closed", maxRows, planClosedKeys) {
		x := planfiles.Outage{Place: fmt.Sprintf("contact_plan.closed[%d]", i)}
		x.Station, _ = c.text("station")
		x.Antenna, _ = c.text("antenna")
		x.Spacecraft, _ = c.text("spacecraft")
		x.Reason, _ = c.text("reason")
		x.Start = c.mustInstant("from_utc", "the instant at which it closes")
		x.End = c.mustInstant("to_utc", "the instant at which it opens again")
		if !x.Start.IsZero() && !x.End.IsZero() && !x.End.After(x.Start) {
			c.fault(c.get("to_utc"), "to_utc", "it opens again before it closes", "are the two reversed?")
		}
		which, given := c.exclusive("station", "spacecraft")
		if !given {
			c.missing("station", "the station or the spacecraft that is closed")
		}
		if which == "spacecraft" {
			c.useless("beside a spacecraft", "antenna")
		}
		c.closedNames(s, x)
		out = append(out, x)
	}
	return out
}

func (o object) closedNames(s *Scenario, x planfiles.Outage) {
	if x.Station != "" {
		o.knownName("station", x.Station, stationNames(s))
	}
	if x.Antenna != "" {
		o.knownName("antenna", x.Antenna, antennaNames(s, x.Station))
	}
	if x.Spacecraft != "" {
		o.knownName("spacecraft", x.Spacecraft, craftNames(s))
	}
}

// planClosedFiles reads the files of outages, CSV or iCalendar by their extension.
func (o object) planClosedFiles(s *Scenario) []planfiles.Outage {
	var out []planfiles.Outage
	for i, n := range o.items("closed_files", "file names", maxParts) {
		key := fmt.Sprintf("closed_files[%d]", i)
		name, ok := o.textAt(n, key, false)
		if !ok {
			continue
		}
		f := o.file("closed_files", name)
		if f == nil {
			continue
		}
		list, err := planfiles.Closed(name, f, ParseUTC)
		f.Close()
		o.addAll(n, key, err)
		for _, x := range list {
			o.addAll(n, key, KnownOutage(s, x))
			x.Place = filepath.Base(name) + x.Place[len(name):]
			out = append(out, x)
		}
	}
	return out
}

// KnownOutage returns an error where an outage is of nothing that the scenario holds.
func KnownOutage(s *Scenario, x planfiles.Outage) error {
	for _, n := range []struct {
		what, name string
		known      []string
	}{{"station", x.Station, stationNames(s)}, {"antenna", x.Antenna, antennaNames(s, x.Station)}, {"spacecraft", x.Spacecraft, craftNames(s)}} {
		if n.name == "" {
			continue
		}
		found := false
		for _, k := range n.known {
			found = found || k == n.name
		}
		if !found {
			return fmt.Errorf("%s: %s %s is not in the scenario; it holds %s", x.Place, n.what, quote(n.name), list(n.known))
		}
	}
	return nil
}

func stationNames(s *Scenario) (out []string) {
	for i := range s.Stations {
		out = append(out, s.Stations[i].Site.Name)
	}
	return out
}

func craftNames(s *Scenario) (out []string) {
	for i := range s.Spacecraft {
		out = append(out, s.Spacecraft[i].Name)
	}
	return out
}

// antennaNames returns the antennas of a station.
func antennaNames(s *Scenario, station string) (out []string) {
	for i := range s.Stations {
		if s.Stations[i].Site.Name == station {
			for k := range s.Stations[i].Antennas {
				out = append(out, s.Stations[i].Antennas[k].Name)
			}
		}
	}
	return out
}
