package cli

import (
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/orbit"
	"slantwise/reports"
	"slantwise/station"
	"slantwise/station/pass"
)

// reportPlan is what a report will hold, before anything of a page is worked out.
type reportPlan struct {
	scenario *scenario.Scenario
	craft    []reportCraft
	sites    []reportSite
	links    [][]reportLinks // by spacecraft, by station
	uplinks  [][][]reportUplink
	pages    []reportPage
	passes   int
	warnings []string // beside the scenario's own
	rates    reportRates
	sets     [][]setFlight             // by spacecraft: its passes, divided by each of its link sets; nil: not asked for
	setOf    [][]*scenario.LinkSet     // of each of them
	logged   map[bookKey][]loggedEntry // what the logbook holds of the window; nil: nothing
}

type reportCraft struct {
	*scenario.Spacecraft
	ephemeris *orbit.Ephemeris // nil: no state in the window
}

type reportSite struct {
	*scenario.Station
	frame      station.Frame
	refraction *station.Refraction
	horizon    []reports.Direction
}

// reportLinks are the links of a spacecraft and a station, and why others are none.
type reportLinks struct {
	links   []reportLink
	without []string
}

// reportLink is a transmitter and an antenna with the modes that compete on it: one
// link each, and one without a mode where the transmitter has none.
type reportLink struct {
	transmitter *downlink.Transmitter
	antenna     *station.Antenna
	modes       []chosenLink
}

// reportPage is a page to be made: a pass, and the link on it.
type reportPage struct {
	pass.Found
	link *reportLink // nil: geometry alone
	many bool        // the pass has other pages
}

func planReport(ctx context.Context, s *scenario.Scenario, o reportOptions) (*reportPlan, error) {
	p := &reportPlan{scenario: s}
	if err := p.choose(o); err != nil {
		return nil, err
	}
	if err := p.fly(); err != nil {
		return nil, err
	}
	if err := p.prepareLinks(o.mode); err != nil {
		return nil, err
	}
	return p, p.search(ctx, o.workers)
}

// choose takes the spacecraft and stations that the command line names.
func (p *reportPlan) choose(o reportOptions) error {
	craft, err := pickMany("spacecraft", o.spacecraft, p.scenario.Spacecraft, func(c *scenario.Spacecraft) string { return c.Name })
	if err != nil {
		return err
	}
	sites, err := pickMany("station", o.stations, p.scenario.Stations, func(s *scenario.Station) string { return s.Site.Name })
	if err != nil {
		return err
	}
	for i := range craft {
		p.craft = append(p.craft, reportCraft{Spacecraft: &craft[i]})
	}
	for i := range sites {
		site := reportSite{Station: &sites[i], frame: sites[i].Site.Frame()}
		if site.refraction, err = station.NewRefraction(site.Site.HeightAboveSea()); err != nil {
			return fmt.Errorf("station %s: %w", site.Site.Name, err)
		}
		site.horizon = horizonOf(&site, p.scenario.Horizon)
		p.sites = append(p.sites, site)
	}
	return nil
}

// fly propagates the spacecraft over the window. One that has no state in it is told
// of and has no pass; when that is so for all, it is an error.
func (p *reportPlan) fly() error {
	w := p.scenario.Window
	var faults []error
	for i := range p.craft {
		c := &p.craft[i]
		e, err := p.scenario.Ephemeris(c.Spacecraft, w.Start, w.End, nil)
		if ended(err) {
			continue // no passes, and the scenario's warning says why
		}
		if err != nil {
			faults = append(faults, fmt.Errorf("spacecraft %s: %w", c.Name, err))
			continue
		}
		if cut := e.Truncated(); cut != nil {
			p.warnings = append(p.warnings, fmt.Sprintf("spacecraft %s: %v", c.Name, cut))
		}
		c.ephemeris = e
	}
	if len(faults) > 0 && len(faults) == len(p.craft) {
		return &InputError{Err: errors.Join(faults...)}
	}
	for _, f := range faults {
		p.warnings = append(p.warnings, f.Error())
	}
	return nil
}

// prepareLinks makes every link that bands and tables allow.
func (p *reportPlan) prepareLinks(mode string) error {
	found := mode == ""
	var known []string
	p.links = make([][]reportLinks, len(p.craft))
	p.uplinks = make([][][]reportUplink, len(p.craft))
	sky := newSkies(p.scenario)
	for i, c := range p.craft {
		p.links[i] = make([]reportLinks, len(p.sites))
		p.uplinks[i] = make([][]reportUplink, len(p.sites))
		for t := range c.Transmitters {
			for m := range c.Transmitters[t].Modes {
				known = append(known, c.Transmitters[t].Modes[m].Name)
				found = found || c.Transmitters[t].Modes[m].Name == mode
			}
		}
		for u := range c.Uplinks {
			for m := range c.Uplinks[u].Modes {
				known = append(known, c.Uplinks[u].Modes[m].Name)
				found = found || c.Uplinks[u].Modes[m].Name == mode
			}
		}
		for k := range p.sites {
			p.links[i][k] = linksBetween(sky, c.Spacecraft, &p.sites[k], mode)
			p.warnMissing(&p.sites[k], p.links[i][k].links)
			p.uplinks[i][k] = p.uplinksBetween(sky, &p.craft[i], &p.sites[k], mode)
		}
	}
	if !found {
		return inputErrorf("--mode: no transmitter or uplink of these spacecraft has a mode %q%s; they have %s", mode, meant(mode, known), quotedList(known))
	}
	return nil
}

