package reports

import (
	"bytes"
	"fmt"
	"html/template"
	"strconv"
	"strings"
	"time"
)

// Basis is what the numbers of a page stand on. Every page ends with it.
type Basis struct {
	Scenario string // as the scenario is named, without a path
	Program  string // its version
	Orbits   []BasisOrbit
	Models   []BasisModel
	Defaults []Note // keys that were left out, with what was taken
	Caution  Caution
}

// BasisOrbit is the orbit that a spacecraft was flown by.
type BasisOrbit struct {
	Spacecraft string
	Orbit      string        // as "element set 99001", "ephemeris of ..."
	Epoch      time.Time     // zero: it has none
	AgeFrom    time.Duration // at the first instant that counts, negative where the epoch lies after it
	AgeTo      time.Duration // at the last
}

// BasisModel is a model with the edition or publication that it follows.
type BasisModel struct{ Of, Name string }

// Caution is the kind of warning that fits a page.
type Caution int

// Cautions.
const (
	CautionPass    Caution = iota // of passes that someone may track or command
	CautionPath                   // of statistics of the air
	CautionSizing                 // of a station that someone may build
	CautionPlan                   // of contacts that someone may book
	CautionCompare                // of two predictions
)

var cautionTexts = [...]string{
	CautionPass:    "A prediction, not a measurement. Sending needs a licence; keep people out of the beam and clear of a mount that moves; local rules and whoever is responsible on site decide.",
	CautionPath:    "Statistics of an average year, exceeded for a share of the time: no promise for one pass, one day or one storm.",
	CautionSizing:  "Radio alone, on statistics of an average year. Foundation, wind, lightning and power are for licensed engineers under the local codes; sending needs a licence and a study of the beam’s hazard.",
	CautionPlan:    "A plan books nothing and makes nothing safe. Sending needs a licence; keep people out of the beam and clear of mounts that start by themselves; local rules decide.",
	CautionCompare: "Two predictions, not measurements: a difference smaller than the orbits’ errors may be nothing. Sending needs a licence; local rules decide near antennas.",
}

// Text is the caution in words.
func (c Caution) Text() string { return cautionTexts[c] }

// orbitText says which orbit it is and how old at the instants that count.
func (o *BasisOrbit) text() string {
	s := o.Orbit
	if o.Epoch.IsZero() {
		return s
	}
	s += ", epoch " + dayClock(o.Epoch) + " UTC, "
	if first, last := ageText(o.AgeFrom), ageText(o.AgeTo); first == last {
		return s + first
	}
	if o.AgeFrom >= 0 {
		return s + age(o.AgeFrom) + " to " + age(o.AgeTo) + " old"
	}
	return s + ageText(o.AgeFrom) + " to " + ageText(o.AgeTo)
}

// ageText says how old, or how far ahead, an epoch is.
func ageText(d time.Duration) string {
	if d < 0 {
		return age(-d) + " ahead"
	}
	return age(d) + " old"
}

// basisView is the foot of a page.
type basisView struct {
	Scenario, Program string
	Orbits            []namedText
	Models            []namedText
	Defaults          []Note
	Count             string // how many defaults
	Above             string // the id of the heading under which the page lists the defaults; empty: it does not
	Caution           string
}

type namedText struct{ Name, Text string }

// view returns the foot; above is the id of the heading under which the page lists its
// defaults, empty where it does not.
func (b *Basis) view(above string) basisView {
	v := basisView{Scenario: b.Scenario, Program: strings.TrimSpace("slantwise " + b.Program), Defaults: b.Defaults, Above: above,
		Count: "none", Caution: b.Caution.Text()}
	if n := len(b.Defaults); n > 0 {
		v.Count = strconv.Itoa(n)
	}
	for i := range b.Orbits {
		v.Orbits = append(v.Orbits, namedText{b.Orbits[i].Spacecraft, b.Orbits[i].text()})
	}
	for _, m := range b.Models {
		v.Models = append(v.Models, namedText{m.Of, m.Name})
	}
	return v
}

// Lines are the basis as plain sentences, for paper.
func (b *Basis) Lines() []string {
	v := b.view("")
	lines := []string{"Scenario " + v.Scenario + "; " + v.Program + "."}
	for _, o := range v.Orbits {
		lines = append(lines, o.Name+": "+o.Text+".")
	}
	var models []string
	for _, m := range v.Models {
		models = append(models, m.Name+" ("+m.Text+")")
	}
	if len(models) > 0 {
		lines = append(lines, "Models: "+strings.Join(models, "; ")+".")
	}
	return append(lines, "Defaults taken: "+v.Count+".", v.Caution)
}

// ofPass is the basis of a pass's page: its own orbit at AOS, and the defaults among the
// notes that the page lists.
func (b *Basis) ofPass(p *Pass) Basis {
	out := *b
	out.Orbits, out.Defaults = nil, defaultsIn(p.Notes)
	for _, o := range b.Orbits {
		if o.Spacecraft != p.Spacecraft {
			continue
		}
		if e := &p.Elements; !e.NoEpoch {
			o.Epoch, o.AgeFrom, o.AgeTo = e.Epoch, e.Age, e.Age
		}
		out.Orbits = append(out.Orbits, o)
		break
	}
	return out
}

func defaultsIn(notes []Note) []Note {
	var out []Note
	for _, n := range notes {
		if n.Kind == Default {
			out = append(out, n)
		}
	}
	return out
}

// foot puts a basis under a page; above is the id of the heading under which the page
// lists the defaults, empty where it does not.
func (v *pageView) foot(b *Basis, above string) {
	view := b.view(above)
	v.Foot = &view
}

// FootHTML is the basis as it stands under a page, for a page that is made elsewhere.
func FootHTML(b *Basis) (template.HTML, error) {
	var out bytes.Buffer
	if err := pageTemplates().ExecuteTemplate(&out, "basis", b.view("")); err != nil {
		return "", fmt.Errorf("report: %w", err)
	}
	return template.HTML(out.String()), nil
}
