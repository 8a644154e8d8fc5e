package cli

import (
	"fmt"
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/reports"
	"slantwise/station"
)

// generalNotes are those of the index: all warnings, and what holds for every pass.
func (p *reportPlan) generalNotes() []reports.Note {
	var out []reports.Note
	for _, w := range p.scenario.Warnings {
		out = append(out, reports.Note{Kind: reports.Warning, About: w.About, Text: w.Text})
	}
	for _, w := range p.warnings {
		out = append(out, reports.Note{Kind: reports.Warning, Text: w})
	}
	for _, a := range p.scenario.Assumptions {
		if general(a) {
			out = append(out, reports.Note{Kind: reports.Default, About: a.About, Text: a.Text})
		}
	}
	return out
}

// pageNotes are those of one page: what concerns its spacecraft, station and chosen
// link, nil for geometry alone.
func (p *reportPlan) pageNotes(page *reportPage, chosen *chosenLink) []reports.Note {
	craft, site := p.craft[page.Spacecraft], p.sites[page.Site]
	var out []reports.Note
	keep := func(kind reports.NoteKind, list []scenario.Note) {
		for _, n := range list {
			if general(n) || concerns(n.About, craft.Name, site.Site.Name, chosen) || p.touchesUplink(page, n.About) {
				out = append(out, reports.Note{Kind: kind, About: n.About, Text: n.Text})
			}
		}
	}
	keep(reports.Warning, p.scenario.Warnings)
	out = append(out, horizonNote(site, p.scenario.Horizon))
	if chosen != nil {
		out = append(out, linkNotes(chosen, len(page.link.modes))...)
	} else {
		for _, w := range p.links[page.Spacecraft][page.Site].without {
			out = append(out, reports.Note{Kind: reports.Assumption, About: "no link", Text: w})
		}
	}
	keep(reports.Default, p.scenario.Assumptions)
	return out
}

// touchesUplink tells whether a note is about an uplink of the page.
func (p *reportPlan) touchesUplink(page *reportPage, about string) bool {
	for _, u := range p.uplinks[page.Spacecraft][page.Site] {
		for i := range u.modes {
			if u.modes[i].touchedBy(about) {
				return true
			}
		}
	}
	return false
}

func linkNotes(c *chosenLink, modes int) []reports.Note {
	var out []reports.Note
	for _, n := range c.linkNotes() {
		if n.Kind == downlink.Default { // the scenario lists each of these with its key
			continue
		}
		out = append(out, reports.Note{Kind: noteKinds[n.Kind], Text: n.Text})
	}
	if modes > 1 {
		out = append(out, reports.Note{Kind: reports.Assumption, About: "mode",
			Text: fmt.Sprintf("of %d modes, %s brings the most bytes in this pass, held from AOS to LOS; --mode takes another", modes, c.mode.Name)})
	}
	return out
}

// horizonNote says which elevations are compared at a station.
func horizonNote(site reportSite, decides station.ElevationKind) reports.Note {
	text := fmt.Sprintf("the %v elevation decides AOS and LOS, above %.4g deg", decides, site.Site.MinimumElevation.Degrees())
	if m := site.Site.Mask; m != nil {
		text += fmt.Sprintf(" and above the horizon mask, which is compared in %v elevation, as it was made", m.Kind())
	}
	return reports.Note{Kind: reports.Assumption, About: "station " + site.Site.Name, Text: text}
}

// general tells whether a note is about no spacecraft and no station.
func general(n scenario.Note) bool {
	return !strings.HasPrefix(n.About, "spacecraft ") && !strings.HasPrefix(n.About, "station ")
}

// concerns tells whether what a note is about ("spacecraft A, transmitter B, mode C",
// "station D, antenna E") has to do with a page.
func concerns(about, craft, site string, link *chosenLink) bool {
	part := func(rest, kind, name string) (after string, ok bool) {
		after, ok = strings.CutPrefix(rest, kind+" "+name)
		if !ok || after == "" {
			return "", ok
		}
		return strings.CutPrefix(after, ", ")
	}
	rest, ok := part(about, "spacecraft", craft)
	if ok && rest != "" && link != nil {
		if rest, ok = part(rest, "transmitter", link.transmitter.Name); ok && rest != "" && link.mode != nil {
			_, ok = part(rest, "mode", link.mode.Name)
		}
		return ok
	}
	if ok {
		return rest == ""
	}
	rest, ok = part(about, "station", site)
	if ok && rest != "" && link != nil {
		_, ok = part(rest, "antenna", link.antenna.Name)
		return ok
	}
	return ok && rest == ""
}
