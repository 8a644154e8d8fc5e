package cli

import (
	"fmt"
	"strings"
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
	d.note(downlink.Assumption, "the Sun and the Moon in the beam, interference and outages of the station are left out")
	d.tellMounts()
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

// tellMounts notes how the mounts enter the year, or that none is stated.
func (d *dishStudy) tellMounts() {
	with, of := d.study.Moved()
	if with < of {
		var names []string
		for i := range d.links {
			if d.links[i].antenna.Mount == nil {
				names = append(names, d.links[i].station.Site.Name)
			}
		}
		d.note(downlink.Assumption, "no mount is stated at %s: what it cannot follow, by slewing and the keyhole, is not counted there; give the antenna the key mount", strings.Join(names, ", "))
	}
	if with == 0 {
		return
	}
	d.note(downlink.Assumption, "what a mount does not follow, with an error over following_error_deg or a tenth of the beam of each diameter, brings nothing and is contact time without margin; every pass has all the time that the mount needs beforehand")
	for i := range d.links {
		if m := d.links[i].antenna.Mount; m != nil && len(m.ByDiameter) == 0 {
			d.note(downlink.Assumption, "rates_by_diameter left out at %s: mounts of other diameters turn as the scenario's", d.links[i].station.Site.Name)
		}
	}
}
