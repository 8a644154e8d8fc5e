package planfiles

import (
	"io"
	"path/filepath"
	"strings"
)

// Closed reads outages and reserved times: a calendar where the file's name ends in .ics,
// else CSV.
func Closed(file string, r io.Reader, clock Clock) ([]Outage, error) {
	if strings.EqualFold(filepath.Ext(file), ".ics") {
		return CalendarOutages(file, r)
	}
	return Outages(file, r, clock)
}
