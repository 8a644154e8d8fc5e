package measured

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"sort"
	"strconv"
	"strings"
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

// use is how a field comes to its quantity.
type use struct {
	column
	yes string // of Layout
}

func readTable(data []byte, lay *Layout, l *Log, f *faults) {
	r := lay.reader(string(data))
	head, err := r.Read()
	if err != nil {
		f.add(1, "there is no row of column names; begin with utc and one of %s", strings.Join(ColumnNames(), ", "))
		return
	}
	t := &table{lay: lay, head: slices.Clone(head), log: l, f: f}
	t.columns()
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
		if t.at < 0 {
			return
		}
		line, _ := r.FieldPos(0)
		if len(row) != len(head) {
			f.add(line, "%d fields where the first row has %d columns; the row may be cut off", len(row), len(head))
			continue
		}
		t.row(row, line)
	}
}

// table is a table that is being read.
type table struct {
	lay   *Layout
	head  []string
	uses  map[int]use
	fixed map[Quantity]float64
	at    int // the column of times, -1 without one
	log   *Log
	f     *faults
}

// columns finds which column holds what.
func (t *table) columns() {
	f := t.f
	listed := map[string]use{}
	taken := map[Quantity]string{}
	t.uses, t.fixed, t.at = map[int]use{}, map[Quantity]float64{}, -1
	for _, n := range t.lay.named() {
		if n != "utc" && !slices.Contains(t.head, n) {
			f.add(1, "there is no column %q; the file has %s", n, strings.Join(t.head, ", "))
		}
	}
	for _, c := range t.lay.Columns {
		u := use{columnsByName[c.Holds], c.Yes}
		if c.Column == "" {
			t.fixed[u.q], taken[u.q] = c.Constant*u.scale+u.shift, "constant "+c.Holds
			continue
		}
		scale := c.Scale
		if scale == 0 {
			scale = 1
		}
		u.scale, u.shift = scale*u.scale, c.Add*u.scale+u.shift
		listed[c.Column] = u
	}
	for i, name := range t.head {
		u, ok := listed[name]
		if !ok {
			u.column, ok = columnsByName[strings.ToLower(strings.TrimSpace(name))]
		}
		isTime := name == t.lay.TimeColumn || t.lay.TimeColumn == "utc" && strings.ToLower(strings.TrimSpace(name)) == "utc"
		switch {
		case isTime && t.at >= 0:
			f.add(1, "there are two columns of times; leave one out")
		case isTime:
			t.at = i
		case !ok:
			t.log.Notes = append(t.log.Notes, fmt.Sprintf("column %q is not known and not used", name))
		case taken[u.q] != "":
			f.add(1, "columns %q and %q hold the same quantity, perhaps in two units; keep one of them", taken[u.q], name)
		default:
			taken[u.q], t.uses[i] = name, u
		}
	}
	if t.at < 0 && t.lay.TimeColumn == "utc" {
		f.add(1, "there is no column utc; name the one with the times so, or map it")
	}
	if len(t.uses) == 0 {
		f.add(1, "no column holds a measurement; name one of %s", strings.Join(ColumnNames(), ", "))
	}
}

func (t *table) row(row []string, line int) {
	at, err := t.lay.instant(strings.TrimSpace(row[t.at]))
	if err != nil {
		t.f.add(line, "%w", err)
		return
	}
	s := newSample(at, line)
	for q, v := range t.fixed {
		s.Values[q] = v
	}
	for i, text := range row {
		u, ok := t.uses[i]
		if text = strings.TrimSpace(text); !ok || text == "" || slices.Contains(t.lay.Missing, text) {
			continue
		}
		v, err := u.value(text)
		if err == nil {
			err = s.set(u.q, v)
		}
		if err != nil {
			t.f.add(line, "%w", err)
		}
	}
	t.log.Samples = append(t.log.Samples, s)
}

// value reads a field.
func (u use) value(text string) (float64, error) {
	if u.yes != "" {
		if text == u.yes {
			return 1, nil
		}
		return 0, nil
	}
	v, err := parseValue(u.q, text)
	return v*u.scale + u.shift, err
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
