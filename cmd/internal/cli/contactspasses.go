package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/contacts"
	"slantwise/downlink/licence"
	"slantwise/station"
	"slantwise/station/pass"
)

// planSite is an antenna as a station of its own.
type planSite struct {
	antenna int // of the problem
	station *scenario.Station
	only    scenario.Station // the station with this antenna alone
}

// planPass is the pass of a candidate.
type planPass struct {
	craft *scenario.Spacecraft
	site  *planSite
	pass  *pass.Pass
	links []planLink
}

type planLink struct {
	tx     *downlink.Transmitter
	flight *rateFlight
	rated  *ratedPass
}

// passes makes a candidate of every pass over every antenna that takes a transmitter.
func (p *planProblem) passes(ctx context.Context, env *Env) error {
	var sites []planSite
	for i := range p.scenario.Stations {
		st := &p.scenario.Stations[i]
		for a := range st.Antennas {
			one := *st
			one.Antennas = st.Antennas[a : a+1]
			sites = append(sites, planSite{antenna: len(sites), station: st, only: one})
		}
	}
	bar := env.startProgress("passes", len(p.scenario.Spacecraft))
	defer bar.stop()
	for i := range p.scenario.Spacecraft {
		if err := ctx.Err(); err != nil {
			return err
		}
		if err := p.passesOf(i, sites); err != nil {
			return err
		}
		bar.add(1)
	}
	return nil
}

// passesOf makes the candidates of a spacecraft, in the order of their begin.
func (p *planProblem) passesOf(index int, sites []planSite) error {
	c := &p.scenario.Spacecraft[index]
	plan := p.plan.Craft(c.Name)
	var found []planPass
	for t := range c.Transmitters {
		tx := &c.Transmitters[t]
		if len(plan.Transmitters) > 0 && !contains(plan.Transmitters, tx.Name) || len(tx.Modes) == 0 {
			continue
		}
		var err error
		if found, err = p.addLinks(found, c, tx, sites); err != nil {
			return err
		}
	}
	slices.SortStableFunc(found, func(a, b planPass) int { return a.pass.AOS.Compare(b.pass.AOS) })
	short, silent := 0, 0
	for i := range found {
		switch w := p.candidate(index, &found[i], &plan); {
		case w.Window.Length() < w.Least:
			short++
		case !(w.Bytes(w.Window) > 0) && !w.Uplink:
			silent++
		default:
			p.Candidates = append(p.Candidates, *w)
			found[i].links = nil // the profiles of a week over many stations would fill the memory
			p.flown = append(p.flown, found[i])
		}
	}
	if short > 0 {
		p.note("%s: %d passes are shorter than the shortest contact, %g s", c.Name, short, p.plan.Least.Seconds())
	}
	if silent > 0 {
		p.note("%s: %d passes bring nothing down in any mode", c.Name, silent)
	}
	return nil
}

// addLinks rates the passes of a transmitter over the antennas that take it.
func (p *planProblem) addLinks(found []planPass, c *scenario.Spacecraft, tx *downlink.Transmitter, sites []planSite) ([]planPass, error) {
	var only []scenario.Station
	var of []*planSite
	for i := range sites {
		a := &sites[i].only.Antennas[0]
		if len(a.Bands) == 0 || slices.ContainsFunc(a.Bands, func(b station.Band) bool { return b.Holds(tx.Frequency) }) {
			only, of = append(only, sites[i].only), append(of, &sites[i])
		}
	}
	flights, notes, err := rateFlights(p.scenario, c, tx, only)
	if err != nil {
		return nil, err
	}
	for _, n := range notes {
		p.note("%s, %s: %s", c.Name, tx.Name, n)
	}
	planner, err := newRatePlanner(tx, &c.RatePlan, nil)
	if err != nil {
		return nil, err
	}
	if err := planner.settle(tracksOf(flights)); err != nil {
		return nil, &InputError{Err: err}
	}
	rated, err := planAll(planner, flights)
	if err != nil {
		return nil, err
	}
	for i := range flights {
		f := &flights[i]
		link := planLink{tx, f, rated[i]}
		site := of[slices.IndexFunc(only, func(s scenario.Station) bool { return sameAntenna(&s, f.station) })]
		at := slices.IndexFunc(found, func(q planPass) bool { return q.site == site && q.pass.AOS.Equal(f.pass.AOS) })
		if at < 0 {
			found = append(found, planPass{craft: c, site: site, pass: f.pass})
			at = len(found) - 1
		}
		found[at].links = append(found[at].links, link)
	}
	return found, nil
}

