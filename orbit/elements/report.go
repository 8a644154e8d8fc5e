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

// Label names a set for people: its name and catalogue number.
func Label(el orbit.Elements) string {
	number := fmt.Sprintf("%05d", el.CatalogNumber)
	if el.Name == "" {
		return number
	}
	return el.Name + " (" + number + ")"
}
