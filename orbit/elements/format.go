package elements

import (
	"fmt"
	"strings"
)

// Format is a way to write element sets down.
type Format int

// The formats that are read and written.
const (
	TLE     Format = iota // two-line element sets
	OMMKVN                // OMM, one KEY = VALUE a line
	OMMXML                // OMM, XML
	OMMJSON               // OMM, an array of flat JSON objects
	OMMCSV                // OMM, one keyword a column
)

var formatNames = [...]string{"tle", "omm-kvn", "omm-xml", "omm-json", "omm-csv"}

// String returns the name that ParseFormat takes.
func (f Format) String() string {
	if f < 0 || int(f) >= len(formatNames) {
		return fmt.Sprintf("Format(%d)", int(f))
	}
	return formatNames[f]
}

// ParseFormat reads a format's name: tle, omm-kvn, omm-xml, omm-json or omm-csv, in
// any case.
func ParseFormat(s string) (Format, error) {
	for i, n := range formatNames {
		if strings.EqualFold(s, n) {
			return Format(i), nil
		}
	}
	return 0, fmt.Errorf("element format %q is not known; it must be one of %s%s",
		s, strings.Join(formatNames[:], ", "), suggestion(s, formatNames[:]))
}
