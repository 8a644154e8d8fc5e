package cli

import (
	"cmp"
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/licence"
	"slantwise/downlink/modem"
	"slantwise/downlink/recorder"
	"slantwise/orbit"
	"slantwise/station/pass"
)

// recorderContacts makes contacts of all passes over the stations, in order and apart
// from one another, with notes of what was shortened or left out.
func recorderContacts(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station, mode string) ([]recorder.Contact, []string, error) {
	var all []recorder.Contact
	var notes []string
	sky := newSkies(s)
	if mode != "" {
		if _, err := pick("mode", mode, tx.Modes, func(m *modem.Mode) string { return m.Name }); err != nil {
			return nil, nil, err
		}
	}
	for i := range stations {
		st := &stations[i]
		links, why := modesOver(sky, c, st, tx, mode)
		if len(links) == 0 {
			notes = append(notes, fmt.Sprintf("no contact over %s: %s", st.Site.Name, why))
			continue
		}
		eph, found, err := passesOver(s, c, st)
		if err != nil {
			return nil, nil, err
		}
		for k := range found {
			one, told, err := recorderContact(s, c, st, links, eph, &found[k])
			if err != nil {
				return nil, nil, err
			}
			notes = append(notes, told...)
			all = append(all, *one)
		}
	}
	slices.SortStableFunc(all, func(a, b recorder.Contact) int { return cmp.Compare(a.From, b.From) })
	return apart(all), notes, nil
}

// modesOver prepares the transmitter's modes to the first antenna of the station that
// takes them.
func modesOver(sky *skies, c *scenario.Spacecraft, st *scenario.Station, tx *downlink.Transmitter, mode string) (links []chosenLink, why string) {
	why = "it has no antenna"
	if len(tx.Modes) == 0 {
		return nil, "the transmitter has no mode"
	}
	for _, l := range linksBetween(sky, &scenario.Spacecraft{Name: c.Name, Transmitters: []downlink.Transmitter{*tx}}, st, mode).links {
		return l.modes, ""
	}
	if len(st.Antennas) > 0 {
		why = "no antenna takes the transmitter"
	}
	return nil, why
}

// recorderContact makes a contact of a pass: the mode that brings most, while its
// margin holds and the licences allow it.
func recorderContact(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station, links []chosenLink, eph *orbit.Ephemeris, p *pass.Pass) (*recorder.Contact, []string, error) {
	var best *downlink.Profile
	for i := range links {
		f, err := links[i].link.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
		if err != nil {
			return nil, nil, &InputError{Err: fmt.Errorf("%s over %s: %w", c.Name, st.Site.Name, err)}
		}
		if best == nil || f.Volume.ModeBytes > best.Volume.ModeBytes {
			best = f
		}
	}
	licences := licencesFor(s, c.Name, links[0].transmitter.Name)
	course := licence.Course{Start: p.AOS, Seconds: best.Seconds, AzimuthDeg: best.AzimuthDeg, ElevationDeg: best.ElevationDeg}
	kept, err := licence.Keep(licences, st.Site.Name, course, licence.Downlink)
	if err != nil {
		return nil, nil, err
	}
	var notes []string
	for _, b := range kept.Bindings {
		notes = append(notes, fmt.Sprintf("pass over %s at %s: %s", st.Site.Name, utc(p.AOS), b))
	}
	uplink, err := licence.Keep(licences, st.Site.Name, course, licence.Uplink)
	if err != nil {
		return nil, nil, err
	}
	begin := p.AOS.Sub(s.Window.Start).Seconds()
	// LOS is rounded to the millisecond, which may lie beyond the window's end.
	end := min(p.LOS.Sub(s.Window.Start).Seconds(), s.Window.Length().Seconds())
	out := &recorder.Contact{Station: st.Site.Name, From: max(0, begin), To: end, Uplink: st.Uplink && len(uplink.Spans) > 0}
	for _, closes := range best.Volume.Closes {
		from, to := closes.From.Sub(p.AOS).Seconds(), closes.To.Sub(p.AOS).Seconds()
		for _, k := range kept.Spans {
			a, b := max(0, begin+max(from, k.From))+c.Recorder.LockOn, min(end, begin+min(to, k.To))
			if b > a {
				out.Steps = append(out.Steps, recorder.Step{From: a, To: b, BytesPerSecond: best.DataRate.BitsPerSecond() / 8, Loss: c.Recorder.FrameLoss})
			}
		}
	}
	return out, notes, nil
}

// apart shortens contacts so that none begins before the one in front of it ends; one
// of which nothing is left is dropped.
func apart(contacts []recorder.Contact) []recorder.Contact {
	var out []recorder.Contact
	for _, c := range contacts {
		if n := len(out); n > 0 {
			c.From = max(c.From, out[n-1].To)
		}
		if !(c.To > c.From) {
			continue
		}
		var steps []recorder.Step
		for _, st := range c.Steps {
			st.From = max(st.From, c.From)
			if st.To > st.From {
				steps = append(steps, st)
			}
		}
		c.Steps = steps
		out = append(out, c)
	}
	return out
}
