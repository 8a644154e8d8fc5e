package propagation

import (
	"fmt"
	"math"
	"strconv"

	"slantwise/orbit/unit"
)

// NoteKind tells what a note is about.
type NoteKind int

// Kinds of note.
const (
	Assumption NoteKind = iota // how a figure is meant, what a model takes for granted
	Default                    // a value that was left out, and what stands in for it
	Warning                    // something is missing, or outside a stated range
)

// String returns "assumption", "default" or "warning".
func (k NoteKind) String() string { return [...]string{"assumption", "default", "warning"}[k] }

// Note is a sentence that belongs to a result.
type Note struct {
	Kind NoteKind
	Text string
}

// notes gathers the notes of one calculation, each sentence once.
type notes []Note

func (n *notes) add(kind NoteKind, format string, args ...any) {
	note := Note{Kind: kind, Text: fmt.Sprintf(format, args...)}
	for _, have := range *n {
		if have == note {
			return
		}
	}
	*n = append(*n, note)
}

// beyond warns where v leaves the range [lo, hi] that a Recommendation states for a
// formula that still has a value there.
func (n *notes) beyond(model, quantity string, v float64, unitName string, lo, hi float64) {
	if v >= lo && v <= hi {
		return
	}
	n.add(Warning, "%s: %s %s is outside the stated range %s to %s; the formula's value is given",
		model, quantity, withUnit(v, unitName), number(lo), withUnit(hi, unitName))
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

func withUnit(v float64, unitName string) string {
	if unitName == "" {
		return number(v)
	}
	return number(v) + " " + unitName
}

// within returns a *unit.RangeError unless lo <= v <= hi.
func within(quantity string, v float64, unitName string, lo, hi float64, next string) error {
	if v >= lo && v <= hi {
		return nil
	}
	return &unit.RangeError{Quantity: quantity, Value: v, Unit: unitName,
		Allowed: number(lo) + " to " + withUnit(hi, unitName), Next: next}
}

// positive returns a *unit.RangeError unless v is greater than 0 and finite.
func positive(quantity string, v float64, unitName string) error {
	if v > 0 && !math.IsInf(v, 1) {
		return nil
	}
	return &unit.RangeError{Quantity: quantity, Value: v, Unit: unitName, Allowed: "greater than 0 and finite"}
}

// notNegative returns a *unit.RangeError unless v is 0 or greater and finite.
func notNegative(quantity string, v float64, unitName string) error {
	if v >= 0 && !math.IsInf(v, 1) {
		return nil
	}
	return &unit.RangeError{Quantity: quantity, Value: v, Unit: unitName, Allowed: "0 or greater and finite"}
}

// firstError returns the first of errs that is not nil.
func firstError(errs ...error) error {
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}
