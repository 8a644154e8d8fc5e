package elements

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"slantwise/orbit"
)

// WriteTLE writes the sets as canonical two-line element sets, with a name line
// before those that have a name. A set that holds more digits than a TLE does is
// rounded, and a warning names the fields. Nothing is written, and the error names
// the sets, each in a *WriteError, when one cannot be a TLE at all: a catalogue
// number above 339,999, an epoch outside 1957 to 2056, a number beyond its columns.
func WriteTLE(w io.Writer, sets []orbit.Elements) ([]Warning, error) {
	var out bytes.Buffer
	var warnings []Warning
	var errs []error
	for i := range sets {
		t := tleText{el: &sets[i]}
		if err := t.format(&out); err != nil {
			errs = append(errs, err)
		}
		if len(t.rounded) > 0 {
			warnings = append(warnings, Warning{Text: Label(sets[i]) + ": a TLE cannot hold all of it: " + strings.Join(t.rounded, "; ")})
		}
	}
	if err := errors.Join(errs...); err != nil {
		return nil, err
	}
	if _, err := w.Write(out.Bytes()); err != nil {
		return nil, fmt.Errorf("writing element sets: %w", err)
	}
	return warnings, nil
}

// tleText formats one set and notes what did not fit.
type tleText struct {
	el      *orbit.Elements
	rounded []string
	errs    []error
}

func (t *tleText) format(out *bytes.Buffer) error {
	el := t.el
	if err := writable(*el, TLE); err != nil {
		return err
	}
	one := fmt.Sprintf("1 %s%s %s %s %s %s %s 0 %s", t.catalogue(), t.classification(), t.designator(), t.epoch(),
		t.firstDerivative(), t.exponential("MEAN_MOTION_DDOT", el.MeanMotionDDot, "00000-0"),
		t.exponential("BSTAR", el.BStar, "00000+0"), t.setNumber())
	two := fmt.Sprintf("2 %s %s %s %s %s %s %s%s", t.catalogue(), t.degrees("INCLINATION", el.Inclination),
		t.degrees("RA_OF_ASC_NODE", el.RAAN), t.eccentricity(), t.degrees("ARG_OF_PERICENTER", el.ArgPerigee),
		t.degrees("MEAN_ANOMALY", el.MeanAnomaly), t.meanMotion(), t.revolution())
	if len(t.errs) > 0 {
		return errors.Join(t.errs...)
	}
	if line := t.nameLine(); line != "" {
		out.WriteString(line + "\n")
	}
	for _, line := range []string{one, two} {
		fmt.Fprintf(out, "%s%d\n", line, checksum(line+"0"))
	}
	return nil
}

func (t *tleText) fail(problem, next string) {
	t.errs = append(t.errs, &WriteError{Object: Label(*t.el), Format: TLE, Problem: problem, Next: next})
}

func (t *tleText) round(format string, args ...any) {
	t.rounded = append(t.rounded, fmt.Sprintf(format, args...))
}

// nameLine writes the name so that it is read as one: a "0 " goes before a name that
// would pass for an element line, a remark or a name with that prefix.
func (t *tleText) nameLine() string {
	name := t.el.Name
	if name == "" {
		return ""
	}
	if n := utf8.RuneCountInString(name); n > minDataLine-1 {
		t.round("the name has %d characters, more than the 24 that a name line has by custom; written whole", n)
	}
	if strings.ContainsAny(name[:1], "#0123456789") {
		return "0 " + name
	}
	return name
}
