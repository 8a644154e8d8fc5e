package planfiles

import (
	"io"
	"time"
)

// Outage is a time in which something cannot be used: a station, one of its antennas, or
// a spacecraft. It need not be an outage: a reserved time is one, too.
type Outage struct {
	Place      string // where it is written, leads the errors
	Station    string // empty: of a spacecraft
	Antenna    string // empty: the whole station
	Spacecraft string
	Start, End time.Time
	Reason     string
}

// OutageColumns are the columns of a file of outages.
var OutageColumns = []string{"station", "antenna", "spacecraft", "start_utc", "end_utc", "reason"}

// Outages reads a CSV file of outages. A row names a station, a station and its antenna,
// or a spacecraft. Times may overlap: what is closed twice is closed.
func Outages(file string, r io.Reader, clock Clock) ([]Outage, error) {
	t, rows, err := readTable(file, r, clock, []string{"start_utc", "end_utc"}, []string{"station", "antenna", "spacecraft", "reason"})
	if err != nil {
		return nil, err
	}
	out := make([]Outage, 0, len(rows))
	for _, r := range rows {
		o := Outage{Place: r.place(), Station: r.text("station"), Antenna: r.text("antenna"), Spacecraft: r.text("spacecraft"),
			Start: r.instant("start_utc"), End: r.instant("end_utc"), Reason: r.text("reason")}
		switch {
		case o.Station == "" && o.Spacecraft == "":
			t.fault(r.line, "neither station nor spacecraft is named; name what is closed")
		case o.Station != "" && o.Spacecraft != "":
			t.fault(r.line, "both station %q and spacecraft %q are named; give each a row of its own", o.Station, o.Spacecraft)
		case o.Antenna != "" && o.Station == "":
			t.fault(r.line, "antenna %q stands without its station; name the station", o.Antenna)
		case !o.Start.IsZero() && !o.End.IsZero() && !o.End.After(o.Start):
			t.fault(r.line, "it ends at %s and does not end after its start %s; are the two reversed?", r.text("end_utc"), r.text("start_utc"))
		}
		out = append(out, o)
	}
	if err := t.err(); err != nil {
		return nil, err
	}
	return out, nil
}
