package cli

import (
	"fmt"

	"slantwise/cmd/internal/scenario"
	"slantwise/reports"
)

// addSets divides every pass among the links of each set of its spacecraft, so that pages
// can tell what a link gets where it shares the pass.
func (p *reportPlan) addSets() error {
	var stations []scenario.Station
	for i := range p.sites {
		stations = append(stations, *p.sites[i].Station)
	}
	p.sets = make([][]setFlight, len(p.craft))
	p.setOf = make([][]*scenario.LinkSet, len(p.craft))
	for i := range p.craft {
		c := p.craft[i].Spacecraft
		for k := range c.LinkSets {
			flights, _, err := setFlights(p.scenario, c, &c.LinkSets[k], stations)
			if err != nil {
				return fmt.Errorf("spacecraft %s, link set %s: %w", c.Name, c.LinkSets[k].Name, err)
			}
			for range flights {
				p.setOf[i] = append(p.setOf[i], &c.LinkSets[k])
			}
			p.sets[i] = append(p.sets[i], flights...)
		}
	}
	return nil
}

// linkSets are what the links of the sets get of a page's pass: of those sets that the
// page's transmitter is in, or all of them where the page has none.
func (p *reportPlan) linkSets(page *reportPage) []reports.LinkSet {
	if p.sets == nil {
		return nil
	}
	var out []reports.LinkSet
	site := p.sites[page.Site].Site.Name
	for i := range p.sets[page.Spacecraft] {
		f, set := &p.sets[page.Spacecraft][i], p.setOf[page.Spacecraft][i]
		if f.station.Site.Name != site || !f.pass.AOS.Equal(page.AOS) {
			continue
		}
		one := reports.LinkSet{Name: set.Name, Rule: ruleText(set), Antenna: f.station.Antennas[0].Name}
		within := page.link == nil
		for _, x := range f.shares {
			within = within || x.Link == page.link.transmitter.Name
			one.Shares = append(one.Shares, reports.LinkShare{Link: x.Link, Up: x.Up, Seconds: x.Seconds, Bytes: x.Bytes, AloneSeconds: x.AloneSeconds, AloneBytes: x.AloneBytes})
		}
		if within {
			out = append(out, one)
		}
	}
	return out
}