func sameAntenna(a, b *scenario.Station) bool { return &a.Antennas[0] == &b.Antennas[0] }

// candidate makes the window of a pass.
func (p *planProblem) candidate(index int, q *planPass, plan *scenario.PlanSpacecraft) *contacts.Candidate {
	st := p.plan.Station(q.site.station.Site.Name)
	a := st.Antenna(q.site.only.Antennas[0].Name)
	from, to := q.pass.AOS.Sub(p.Start), q.pass.LOS.Sub(p.Start)
	w := &contacts.Candidate{
		Name:    fmt.Sprintf("%s %s %s %s", q.craft.Name, st.Name, a.Name, q.pass.Culmination.Format("2006-01-02T15:04Z")),
		Request: -1, Spacecraft: index, Antenna: q.site.antenna, Downlink: true,
		Window: contacts.Span{From: max(0, lengthMs(from+time.Millisecond-1)), To: min(p.Length, lengthMs(to))},
		Least:  lengthMs(p.plan.Least), Greatest: lengthMs(p.plan.Greatest), SetUp: lengthMs(a.SetUp), TearDown: lengthMs(a.TearDown),
	}
	for _, l := range q.links {
		w.Links = append(w.Links, p.linkOf(q, &l, plan))
	}
	if m := q.site.only.Antennas[0].Mount; m != nil {
		w.SetUp += contacts.Ms(math.Ceil(m.Settle * 1000))
	}
	w.Course = p.course(q.links[0].flight.profile)
	w.Uplink = p.canCommand(q)
	return w
}

// linkOf makes the bytes so far of a link, as its rate plan brings them down.
func (p *planProblem) linkOf(q *planPass, l *planLink, plan *scenario.PlanSpacecraft) contacts.Link {
	kept := 1 - plan.UplinkShare
	if r := q.craft.Recorder; r != nil {
		kept *= (1 - r.FrameLoss) * (1 - r.Housekeeping)
	}
	out := contacts.Link{Transmitter: l.tx.Name, PerByte: plan.ValuePerByte}
	begin := l.flight.pass.AOS.Sub(p.Start).Seconds()
	at := func(seconds float64) contacts.Ms { return contacts.Ms(math.Round((begin + seconds) * 1000)) }
	sum := 0.0
	for _, got := range l.rated.plan.Receptions(l.flight.track) {
		out.Volume = append(out.Volume, contacts.Point{At: at(got.From), Bytes: sum})
		sum += got.Bytes * kept
		out.Volume = append(out.Volume, contacts.Point{At: at(got.To), Bytes: sum})
	}
	return out
}

// courseStep is how far apart the directions of a course lie, in samples of a second.
const courseStep = 10

// course is where an antenna looks along a pass; azimuths do not jump at north.
func (p *planProblem) course(f *downlink.Profile) []contacts.Aim {
	begin := f.Start.Sub(p.Start).Seconds()
	turn, last := 0.0, f.AzimuthDeg[0]
	var out []contacts.Aim
	for i, s := range f.Seconds {
		switch d := f.AzimuthDeg[i] - last; {
		case d > 180:
			turn -= 360
		case d < -180:
			turn += 360
		}
		last = f.AzimuthDeg[i]
		if i%courseStep == 0 || i == len(f.Seconds)-1 {
			out = append(out, contacts.Aim{At: contacts.Ms(math.Round((begin + s) * 1000)), AzimuthDeg: last + turn, ElevationDeg: f.ElevationDeg[i]})
		}
	}
	return out
}

// canCommand tells whether the antenna can send to an uplink of the spacecraft and the
// licences let it for some of the pass.
func (p *planProblem) canCommand(q *planPass) bool {
	a := &q.site.only.Antennas[0]
	if a.Transmit == nil {
		return false
	}
	f := q.links[0].flight.profile
	course := licence.Course{Start: f.Start, Seconds: f.Seconds, AzimuthDeg: f.AzimuthDeg, ElevationDeg: f.ElevationDeg}
	for i := range q.craft.Uplinks {
		u := &q.craft.Uplinks[i]
		if len(a.Transmit.Bands) > 0 && !slices.ContainsFunc(a.Transmit.Bands, func(b station.Band) bool { return b.Holds(u.Frequency) }) {
			continue
		}
		kept, err := licence.Keep(licencesFor(p.scenario, q.craft.Name, u.Name), q.site.station.Site.Name, course, licence.Uplink)
		if err == nil && len(kept.Spans) > 0 {
			return true
		}
	}
	return false
}
