package elements

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"slantwise/orbit"
)

// report collects what a parser has to say about one text.
type report struct {
	file     string
	faults   Faults
	warnings []Warning
	dropped  int   // warnings beyond maxWarnings
	passed   tally // keywords of an OMM that SGP4 does not use
	unknown  tally // keywords that no OMM has
	assumed  tally // keywords that were not given and have an only possible value
}

func (r *report) fault(f Fault) {
	f.File = r.file
	r.faults.Total++
	if len(r.faults.List) < maxFaults {
		r.faults.List = append(r.faults.List, &f)
	}
}

// maxWarnings is how many warnings of one text are kept; what is odd in one set is
// often odd in all of them.
const maxWarnings = 50

func (r *report) warn(line int, text string) {
	if len(r.warnings) == maxWarnings {
		r.dropped++
		return
	}
	r.warnings = append(r.warnings, Warning{File: r.file, Line: line, Text: text})
}

// said returns the warnings, and how many more there were.
func (r *report) said() []Warning {
	if r.dropped == 0 {
		return r.warnings
	}
	return append(r.warnings, Warning{File: r.file, Text: fmt.Sprintf("and %d more warnings", r.dropped)})
}

// err returns what was collected as an error in the order of the text, nil when
// nothing was wrong.
func (r *report) err() error {
	if r.faults.Total == 0 {
		return nil
	}
	slices.SortStableFunc(r.faults.List, func(a, b *Fault) int {
		return cmp.Or(cmp.Compare(a.Line, b.Line), cmp.Compare(a.Column, b.Column))
	})
	return &r.faults
}

// valid runs the checks that hold for any element set, wherever it came from.
func (r *report) valid(el *orbit.Elements, line int) bool {
	if err := el.Validate(); err != nil {
		r.fault(Fault{Line: line, Field: "element set", Text: Label(*el),
			Problem: strings.ReplaceAll(err.Error(), "\n", "; "), Next: nextFetch})
		return false
	}
	return true
}

// tally counts keywords; a file of thousands of sets gets one warning, not one a set.
type tally struct {
	order []string
	line  map[string]int // where a keyword occurred first
}

func (t *tally) add(key string, line int) {
	if _, known := t.line[key]; known {
		return
	}
	if t.line == nil {
		t.line = map[string]int{}
	}
	t.order = append(t.order, key)
	t.line[key] = line
}

// warnOfKeywords turns the tallies into warnings.
func (r *report) warnOfKeywords() {
	if len(r.passed.order) > 0 {
		r.warn(r.passed.line[r.passed.order[0]], "passed over, since SGP4 does not use it: "+strings.Join(r.passed.order, ", "))
	}
	if len(r.unknown.order) > 0 {
		said := slices.Clone(r.unknown.order)
		for i, key := range said {
			if near := nearest(key, keywordNames(), 1); len(near) > 0 {
				said[i] += fmt.Sprintf(" (%s?)", near[0])
			}
		}
		r.warn(r.unknown.line[r.unknown.order[0]], "no keyword of an OMM, passed over: "+strings.Join(said, ", "))
	}
	if len(r.assumed.order) > 0 {
		r.warn(0, "not given, assumed: "+strings.Join(r.assumed.order, ", "))
	}
}

// Label names a set for people: its name and catalogue number.
func Label(el orbit.Elements) string {
	number := fmt.Sprintf("%05d", el.CatalogNumber)
	if el.Name == "" {
		return number
	}
	return el.Name + " (" + number + ")"
}
