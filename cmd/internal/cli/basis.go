package cli

import (
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/propagation"
	"slantwise/orbit/elements"
	"slantwise/reports"
)

// basisOf tells what the numbers of a page from a scenario stand on, for the spacecraft
// that it is about; none for a path alone.
func basisOf(s *scenario.Scenario, craft []*scenario.Spacecraft, caution reports.Caution) reports.Basis {
	b := reports.Basis{Scenario: filepath.Base(s.Label), Program: version(), Caution: caution, Models: modelsOf(s, craft)}
	for _, c := range craft {
		b.Orbits = append(b.Orbits, basisOrbits(s, c)...)
	}
	for _, a := range s.Assumptions {
		b.Defaults = append(b.Defaults, reports.Note{Kind: reports.Default, About: a.About, Text: a.Text})
	}
	return b
}

// about keeps the defaults that hold for all and those about what is named, such as
// "station Skerry Point", and its parts.
func about(b reports.Basis, names ...string) reports.Basis {
	var kept []reports.Note
	for _, n := range b.Defaults {
		if general(scenario.Note{About: n.About}) || slices.ContainsFunc(names, func(name string) bool { return n.About == name || strings.HasPrefix(n.About, name+", ") }) {
			kept = append(kept, n)
		}
	}
	b.Defaults = kept
	return b
}

// allCraft are all spacecraft of a scenario.
func allCraft(s *scenario.Scenario) []*scenario.Spacecraft {
	var out []*scenario.Spacecraft
	for i := range s.Spacecraft {
		out = append(out, &s.Spacecraft[i])
	}
	return out
}

// basisOrbits are the orbits that a spacecraft is flown by over the window: of element
// sets that change within it, that of its start and that of its end.
func basisOrbits(s *scenario.Scenario, c *scenario.Spacecraft) []reports.BasisOrbit {
	first, last := s.Window.Start, s.Window.End
	if first.IsZero() {
		return nil // a stated geometry flies nothing
	}
	from, to := c.ElementsAt(first), c.ElementsAt(last)
	one := func(set elements.Chosen) reports.BasisOrbit {
		h := newOrbitHead(c, set, first)
		o := reports.BasisOrbit{Spacecraft: c.Name, Orbit: h.plain()}
		if c.Orbit.HasEpoch() {
			o.Epoch, o.AgeFrom, o.AgeTo = set.Epoch, set.Elements.Age(first), set.Elements.Age(last)
		}
		return o
	}
	if !c.Orbit.HasEpoch() || from.Epoch.Equal(to.Epoch) {
		return []reports.BasisOrbit{one(from)}
	}
	return []reports.BasisOrbit{one(from), one(to)}
}

// plain is the orbit without its epoch and age.
func (h *orbitHead) plain() string {
	if h.kind == scenario.OnEphemeris {
		return h.String()
	}
	what := h.kind.String()
	if h.kind.HasNumber() {
		what = fmt.Sprintf("element set %d", h.elements.CatalogNumber)
	}
	if f := h.file(); f != "" {
		what += " of " + f
	}
	return what
}

// modelsOf lists the models that the scenario asks for, with their editions.
func modelsOf(s *scenario.Scenario, craft []*scenario.Spacecraft) []reports.BasisModel {
	var out []reports.BasisModel
	tabulated, theory := false, false
	for _, c := range craft {
		tabulated, theory = tabulated || c.Trajectory != nil, theory || c.Trajectory == nil
	}
	if theory {
		out = append(out, reports.BasisModel{Of: "orbit", Name: "SGP4, Spacetrack Report No. 3 as revised in AIAA 2006-6753"})
	}
	if tabulated {
		out = append(out, reports.BasisModel{Of: "orbit", Name: "tabulated states between their points as their OEM asks, CCSDS 502.0-B"})
	}
	switch {
	case craft == nil: // the air alone
	case !radioIn(craft):
		return out
	default:
		out = append(out, reports.BasisModel{Of: "free space", Name: "Rec. ITU-R P.525"})
	}
	p, e := &s.Path, propagation.Newest
	add := func(is bool, of string, names ...string) {
		if is {
			out = append(out, reports.BasisModel{Of: of, Name: "Rec. ITU-R " + strings.Join(names, ", ")})
		}
	}
	p618, p676, p840 := fmt.Sprintf("P.618-%d", e.P618), fmt.Sprintf("P.676-%d", e.P676), fmt.Sprintf("P.840-%d", e.P840)
	add(p.Gas || p.ClearSky, "gases", p676, "P.835-6")
	add(p.Rain && !p.ClearSky, "rain", p618, "P.837-7", "P.838-3", "P.839-4")
	add(p.Cloud && !p.ClearSky, "cloud", p840)
	add(p.Scintillation && !p.ClearSky, "scintillation", p618, "P.453-14")
	add(p.Ionosphere, "ionosphere", "P.531-14")
	add(true, "noise of the sky", "P.372-16")
	return out
}

func radioIn(craft []*scenario.Spacecraft) bool {
	for _, c := range craft {
		if len(c.Transmitters)+len(c.Uplinks) > 0 {
			return true
		}
	}
	return false
}
