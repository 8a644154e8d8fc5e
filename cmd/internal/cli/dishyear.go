package cli

import (
	"fmt"
	"slices"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/recorder"
	"slantwise/orbit/unit"
)

// latency sends the recorder's data of the year through the contacts.
func (d *dishStudy) latency(contacts []recorder.Contact) (float64, error) {
	r := d.spacecraft.Recorder
	end := d.flight.Start.Add(time.Duration(d.flight.Days * 24 * float64(time.Hour)))
	p := &recorder.Plan{
		Start: d.flight.Start, Length: d.flight.Days * 86400, Capacity: r.Capacity, WhenFull: r.WhenFull, Housekeeping: r.Housekeeping,
		Acknowledge: r.Acknowledge, WithoutUplink: r.WithoutUplink, Copies: r.Copies, Contacts: contacts,
	}
	nodes := d.kept.AscendingNodes(d.flight.Start, end)
	for i := range r.Data {
		p.Classes = append(p.Classes, r.Data[i].Class(nodes, p.Length))
	}
	for i := range d.links {
		st := d.links[i].station
		if rate := st.Line.BitsPerSecond(); rate > 0 {
			p.Lines = append(p.Lines, recorder.Line{Station: st.Site.Name, BytesPerSecond: rate / 8})
		}
		for k := range contacts {
			if contacts[k].Station == st.Site.Name {
				contacts[k].Uplink = st.Uplink
			}
		}
	}
	for k := range contacts {
		for i := range contacts[k].Steps {
			contacts[k].Steps[i].Loss = r.FrameLoss
		}
	}
	out, err := recorder.Simulate(p)
	if err != nil {
		return 0, fmt.Errorf("spacecraft %s, recorder: %w", d.spacecraft.Name, err)
	}
	return out.Latency.AtUser.P95, nil
}

// tell notes what the answer takes for granted.
func (d *dishStudy) tell() {
	s := d.scenario
	d.note(downlink.Assumption, "%s; from %s for %g days", keptText(d.kept), utc(d.flight.Start), d.flight.Days)
	passes := 0
	for i := range d.flight.Sites {
		passes += len(d.flight.Sites[i].Passes)
	}
	d.note(downlink.Assumption, "every one of %d passes is flown, a sample each %g s; passes that overlap count once, in the order of AOS", passes, d.flight.Step.Seconds())
	if s.Path.ClearSky {
		d.note(downlink.Warning, "the sky is always clear in this scenario: no weather is in the bytes, margins and availability")
	} else {
		d.note(downlink.Assumption, "passes are planned for the attenuation exceeded in %g %% of an average year; what is sent counts by the share of the year in which the mode keeps its C/N0 with the required margin at that elevation", s.Path.Exceedance.Percents())
	}
	for _, text := range rulesNotes(&d.spacecraft.RatePlan, d.transmitter) {
		d.note(downlink.Assumption, "%s", text)
	}
	d.note(downlink.Assumption, "the Sun and the Moon in the beam, interference, outages of the station and what a mount cannot follow are left out (slantwise follow --help tells the last)")
	if slices.ContainsFunc(d.links, func(c chosenLink) bool { return c.antenna.Mount != nil }) {
		d.note(downlink.Assumption, "contacts leave out what the mounts cannot follow, with the rates and the beam of the scenario's own diameters")
	}
	for i := range d.links {
		c := &d.links[i]
		if len(c.sky.missing) > 0 {
			d.note(downlink.Warning, "station %s: %s", c.station.Site.Name, missingText(c.sky.missing))
		}
		for _, n := range c.notes(s, true) {
			d.keep(n)
		}
	}
	if f := d.transmitter.Frequency; s.Path.Ionosphere && f <= unit.Gigahertz {
		d.note(downlink.Warning, "the ionosphere's fades are not in the statistics of the year")
	}
}
