package reports

import (
	"bytes"
	"fmt"
	"html/template"
	"strings"
	"time"
)

// Comparison is a page that holds the passes of two scenarios against each other. Of each
// pair the first is the scenario before, the second the one after; NaN does not exist.
type Comparison struct {
	Title    string
	Names    [2]string // of the scenarios
	Answer   string    // what the second changes, in a sentence
	Lines    []string
	From, To time.Time // both windows
	Passes   []ComparedPass
	Totals   []ComparedTotal
	Differs  []Difference // keys of the two files
	Basis    [2]Basis
	Notes    []string // of pairing, margins and bytes
	Uplink   bool     // margins of an uplink are there
	Files    []string // that stand beside the page, by name
}

// ComparedPass is a pass of one scenario or of both.
type ComparedPass struct {
	Spacecraft, Station string
	Change              string // same, moved, gone or new
	AOS, LOS            [2]time.Time
	AOSShift, LOSShift  float64    // s, after less before
	PlusMinus           [2]float64 // one standard deviation of AOS, s
	MaxElevationDeg     [2]float64
	MarginDB            [2]float64 // the greatest along the pass
	Bytes               [2]float64
	UplinkMarginDB      [2]float64
}

// ComparedTotal is the sum of a spacecraft over a station, or of all.
type ComparedTotal struct {
	Spacecraft, Station string // both empty: all
	Passes              [2]int
	Contact             [2]time.Duration
	Bytes               [2]float64
	MarginChangeDB      float64 // the median over the passes of both
}

// Difference is a key that is not the same in two scenario files; an empty text: it is
// not there.
type Difference struct{ Key, Before, After string }

type comparisonView struct {
	pageView
	*Comparison
	Title    string // of both
	Figures  []figureView
	Rows     []comparedRow
	Sums     []comparedRow
	Orbits   []orbitPair
	Both     []Note
	Alone    [2][]Note
	HasBytes bool
}

// comparedRow is a line of the tables; texts as they are to be read.
type comparedRow struct {
	Name, Spacecraft, Station     string
	Symbol, Change                string
	Shift, LOSShift               string
	Sure                          string
	AOS, Highest, Margin, Uplink  [2]string
	Passes, Contact, Volume       [2]string
	VolumeChange, MarginChange    string
	UplinkChange, ElevationChange string
}

type orbitPair struct{ Name, Before, After string }

var changeSymbols = map[string]string{"same": "=", "moved": "↦", "gone": "−", "new": "+"}

// ComparisonPage returns the page as one file of HTML without any script.
func ComparisonPage(c *Comparison) ([]byte, error) {
	if !c.To.After(c.From) {
		return nil, fmt.Errorf("report: a comparison from %s to %s has no length", c.From, c.To)
	}
	v := comparisonView{pageView: plainPage(c.Title), Comparison: c, Title: c.Title, Figures: c.figures()}
	for i := range c.Passes {
		v.Rows = append(v.Rows, c.Passes[i].row())
		v.HasBytes = v.HasBytes || finite(c.Passes[i].Bytes[0]) || finite(c.Passes[i].Bytes[1])
	}
	for i := range c.Totals {
		v.Sums = append(v.Sums, c.Totals[i].row())
	}
	v.Orbits = c.orbits()
	v.Both, v.Alone[0], v.Alone[1] = sharedNotes(c.Basis[0].Defaults, c.Basis[1].Defaults)
	basis := c.bothBases()
	v.foot(&basis, "granted-title")
	var out bytes.Buffer
	if err := pageTemplates().ExecuteTemplate(&out, "comparison.html", v); err != nil {
		return nil, fmt.Errorf("report: %w", err)
	}
	return out.Bytes(), nil
}

// bothBases is the basis of both sides.
func (c *Comparison) bothBases() Basis {
	b := Basis{Scenario: c.Names[0] + " before, " + c.Names[1] + " after", Program: c.Basis[0].Program, Caution: CautionCompare}
	seen := map[BasisModel]bool{}
	for i, side := range c.Basis {
		for _, o := range side.Orbits {
			o.Spacecraft += [...]string{", before", ", after"}[i]
			b.Orbits = append(b.Orbits, o)
		}
		for _, m := range side.Models {
			if !seen[m] {
				seen[m] = true
				b.Models = append(b.Models, m)
			}
		}
	}
	both, before, after := sharedNotes(c.Basis[0].Defaults, c.Basis[1].Defaults)
	b.Defaults = append(append(both, before...), after...)
	return b
}

