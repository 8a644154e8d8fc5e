package cli

import (
	"math"
	"sync"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/station/pass"
)

// plusMinusColumns follow the columns of the list where the plus-minus is asked for: one
// standard deviation each, then the probability that the pass takes place.
var plusMinusColumns = []string{"aos_plus_minus_s", "los_plus_minus_s", "max_elevation_plus_minus_deg", "existence_probability"}

// passSureness is what a list keeps of how sure a pass is, as plusMinusColumns.
type passSureness [4]float64

// unknownSureness is that of a pass of which it is not known.
var unknownSureness = passSureness{math.NaN(), math.NaN(), math.NaN(), math.NaN()}

// passPlace tells passes of a list apart.
type passPlace struct {
	spacecraft, site int
	aos              int64 // ms since 1970
}

// sureList works out and keeps how sure the passes of a list are. Its method measure
// is safe for use by many goroutines.
type sureList struct {
	uncertainty []orbit.Uncertainty // by spacecraft; nil: not known
	gauges      []*pass.Gauge       // by site

	mu     sync.Mutex
	known  map[passPlace]passSureness
	faults map[int]error // by spacecraft, the first
}

// newSureList prepares spacecraft and stations. Where the scenario states no uncertainty it is nil,
// unless asked says that the default rule is to be taken.
func (p *passSearch) newSureList(env *Env, s *scenario.Scenario, asked bool) (*sureList, error) {
	l := &sureList{known: map[passPlace]passSureness{}, faults: map[int]error{}, uncertainty: make([]orbit.Uncertainty, len(p.spacecraft))}
	some, assumed := false, false
	for i := range p.spacecraft {
		c := &p.spacecraft[i]
		if c.Uncertainty == nil && !asked {
			continue
		}
		u, standard, err := s.AssumedUncertainty(c, p.window.From, p.window.To)
		if err != nil {
			l.faults[i] = err
			continue
		}
		l.uncertainty[i] = u
		some, assumed = true, assumed || standard
	}
	if !some {
		return nil, nil
	}
	for i := range p.stations {
		g, err := pass.NewGauge(&p.stations[i].Site, p.decides)
		if err != nil {
			return nil, err
		}
		l.gauges = append(l.gauges, g)
	}
	if assumed {
		env.note("position_uncertainty left out: plus-minus by the age of the element sets, one standard deviation, %s (common practice for low orbits, no measurement)", orbit.DefaultAgeRule())
	}
	return l, nil
}

// tellBasis says where the figures come from: of each spacecraft where they are few.
func (l *sureList) tellBasis(env *Env, p *passSearch) {
	const few = 4
	told := 0
	for i, u := range l.uncertainty {
		if told == few {
			env.note("the position of the other spacecraft is uncertain likewise")
			break
		}
		if u != nil {
			told++
			env.note("the position of %s is uncertain %s", printable(p.spacecraft[i].Name), u.Basis())
		}
	}
	for i, err := range l.faults {
		env.note("warning: spacecraft %s: no plus-minus for some passes: %v", printable(p.spacecraft[i].Name), err)
	}
}

// measure keeps how sure a pass is.
func (l *sureList) measure(e *orbit.Ephemeris, f *pass.Found) {
	u := l.uncertainty[f.Spacecraft]
	if u == nil {
		return
	}
	m, err := l.gauges[f.Site].PlusMinus(e, &f.Pass, u)
	l.mu.Lock()
	defer l.mu.Unlock()
	if err != nil {
		if l.faults[f.Spacecraft] == nil {
			l.faults[f.Spacecraft] = err
		}
		return
	}
	l.known[placeOf(f)] = passSureness{m.AOS, m.LOS, m.MaxElevation.Degrees(), m.Existence()}
}

func placeOf(f *pass.Found) passPlace {
	return passPlace{spacecraft: f.Spacecraft, site: f.Site, aos: f.AOS.UnixMilli()}
}

// of returns what is known of a pass; on nil nothing is.
func (l *sureList) of(f *pass.Found) passSureness {
	if l != nil {
		if m, ok := l.known[placeOf(f)]; ok {
			return m
		}
	}
	return unknownSureness
}

// sureNumber appends number n of plusMinusColumns; nothing where it is not known.
func sureNumber(b []byte, m *passSureness, n int) []byte { return appendFixed(b, m[n], 4) }

// appendFields appends them as fields of JSON.
func (l *sureList) appendFields(b []byte, f *pass.Found) []byte {
	m := l.of(f)
	for n, name := range plusMinusColumns {
		b = append(append(append(b, `, "`...), name...), `": `...)
		before := len(b)
		if b = sureNumber(b, &m, n); len(b) == before {
			b = append(b, "null"...)
		}
	}
	return b
}

// measuring returns a filter of passes that also keeps how sure those are that stay.
func (l *sureList) measuring(keep func(*orbit.Ephemeris, *pass.Found) bool) func(*orbit.Ephemeris, *pass.Found) bool {
	if l == nil {
		return keep
	}
	return func(e *orbit.Ephemeris, f *pass.Found) bool {
		if keep != nil && !keep(e, f) {
			return false
		}
		l.measure(e, f)
		return true
	}
}
