package elements

import (
	"errors"
	"io"
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
	return WriteOMM(w, sets, f, h)
}

// WriteTLE writes the sets as canonical two-line element sets, with a name line
// before those that have a name. A set that holds more digits than a TLE does is
// rounded, and a warning names the fields. Nothing is written, and the error names
// the sets, when one cannot be a TLE at all: a catalogue number above 339,999, an
// epoch outside 1957 to 2056.
func WriteTLE(w io.Writer, sets []orbit.Elements) ([]Warning, error) {
	return nil, errors.New("elements: not built yet")
}

// WriteOMM writes the sets as OMM in one of the four OMM formats. Numbers are
// written with the fewest digits that give the same value back, epochs to the
// microsecond or, where need be, the nanosecond.
func WriteOMM(w io.Writer, sets []orbit.Elements, f Format, h Header) ([]Warning, error) {
	return nil, errors.New("elements: not built yet")
}