// warnMissing tells once a station which parts of the path its numbers lack.
func (p *reportPlan) warnMissing(site *reportSite, links []reportLink) {
	for _, l := range links {
		if parts := l.modes[0].sky.missing; len(parts) > 0 {
			if text := "station " + site.Site.Name + ": " + missingText(parts); !slices.Contains(p.warnings, text) {
				p.warnings = append(p.warnings, text)
			}
		}
	}
}

func linksBetween(k *skies, c *scenario.Spacecraft, st *reportSite, mode string) reportLinks {
	var out reportLinks
	for t := range c.Transmitters {
		for a := range st.Antennas {
			one := reportLink{transmitter: &c.Transmitters[t], antenna: &st.Antennas[a]}
			for _, m := range competing(one.transmitter.Modes, mode) {
				link := chosenLink{spacecraft: c, station: st.Station, refraction: st.refraction, transmitter: one.transmitter, antenna: one.antenna, mode: m}
				if err := link.prepare(k); err != nil {
					out.without = append(out.without, fmt.Sprintf("%s to %s: %v", one.transmitter.Name, one.antenna.Name, err))
					break // the fault is the antenna's and so that of all modes
				}
				one.modes = append(one.modes, link)
			}
			if len(one.modes) > 0 {
				out.links = append(out.links, one)
			}
		}
	}
	return out
}

// competing returns the mode of a name where it is among the modes, else all; a single
// nil where there are none.
func competing(modes []modem.Mode, name string) []*modem.Mode {
	if len(modes) == 0 {
		return []*modem.Mode{nil}
	}
	all := make([]*modem.Mode, len(modes))
	for i := range modes {
		all[i] = &modes[i]
		if modes[i].Name == name {
			return all[i : i+1]
		}
	}
	return all
}

// search finds the passes and lays out the pages, by AOS.
func (p *reportPlan) search(ctx context.Context, workers int) error {
	job := pass.Job{
		Spacecraft: len(p.craft),
		Ephemeris:  func(i int, _ *orbit.Ephemeris) (*orbit.Ephemeris, error) { return p.craft[i].ephemeris, nil },
		Window:     pass.Window{From: p.scenario.Window.Start, To: p.scenario.Window.End},
		Decides:    p.scenario.Horizon, Workers: workers,
	}
	for i := range p.sites {
		job.Sites = append(job.Sites, &p.sites[i].Site)
	}
	list, err := pass.SearchAll(ctx, job)
	if err != nil {
		return err
	}
	p.passes = list.Len()
	for f := range list.All() {
		links := p.links[f.Spacecraft][f.Site].links
		for l := range links {
			p.pages = append(p.pages, reportPage{Found: f, link: &links[l], many: len(links) > 1})
		}
		if len(links) == 0 {
			p.pages = append(p.pages, reportPage{Found: f})
		}
	}
	return nil
}

// report is the plan as the package of reports takes it.
func (p *reportPlan) report() *reports.Report {
	s := p.scenario
	r := &reports.Report{
		Title: filepath.Base(s.Label), From: s.Window.Start, To: s.Window.End, Horizon: s.Horizon,
		Notes: p.generalNotes(), Basis: basisOf(s, p.flown(), reports.CautionPass), Load: p.load,
	}
	for _, page := range p.pages {
		k := reports.Key{Spacecraft: p.craft[page.Spacecraft].Name, Station: p.sites[page.Site].Site.Name, AOS: page.AOS}
		if page.many {
			k.Link = page.link.transmitter.Name + " " + page.link.antenna.Name
		}
		r.Keys = append(r.Keys, k)
	}
	return r
}

// flown are the spacecraft of the report.
func (p *reportPlan) flown() []*scenario.Spacecraft {
	var out []*scenario.Spacecraft
	for i := range p.craft {
		out = append(out, p.craft[i].Spacecraft)
	}
	return out
}

// noteKinds maps the kinds of a link's notes to those of a report.
var noteKinds = map[downlink.NoteKind]reports.NoteKind{
	downlink.Assumption: reports.Assumption, downlink.Warning: reports.Warning,
}
