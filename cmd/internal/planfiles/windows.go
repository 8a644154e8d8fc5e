package planfiles

import (
	"io"

	"slantwise/downlink/contacts"
)

// WindowColumns are the columns of a file of windows, in their order.
var WindowColumns = []string{
	"request", "spacecraft", "station", "antenna", "window_start_utc", "window_end_utc",
	"minimum_s", "desired_s", "setup_s", "teardown_s", "value_per_s",
}

// Windows reads windows from outside, a row a window. What a row says is held to the
// rules by contacts.Problem.AddWindows.
func Windows(file string, r io.Reader, clock Clock) ([]contacts.WindowRow, error) {
	t, rows, err := readTable(file, r, clock, WindowColumns, nil)
	if err != nil {
		return nil, err
	}
	out := make([]contacts.WindowRow, 0, len(rows))
	for _, r := range rows {
		out = append(out, contacts.WindowRow{
			Place: r.place(), Request: r.text("request"), Spacecraft: r.text("spacecraft"), Station: r.text("station"), Antenna: r.text("antenna"),
			Start: r.instant("window_start_utc"), End: r.instant("window_end_utc"),
			MinimumS: r.number("minimum_s"), DesiredS: r.number("desired_s"), SetUpS: r.number("setup_s"), TearDownS: r.number("teardown_s"),
			ValuePerS: r.number("value_per_s"),
		})
	}
	if err := t.err(); err != nil {
		return nil, err
	}
	return out, nil
}
