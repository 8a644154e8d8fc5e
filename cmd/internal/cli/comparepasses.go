package cli

import (
	"fmt"
	"math"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/station/pass"
)

// comparedPass is a pass of one file or of both, with what its links bring.
type comparedPass struct {
	craft, station   string
	at               [2]*pass.Pass // nil: this file has none
	links            [2]compared
	plusMinus        [2]float64 // one standard deviation of AOS, s
	change           string
	byAOS, byLOS     float64 // s
	maxElevationDegs [2]float64
}

// compared is what the links of a pass bring.
type compared struct{ marginDB, bytes, uplinkDB float64 }

// add adds the passes of a spacecraft.
func (c *comparison) add(craft [2]*scenario.Spacecraft) error {
	var by [2]*comparedSide
	for i := range c.sides {
		over := make([]scenario.Station, len(c.stations))
		for k := range c.stations {
			over[k] = *c.stations[k][i]
		}
		var err error
		if by[i], err = c.options.side(c.sides[i], craft[i], over); err != nil {
			return err
		}
		for _, n := range by[i].notes {
			c.notes = append(c.notes, fmt.Sprintf("%s, %s: %s", c.sides[i].Label, craft[i].Name, n))
		}
	}
	for _, st := range c.stations {
		var lists [2][]pass.Pass
		var sure [2]func(*pass.Pass) float64
		for i := range c.sides {
			var eph *orbit.Ephemeris
			var err error
			if eph, lists[i], err = passesOver(c.sides[i], craft[i], st[i]); err != nil {
				return err
			}
			if sure[i], err = plusMinusOfAOS(c.sides[i], craft[i], st[i], eph); err != nil {
				return err
			}
		}
		for _, p := range pass.Align(lists[0], lists[1], c.options.apart) {
			one := comparedPass{craft: craft[0].Name, station: st[0].Site.Name, at: [2]*pass.Pass{p.Before, p.After}}
			for i, q := range one.at {
				one.links[i], one.plusMinus[i] = by[i].of(one.station, q), sure[i](q)
			}
			one.judge()
			c.passes = append(c.passes, one)
		}
	}
	return nil
}

// plusMinusOfAOS returns a function that tells one standard deviation of a pass's AOS in
// s: a number that does not exist where the scenario states no uncertainty, or where the
// pass may not take place at all.
func plusMinusOfAOS(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station, eph *orbit.Ephemeris) (func(*pass.Pass) float64, error) {
	if c.Uncertainty == nil {
		return func(*pass.Pass) float64 { return none }, nil
	}
	uncertainty, _, err := s.AssumedUncertainty(c, s.Window.Start, s.Window.End)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	gauge, err := pass.NewGauge(&st.Site, s.Horizon)
	if err != nil {
		return nil, err
	}
	return func(p *pass.Pass) float64 {
		if p == nil {
			return none
		}
		m, err := gauge.PlusMinus(eph, p, uncertainty)
		if err != nil { // the uncertainty is not known there
			return none
		}
		return m.AOS
	}, nil
}

// judge says what became of the pass and by how much it moved.
func (p *comparedPass) judge() {
	p.byAOS, p.byLOS = none, none
	for i, at := range p.at {
		p.maxElevationDegs[i] = none
		if at != nil {
			p.maxElevationDegs[i] = at.MaxElevation.Degrees()
		}
	}
	switch {
	case p.at[1] == nil:
		p.change = "gone"
	case p.at[0] == nil:
		p.change = "new"
	default:
		p.byAOS, p.byLOS = p.at[1].AOS.Sub(p.at[0].AOS).Seconds(), p.at[1].LOS.Sub(p.at[0].LOS).Seconds()
		p.change = "moved"
		if p.byAOS == 0 && p.byLOS == 0 {
			p.change = "same"
		}
	}
}

// same tells whether the pass stayed as it was, its links too.
func (p *comparedPass) same() bool {
	a, b := p.links[0], p.links[1]
	return p.change == "same" && sameNumber(a.marginDB, b.marginDB) && sameNumber(a.bytes, b.bytes) && sameNumber(a.uplinkDB, b.uplinkDB)
}

func sameNumber(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }

// row is the pass in the order of the columns.
func (p *comparedPass) row() []any {
	var aos [2]string
	for i, at := range p.at {
		if at != nil {
			aos[i] = utc(at.AOS)
		}
	}
	a, b := p.links[0], p.links[1]
	return []any{p.craft, p.station, p.change, aos[0], aos[1], p.byAOS, p.byLOS, p.maxElevationDegs[0], p.maxElevationDegs[1],
		a.marginDB, b.marginDB, a.bytes, b.bytes, p.plusMinus[0], p.plusMinus[1], a.uplinkDB, b.uplinkDB}
}

// comparedSide are the links of one file's spacecraft, by station and AOS.
type comparedSide struct {
	links map[string]map[time.Time]compared
	notes []string
}

// of returns what the links of a pass bring, numbers that do not exist without one.
func (s *comparedSide) of(station string, p *pass.Pass) compared {
	if p != nil {
		if found, ok := s.links[station][p.AOS]; ok {
			return found
		}
	}
	return compared{none, none, none}
}

// put changes what is kept of a pass.
func (s *comparedSide) put(station string, aos time.Time, change func(*compared)) {
	if s.links[station] == nil {
		s.links[station] = map[time.Time]compared{}
	}
	one, ok := s.links[station][aos]
	if !ok {
		one = compared{none, none, none}
	}
	change(&one)
	s.links[station][aos] = one
}
