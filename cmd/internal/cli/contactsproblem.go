package cli

import (
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/contacts"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// planProblem is the problem of a contact plan with what it was made of.
type planProblem struct {
	*contacts.Problem
	scenario *scenario.Scenario
	plan     *scenario.ContactPlan
	flown    []planPass // by candidate; empty for windows from outside
	force    *forcePlan // nil: there is none
	notes    []string
}

func (p *planProblem) note(format string, args ...any) {
	if text := fmt.Sprintf(format, args...); !slices.Contains(p.notes, text) {
		p.notes = append(p.notes, text)
	}
}

// newPlanProblem makes the problem of a scenario without its candidates.
func newPlanProblem(s *scenario.Scenario, now time.Time) (*planProblem, error) {
	p := &planProblem{Problem: &contacts.Problem{Start: s.Window.Start}, scenario: s, plan: &s.ContactPlan}
	p.Length = lengthMs(s.Window.Length())
	p.Now, p.Step, p.Split = p.Ms(now), lengthMs(p.plan.Step), p.plan.Split
	p.Weights = contacts.Weights{Share: p.plan.Share, Price: p.plan.Price, Change: p.plan.Change}
	for i := range s.Spacecraft {
		craft, err := p.craft(&s.Spacecraft[i])
		if err != nil {
			return nil, err
		}
		p.Spacecraft = append(p.Spacecraft, *craft)
	}
	for i := range s.Stations {
		p.station(&s.Stations[i])
	}
	return p, nil
}

func lengthMs(d time.Duration) contacts.Ms { return contacts.Ms(d / time.Millisecond) }

// craft makes a spacecraft of the problem.
func (p *planProblem) craft(c *scenario.Spacecraft) (*contacts.Spacecraft, error) {
	plan := p.plan.Craft(c.Name)
	out := &contacts.Spacecraft{
		Name: c.Name, Contract: plan.Contract, AtOnce: plan.AtOnce, Between: lengthMs(plan.Between), Repoint: lengthMs(plan.Repoint),
		HandOver: contacts.HandOver{Least: lengthMs(plan.Overlap[0]), Greatest: lengthMs(plan.Overlap[1])},
		SameData: plan.SameData, Share: plan.Share,
	}
	if k := plan.Commands; k != nil {
		out.Command = &contacts.Command{Lead: lengthMs(k.Lead), Valid: lengthMs(k.Valid)}
		for _, t := range k.Loaded {
			out.Command.Loaded = append(out.Command.Loaded, p.Ms(t))
		}
	}
	if c.Recorder == nil {
		return out, nil
	}
	nodes, err := ascendingNodes(p.scenario, c)
	if err != nil {
		return nil, err
	}
	out.Recorder = &contacts.Recorder{Capacity: c.Recorder.Capacity}
	for i := range c.Recorder.Data {
		d := &c.Recorder.Data[i]
		out.Recorder.Classes = append(out.Recorder.Classes, p.class(d, &plan, nodes))
		if d.OnBoardAge > 0 {
			p.note("%s: the age of the data on board at the start counts as 0 in the plan", c.Name)
		}
	}
	return out, nil
}

// class makes data of a recorder, apart from one another where orbits overlap.
func (p *planProblem) class(d *scenario.RecorderData, plan *scenario.PlanSpacecraft, nodes []float64) contacts.Class {
	k := contacts.Class{Name: d.Name, OnBoard: d.OnBoard, Weight: plan.ValuePerByte}
	for _, v := range plan.Data {
		if v.Name == d.Name {
			k.Weight, k.Due, k.Fade = v.ValuePerByte, lengthMs(v.Due), lengthMs(v.Fade)
		}
	}
	for _, m := range d.Class(nodes, p.Length.Seconds()).Made {
		span := contacts.Span{From: max(0, contacts.Ms(m.From*1000)), To: min(p.Length, contacts.Ms(m.To*1000))}
		if n := len(k.Made); n > 0 {
			span.From = max(span.From, k.Made[n-1].To)
		}
		if span.Length() > 0 {
			k.Made = append(k.Made, contacts.Made{Span: span, BytesPerSecond: m.BytesPerSecond})
		}
	}
	return k
}

// station makes a station of the problem and its antennas.
func (p *planProblem) station(st *scenario.Station) {
	plan := p.plan.Station(st.Site.Name)
	index := len(p.Stations)
	out := contacts.Station{Name: st.Site.Name, Zone: st.Site.TimeZone, Lead: lengthMs(plan.Lead), Notice: lengthMs(plan.Notice)}
	if len(plan.Shifts) > 0 {
		zone := st.Site.TimeZone
		if zone == nil {
			zone = time.UTC
			p.note("station %s has no time_zone: its shifts are taken in UTC", st.Site.Name)
		}
		out.Staffed = staffed(p.Problem, plan.Shifts, zone)
	}
	p.Stations = append(p.Stations, out)
	first := len(p.Antennas)
	for i := range st.Antennas {
		a := plan.Antenna(st.Antennas[i].Name)
		p.Antennas = append(p.Antennas, contacts.Antenna{Name: a.Name, Station: index, Contract: a.Contract,
			PerContact: a.PerContact, PerMinute: a.PerMinute, Slew: p.slewOf(st, &st.Antennas[i])})
	}
	if plan.Operators > 0 && len(p.Antennas) > first {
		x := contacts.Shared{Name: "operators of " + st.Site.Name, Capacity: plan.Operators, Busy: true}
		for i := first; i < len(p.Antennas); i++ {
			x.Antennas = append(x.Antennas, i)
		}
		p.Shared = append(p.Shared, x)
	}
}

// slewOf returns how a mount turns from target to target, nil where that is not known or
// the set-up has to cover it.
func (p *planProblem) slewOf(st *scenario.Station, a *station.Antenna) *contacts.Slew {
	m := a.Mount
	if m == nil {
		return nil
	}
	about := st.Site.Name + " " + a.Name
	switch {
	case m.Kind != station.ElevationOverAzimuth || m.TiltAngle != 0:
		p.note("%s: the way of its mount from one target to the next is not counted, as it is no level elevation-over-azimuth mount; let setup_s cover it", about)
		return nil
	case m.Lower.High-m.Lower.Low < 360*unit.Degree:
		p.note("%s: the way of its mount from one target to the next is not counted, as it does not reach all azimuths; let setup_s cover it", about)
		return nil
	}
	return &contacts.Slew{AzimuthDegPerS: m.Lower.Rate.DegreesPerSecond(), ElevationDegPerS: m.Upper.Rate.DegreesPerSecond(),
		FromDeg: m.Lower.Low.Degrees(), ToDeg: m.Lower.High.Degrees()}
}

// staffed returns the shifts as spans of a problem. Shifts begin and end by the clock of
// the zone, also on days on which it is changed.
func staffed(p *contacts.Problem, shifts []scenario.Shift, zone *time.Location) []contacts.Span {
	out := []contacts.Span{}
	y, m, d := p.Start.In(zone).Date()
	at := func(day int, clock time.Duration) contacts.Ms {
		return p.Ms(time.Date(y, m, day, int(clock/time.Hour), int(clock%time.Hour/time.Minute), 0, 0, zone))
	}
	for day := d - 1; at(day, 0) < p.Length; day++ {
		weekday := time.Date(y, m, day, 12, 0, 0, 0, time.UTC).Weekday()
		for _, s := range shifts {
			if len(s.Days) > 0 && !slices.Contains(s.Days, weekday) {
				continue
			}
			end := day
			if s.To <= s.From {
				end++
			}
			if span := (contacts.Span{From: at(day, s.From), To: at(end, s.To)}); span.Length() > 0 && span.From < p.Length {
				out = append(out, span)
			}
		}
	}
	return contacts.Union(out)
}

// closeTimes takes outages into the problem. What they are of must be part of it.
func (p *planProblem) closeTimes(list []planfiles.Outage) error {
	var faults []error
	for _, x := range list {
		span := contacts.Span{From: p.Ms(x.Start), To: p.Ms(x.End)}
		found := false
		for i := range p.Stations {
			if x.Spacecraft == "" && x.Antenna == "" && p.Stations[i].Name == x.Station {
				p.Stations[i].Closed, found = append(p.Stations[i].Closed, span), true
			}
		}
		for i := range p.Antennas {
			if a := &p.Antennas[i]; x.Antenna != "" && a.Name == x.Antenna && p.Stations[a.Station].Name == x.Station {
				a.Closed, found = append(a.Closed, span), true
			}
		}
		for i := range p.Spacecraft {
			if x.Spacecraft != "" && p.Spacecraft[i].Name == x.Spacecraft {
				p.Spacecraft[i].Closed, found = append(p.Spacecraft[i].Closed, span), true
			}
		}
		if !found {
			faults = append(faults, fmt.Errorf("%s: %s is not part of the plan; it has the stations %s", x.Place, outageOwner(x), quotedList(p.stationNames())))
		}
		if span.To <= 0 || span.From >= p.Length {
			p.note("%s: %s is closed outside of the window, which changes nothing", x.Place, outageOwner(x))
		}
	}
	return joinInput(faults)
}

func outageOwner(x planfiles.Outage) string {
	switch {
	case x.Spacecraft != "":
		return fmt.Sprintf("spacecraft %q", x.Spacecraft)
	case x.Antenna != "":
		return fmt.Sprintf("antenna %q of station %q", x.Antenna, x.Station)
	}
	return fmt.Sprintf("station %q", x.Station)
}

func (p *planProblem) stationNames() (out []string) {
	for i := range p.Stations {
		out = append(out, p.Stations[i].Name)
	}
	return out
}