// sharedNotes splits two lists into what both have and what only one has.
func sharedNotes(before, after []Note) (both, first, second []Note) {
	has := func(list []Note, n Note) bool {
		for _, m := range list {
			if m == n {
				return true
			}
		}
		return false
	}
	for _, n := range before {
		if has(after, n) {
			both = append(both, n)
		} else {
			first = append(first, n)
		}
	}
	for _, n := range after {
		if !has(before, n) {
			second = append(second, n)
		}
	}
	return both, first, second
}

// orbits pairs the orbits of both sides by spacecraft.
func (c *Comparison) orbits() []orbitPair {
	var out []orbitPair
	at := map[string]int{}
	for i, side := range c.Basis {
		for _, o := range side.Orbits {
			n, ok := at[o.Spacecraft]
			if !ok {
				n = len(out)
				at[o.Spacecraft] = n
				out = append(out, orbitPair{Name: o.Spacecraft, Before: "", After: ""})
			}
			text := &out[n].Before
			if i == 1 {
				text = &out[n].After
			}
			if *text != "" {
				*text += "; then "
			}
			*text += o.text()
		}
	}
	return out
}

func (p *ComparedPass) row() comparedRow {
	r := comparedRow{Spacecraft: p.Spacecraft, Station: p.Station, Symbol: changeSymbols[p.Change], Change: p.Change,
		Shift: changeBy(p.AOSShift, 3), LOSShift: changeBy(p.LOSShift, 3)}
	for i := range 2 {
		if !p.AOS[i].IsZero() {
			r.AOS[i] = dayClock(p.AOS[i])
		}
		r.Highest[i], r.Margin[i], r.Uplink[i] = fixed(p.MaxElevationDeg[i], 1), fixed(p.MarginDB[i], 1), fixed(p.UplinkMarginDB[i], 1)
		r.Volume[i] = withUnit(p.Bytes[i], byteScales)
		if finite(p.PlusMinus[i]) {
			if r.Sure != "" {
				r.Sure += ", "
			}
			r.Sure += "±" + fixed(p.PlusMinus[i], 1) + " s " + [...]string{"before", "after"}[i]
		}
	}
	r.VolumeChange = changeText(p.Bytes[1]-p.Bytes[0], byteScales)
	r.MarginChange, r.UplinkChange = changeBy(p.MarginDB[1]-p.MarginDB[0], 1), changeBy(p.UplinkMarginDB[1]-p.UplinkMarginDB[0], 1)
	r.ElevationChange = changeBy(p.MaxElevationDeg[1]-p.MaxElevationDeg[0], 1)
	return r
}

func (t *ComparedTotal) row() comparedRow {
	r := comparedRow{Name: "all", MarginChange: changeBy(t.MarginChangeDB, 2), VolumeChange: changeText(t.Bytes[1]-t.Bytes[0], byteScales)}
	if t.Spacecraft != "" {
		r.Name = t.Spacecraft + " over " + t.Station
	}
	for i := range 2 {
		r.Passes[i], r.Contact[i], r.Volume[i] = fixed(float64(t.Passes[i]), 0), span(t.Contact[i]), withUnit(t.Bytes[i], byteScales)
	}
	return r
}

// changeBy writes a change with its sign, and nought without one.
func changeBy(v float64, decimals int) string {
	s := fixed(v, decimals)
	if v > 0 && strings.Trim(s, "0.") != "" {
		return "+" + s
	}
	return s
}

// changeText writes a change with its sign and unit.
func changeText(v float64, scales []scale) string {
	if v > 0 {
		return "+" + withUnit(v, scales)
	}
	return withUnit(v, scales)
}

// figureOf is a drawing of the page with the words under it.
func figureOf(id, title, caption string, tall float64, s *sketch) figureView {
	s.wide, s.tall = true, tall
	return figureView{ID: id, Title: title, Caption: caption, Drawing: template.HTML(s.markup(title + ". " + caption))}
}
