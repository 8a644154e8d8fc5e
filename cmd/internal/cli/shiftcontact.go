package cli

import (
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
	"slantwise/station/pass"
)

// contact works the numbers of a contact out.
func (j *shiftJob) contact(c *shiftChoice) (*reports.ShiftContact, error) {
	craft := c.craft(j)
	out := &reports.ShiftContact{
		Name: c.name, Spacecraft: craft.Name, Start: c.start, End: c.end, AOS: c.page.AOS, LOS: c.page.LOS, Bytes: c.bytes,
		Orbit: newOrbitHead(craft.Spacecraft, craft.Elements, c.page.AOS).String(), Cautions: c.cautions,
	}
	if c.antenna != nil {
		out.Antenna = c.antenna.Name
	}
	if c.page.Cut != 0 {
		out.Cautions = append(out.Cautions, "The window cuts this pass: it is longer than what stands here.")
	}
	out.Events = j.events(c)
	for i := range c.links {
		carrier, err := j.received(c, &c.links[i], &out.Events)
		if err != nil {
			return nil, err
		}
		if i > 0 {
			out.Others = append(out.Others, *carrier)
		}
	}
	var err error
	if len(c.links) > 0 {
		l := &c.links[0]
		out.Transmitter, out.Frequency = l.link.transmitter.Name, l.link.link.Frequency()
		if out.Steps, err = l.steps(c); err != nil {
			return nil, err
		}
		if out.Causes, err = j.causes(c, l, &out.Events); err != nil {
			return nil, err
		}
	}
	if out.Minutes, err = j.minutes(c); err != nil {
		return nil, err
	}
	out.Lost = lostWithin(c)
	for _, u := range c.ups {
		out.Uplinks = append(out.Uplinks, j.uplink(c, u, &out.Events))
	}
	out.Search = j.search(c, out)
	for _, l := range c.links {
		for _, n := range l.limits {
			if n.Kind == downlink.Warning && l.mount == nil {
				out.Cautions = append(out.Cautions, l.link.transmitter.Name+": "+n.Text+".")
			}
		}
	}
	return out, nil
}

// look is how the station sees the spacecraft.
func (j *shiftJob) look(c *shiftChoice, t time.Time) station.Look {
	e := c.craft(j).ephemeris
	return j.report.sites[c.page.Site].frame.Look(e.StateAt(max(0, min(e.Seconds(t), e.Span()))))
}

// events are the start, the highest point and the end.
func (j *shiftJob) events(c *shiftChoice) [3]reports.ShiftEvent {
	names, at := [3]string{"AOS", "culmination", "LOS"}, [3]time.Time{c.start, c.page.Culmination, c.end}
	if !c.start.Equal(c.page.AOS) || c.page.Cut&pass.CutAOS != 0 {
		names[0] = "start"
	}
	if !c.end.Equal(c.page.LOS) || c.page.Cut&pass.CutLOS != 0 {
		names[2] = "end"
	}
	if at[1].Before(c.start) || at[1].After(c.end) {
		names[1], at[1] = "highest", c.start
		if j.look(c, c.end).Elevation > j.look(c, c.start).Elevation {
			at[1] = c.end
		}
	}
	var out [3]reports.ShiftEvent
	for i := range out {
		l := j.look(c, at[i])
		out[i] = reports.ShiftEvent{Name: names[i], Time: at[i], AzimuthDeg: l.Azimuth.Degrees(), ElevationDeg: l.Elevation.Degrees(),
			RangeKm: l.Range.Kilometres(), ReceivedHz: math.NaN(), ShiftHz: math.NaN()}
	}
	return out
}

// received is the carrier of a link at the events; the first link's fills them.
func (j *shiftJob) received(c *shiftChoice, l *shiftLink, events *[3]reports.ShiftEvent) (*reports.ShiftCarrier, error) {
	tuned, err := receivedCarrier(c.craft(j).Spacecraft, l.link.transmitter, "")
	if err != nil {
		return nil, err
	}
	out := &reports.ShiftCarrier{Name: l.link.transmitter.Name}
	for i := range events {
		f := tuned.at(events[i].Time, j.look(c, events[i].Time).RangeRate)
		out.Hz[i] = f.Hertz()
		if l.link == c.links[0].link {
			events[i].ReceivedHz, events[i].ShiftHz = f.Hertz(), (f - tuned.nominal).Hertz()
		}
	}
	return out, nil
}

// uplink is what the station sends in a contact.
func (j *shiftJob) uplink(c *shiftChoice, u *modeOnPass, events *[3]reports.ShiftEvent) reports.ShiftUplink {
	tuned := sentCarrier(u.link.uplink)
	out := reports.ShiftUplink{Frequency: u.link.uplink.Frequency, EIRPDBW: math.NaN()}
	out.Name = u.link.uplink.Name
	for i := range events {
		out.Hz[i] = tuned.at(events[i].Time, j.look(c, events[i].Time).RangeRate).Hertz()
	}
	for _, s := range u.profile.Volume.Closes {
		if s, ok := cutTo(s, c.start, c.end); ok {
			out.Works = append(out.Works, s)
		}
	}
	if r, ok := u.link.radiation(); ok {
		out.EIRPDBW = r.EIRP.DBW()
	}
	return out
}

// cutTo cuts a span to a contact.
func cutTo(s downlink.Interval, from, to time.Time) (downlink.Interval, bool) {
	if s.From.Before(from) {
		s.From = from
	}
	if s.To.After(to) {
		s.To = to
	}
	return s, s.To.After(s.From)
}

// lostWithin is the time of a contact in which the mount does not follow.
func lostWithin(c *shiftChoice) []downlink.Interval {
	if len(c.links) == 0 || c.links[0].mount == nil {
		return nil
	}
	var out []downlink.Interval
	for _, l := range reportMount(c.links[0].mount, c.links[0].profile).Lost {
		if l, ok := cutTo(l, c.start, c.end); ok {
			out = append(out, l)
		}
	}
	return out
}

// beamOf is the half-power width of the main link's beam, NaN where it is not known.
func (c *shiftChoice) beamOf() unit.Angle {
	if len(c.links) == 0 {
		return unit.Angle(math.NaN())
	}
	return 2 * unit.Angle(c.links[0].profile.HalfBeamDeg) * unit.Degree
}

// lowEnd is the event of a contact's lower end.
func lowEnd(events *[3]reports.ShiftEvent) int {
	if events[2].ElevationDeg < events[0].ElevationDeg {
		return 2
	}
	return 0
}

// spans writes times of the day.
func spans(list []downlink.Interval) string {
	text := ""
	for i, s := range list {
		if i > 0 {
			text += ", "
		}
		text += fmt.Sprintf("%s to %s", s.From.UTC().Round(time.Second).Format("15:04:05"), s.To.UTC().Round(time.Second).Format("15:04:05"))
	}
	return text
}

// termOf is a term of a budget, 0 where it has none of that name.
func termOf(b *downlink.Budget, names ...string) (sum float64) {
	for _, t := range b.Terms {
		if slices.Contains(names, t.Name) {
			sum += t.Value
		}
	}
	return sum
}
