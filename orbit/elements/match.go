package elements

import (
	"fmt"
	"strings"

	"slantwise/orbit"
)

// NotFoundError says that no set answers to a reference.
type NotFoundError struct {
	Ref     string
	Nearest []string // names most alike, best first; may be empty
	Objects []string // the first objects that there are, "name (catalogue number)"
	Count   int      // how many objects there are
}

// Error names what was sought and what is most alike, or what there is.
func (e *NotFoundError) Error() string {
	s := fmt.Sprintf("no element set has the catalogue number or name %q", e.Ref)
	switch {
	case len(e.Nearest) > 0:
		return s + "; did you mean " + listed(e.Nearest, len(e.Nearest)) + "?"
	case e.Count == 0:
		return s + "; there are no element sets"
	}
	return s + "; there are " + listed(e.Objects, e.Count)
}

// AmbiguousError says that a name stands for several objects.
type AmbiguousError struct {
	Ref        string
	Candidates []string // "name (catalogue number)"
}

// Error lists the candidates.
func (e *AmbiguousError) Error() string {
	return fmt.Sprintf("the name %q stands for %d objects: %s; give the catalogue number",
		e.Ref, len(e.Candidates), listed(e.Candidates[:min(mostListed, len(e.Candidates))], len(e.Candidates)))
}

const mostListed = 8

// listed joins quoted texts, and says how many more of total there are.
func listed(texts []string, total int) string {
	quotedTexts := make([]string, len(texts))
	for i, t := range texts {
		quotedTexts[i] = fmt.Sprintf("%q", t)
	}
	s := strings.Join(quotedTexts, ", ")
	if more := total - len(texts); more > 0 {
		s += fmt.Sprintf(" and %d more", more)
	}
	return s
}

// Match returns all sets of the object that ref names: by catalogue number (plain,
// with or without leading zeros, or Alpha-5), by the exact name, or by the name in
// any case, in this order. The error is a *NotFoundError or an *AmbiguousError.
func Match(sets []orbit.Elements, ref string) ([]orbit.Elements, error) {
	ref = strings.Trim(ref, " ")
	tests := []func(*orbit.Elements) bool{
		func(el *orbit.Elements) bool { return ref != "" && el.Name == ref },
		func(el *orbit.Elements) bool { return ref != "" && strings.EqualFold(el.Name, ref) },
	}
	if number, ok := referenceNumber(ref); ok {
		byNumber := func(el *orbit.Elements) bool { return el.CatalogNumber == number }
		tests = append([]func(*orbit.Elements) bool{byNumber}, tests...)
	}
	for _, test := range tests {
		var found []orbit.Elements
		for i := range sets {
			if test(&sets[i]) {
				found = append(found, sets[i])
			}
		}
		if len(found) == 0 {
			continue
		}
		if labels := objectLabels(found); len(labels) > 1 {
			return nil, &AmbiguousError{Ref: ref, Candidates: labels}
		}
		return found, nil
	}
	return nil, notFound(sets, ref)
}

// referenceNumber reads a reference as a catalogue number of up to nine digits or
// in Alpha-5.
func referenceNumber(ref string) (int, bool) {
	if ref == "" || len(ref) > 9 {
		return 0, false
	}
	if n, err := digitsOnly(ref); err == nil {
		return n, true
	}
	n, err := parseAlpha5(ref)
	return n, err == nil
}

// objectLabels returns the label of each object once, in the order of the sets.
func objectLabels(sets []orbit.Elements) []string {
	seen := map[string]bool{}
	var labels []string
	for i := range sets {
		if key := objectKey(&sets[i]); !seen[key] {
			seen[key] = true
			labels = append(labels, Label(sets[i]))
		}
	}
	return labels
}

func notFound(sets []orbit.Elements, ref string) error {
	labels := objectLabels(sets)
	var names []string
	seen := map[string]bool{"": true}
	for i := range sets {
		if n := sets[i].Name; !seen[n] {
			seen[n] = true
			names = append(names, n)
		}
	}
	return &NotFoundError{Ref: ref, Nearest: nearest(ref, names, 3), Objects: labels[:min(mostListed, len(labels))], Count: len(labels)}
}
