package elements

import (
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"time"

	"slantwise/orbit"
)

// Header is what an OMM says of itself.
type Header struct {
	Created    time.Time // CREATION_DATE, UTC
	Originator string    // ORIGINATOR; empty: "SLANTWISE"
}

// Write writes the sets in any format; see WriteTLE and WriteOMM.
func Write(w io.Writer, sets []orbit.Elements, f Format, h Header) ([]Warning, error) {
	if f == TLE {
		return WriteTLE(w, sets)
	}
	return nil, WriteOMM(w, sets, f, h)
}

// WriteError says why a set cannot be written in a format.
type WriteError struct {
	Object  string // name and catalogue number
	Format  Format
	Problem string
	Next    string // may be empty
}

// Error returns "object cannot be written as format: problem; next".
func (e *WriteError) Error() string {
	s := fmt.Sprintf("%s cannot be written as %s: %s", e.Object, e.Format, e.Problem)
	if e.Next != "" {
		s += "; " + e.Next
	}
	return s
}

// writable checks what holds for every format: valid elements, and texts that a
// reader takes back as they are.
func writable(el orbit.Elements, f Format) error {
	fail := func(problem string) error {
		return &WriteError{Object: Label(el), Format: f, Problem: problem}
	}
	var errs []error
	if err := el.Validate(); err != nil {
		errs = append(errs, fail(strings.ReplaceAll(err.Error(), "\n", "; ")))
	}
	if el.ElementSetNo < 0 || el.RevolutionAtEpoch < 0 {
		errs = append(errs, fail("the element set number or the revolution number is negative"))
	}
	if !slices.Contains([]string{"", "U", "C", "S"}, el.Classification) {
		errs = append(errs, fail(fmt.Sprintf("the classification %q is not U, C, S or empty", el.Classification)))
	}
	for _, t := range []struct{ what, text string }{
		{"name", el.Name}, {"international designator", el.InternationalDesignator},
	} {
		if r, found := unseen(t.text); found {
			errs = append(errs, fail(fmt.Sprintf("the %s holds the invisible character U+%04X", t.what, r)))
		}
		if t.text != strings.Trim(t.text, " ") {
			errs = append(errs, fail(fmt.Sprintf("the %s %q begins or ends with a blank", t.what, t.text)))
		}
	}
	return errors.Join(errs...)
}
