package measured

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"sort"
	"strconv"
	"strings"
	"time"
)

// column is a name that a table may use: its quantity and how to come to its unit.
type column struct {
	q     Quantity
	scale float64
	shift float64
}

var columnsByName = map[string]column{
	"received_power_dbm": {PowerDBm, 1, 0}, "received_power_dbw": {PowerDBm, 1, 30}, "relative_power_db": {RelativePowerDB, 1, 0},
	"cn0_dbhz": {CN0DBHz, 1, 0}, "ebn0_db": {EbN0DB, 1, 0},
	"frequency_hz": {FrequencyHz, 1, 0}, "frequency_khz": {FrequencyHz, 1e3, 0}, "frequency_mhz": {FrequencyHz, 1e6, 0},
	"azimuth_deg": {AzimuthDeg, 1, 0}, "elevation_deg": {ElevationDeg, 1, 0}, "locked": {Locked, 1, 0},
	"rain_mm_h": {RainMmH, 1, 0}, "humidity_pct": {HumidityPct, 1, 0}, "beacon_db": {BeaconDB, 1, 0},
}

// ColumnNames lists the names that a table may use beside utc, in order.
func ColumnNames() []string {
	var out []string
	for n := range columnsByName {
		out = append(out, n)
	}
	sort.Strings(out)
	return out
}

func readTable(data []byte, renamed map[string]string, l *Log, f *faults) {
	r := csv.NewReader(bytes.NewReader(data))
	r.FieldsPerRecord, r.Comment, r.TrimLeadingSpace = -1, '#', true
	head, err := r.Read()
	if err != nil {
		f.add(1, "there is no row of column names; begin with utc and one of %s", strings.Join(ColumnNames(), ", "))
		return
	}
	head = slices.Clone(head)
	use, at := tableColumns(head, renamed, l, f)
	for {
		row, err := r.Read()
		if errors.Is(err, io.EOF) {
			return
		}
		if err != nil {
			line := 1
			var pe *csv.ParseError
			if errors.As(err, &pe) {
				line = pe.Line
			}
			f.add(line, "%w; mend the quotes", err)
			return
		}
		if at < 0 {
			return
		}
		line, _ := r.FieldPos(0)
		if len(row) != len(head) {
			f.add(line, "%d fields where the first row has %d columns; the row may be cut off", len(row), len(head))
			continue
		}
		readRow(row, line, at, use, l, f)
	}
}

// tableColumns finds which column holds what; at is that of the time, -1 without one.
func tableColumns(head []string, renamed map[string]string, l *Log, f *faults) (use map[int]column, at int) {
	ours := map[string]string{}
	for our, their := range renamed {
		if _, ok := columnsByName[our]; !ok && our != "utc" {
			f.add(1, "column %q is not one that is known; it must be utc or one of %s", our, strings.Join(ColumnNames(), ", "))
		}
		if !slices.Contains(head, their) {
			f.add(1, "there is no column %q, which stands for %s; the file has %s", their, our, strings.Join(head, ", "))
		}
		ours[their] = our
	}
	use, at = map[int]column{}, -1
	taken := map[Quantity]string{}
	for i, name := range head {
		our, ok := ours[name]
		if !ok {
			our = strings.ToLower(strings.TrimSpace(name))
		}
		c, known := columnsByName[our]
		switch {
		case our == "utc" && at >= 0:
			f.add(1, "there are two columns of times; leave one out")
		case our == "utc":
			at = i
		case !known:
			l.Notes = append(l.Notes, fmt.Sprintf("column %q is not known and not used", name))
		case taken[c.q] != "":
			f.add(1, "columns %q and %q hold the same quantity, perhaps in two units; keep one of them", taken[c.q], name)
		default:
			taken[c.q], use[i] = name, c
		}
	}
	if at < 0 {
		f.add(1, "there is no column utc; name the one with the times so, or map it")
	}
	if len(use) == 0 {
		f.add(1, "no column holds a measurement; name one of %s", strings.Join(ColumnNames(), ", "))
	}
	return use, at
}

func readRow(row []string, line, at int, use map[int]column, l *Log, f *faults) {
	t, err := time.Parse(time.RFC3339Nano, row[at])
	if err != nil || !strings.HasSuffix(row[at], "Z") || t.Year() < 1957 || t.Year() > 2200 {
		f.add(line, "utc: %q is not a time; write UTC as 2026-03-10T14:05:00Z", row[at])
		return
	}
	s := newSample(t, line)
	for i, text := range row {
		c, ok := use[i]
		if text = strings.TrimSpace(text); !ok || text == "" {
			continue
		}
		v, err := parseValue(c.q, text)
		if err == nil {
			err = s.set(c.q, v*c.scale+c.shift)
		}
		if err != nil {
			f.add(line, "%w", err)
		}
	}
	l.Samples = append(l.Samples, s)
}

func parseValue(q Quantity, text string) (float64, error) {
	if q == Locked {
		switch strings.ToLower(text) {
		case "yes", "true":
			return 1, nil
		case "no", "false":
			return 0, nil
		}
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, fmt.Errorf("%s: %q is not a number; the unit is the column's, so write the number alone", q, text)
	}
	return v, nil
}
