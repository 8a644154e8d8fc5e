package cli

import (
	"fmt"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/licence"
	"slantwise/downlink/recorder"
)

// recorderContacts makes contacts of all passes over the stations, in order and apart
// from one another, each with the rate plan of its pass, with notes of what was
// shortened or left out.
func recorderContacts(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station, mode string) ([]recorder.Contact, []string, error) {
	rules := c.RatePlan
	var only []string
	if mode != "" {
		only = []string{mode}
	}
	planner, err := newRatePlanner(tx, &rules, only)
	if err != nil {
		return nil, nil, err
	}
	flights, notes, err := rateFlights(s, c, tx, stations)
	if err != nil {
		return nil, nil, err
	}
	if err := planner.settle(tracksOf(flights)); err != nil {
		return nil, nil, &InputError{Err: err}
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return nil, nil, err
	}
	var all []recorder.Contact
	commands := newCommandLinks(s, c)
	for i := range flights {
		f := &flights[i]
		one, err := recorderContact(s, c, tx, f, plans[i])
		if err != nil {
			return nil, nil, err
		}
		if works, known, err := commands.works(s, f); err != nil {
			return nil, nil, err
		} else if one.Uplink && known && !works {
			one.Uplink = false
			notes = append(notes, fmt.Sprintf("pass over %s at %s: no uplink of the scenario closes in it, so that nothing is acknowledged", f.station.Site.Name, utc(f.pass.AOS)))
		}
		all = append(all, *one)
	}
	return apart(all), append(rulesNotes(&rules, tx), notes...), nil
}

// recorderContact makes a contact of a pass: what its plan brings down, and whether
// the licences let it acknowledge.
func recorderContact(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, f *rateFlight, r *ratedPass) (*recorder.Contact, error) {
	course := licence.Course{Start: f.pass.AOS, Seconds: f.profile.Seconds, AzimuthDeg: f.profile.AzimuthDeg, ElevationDeg: f.profile.ElevationDeg}
	uplink, err := licence.Keep(licencesFor(s, c.Name, tx.Name), f.station.Site.Name, course, licence.Uplink)
	if err != nil {
		return nil, err
	}
	begin := f.pass.AOS.Sub(s.Window.Start).Seconds()
	// LOS is rounded to the millisecond, which may lie beyond the window's end.
	end := min(f.pass.LOS.Sub(s.Window.Start).Seconds(), s.Window.Length().Seconds())
	out := &recorder.Contact{Station: f.station.Site.Name, From: max(0, begin), To: end, Uplink: f.station.Uplink && len(uplink.Spans) > 0}
	for _, got := range r.plan.Receptions(f.track) {
		from, to := max(0, begin+got.From), min(end, begin+got.To)
		if to > from {
			rate := r.plan.Steps[got.Step].NetRate.BitsPerSecond() / 8
			out.Steps = append(out.Steps, recorder.Step{From: from, To: to, BytesPerSecond: rate, Loss: c.Recorder.FrameLoss})
		}
	}
	return out, nil
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
