package fit

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// The columns of a table of positions, in any order below a header row. Lines that begin
// with # are remarks.
var tableColumns = []string{"utc", "frame", "x_km", "y_km", "z_km", "vx_km_s", "vy_km_s", "vz_km_s", "position_sigma_m", "velocity_sigma_m_s"}

const (
	colUTC = iota
	colFrame
	colX
	colVX         = colX + 3
	colSigma      = colVX + 3
	colSpeedSigma = colSigma + 1
)

// MaxTable is the largest table that is read, in bytes: some half a million rows.
const MaxTable = 64_000_000

// ReadTable reads a table of positions as CSV and turns it into TEME: columns utc (ISO 8601
// ending in Z), x_km, y_km, z_km, and as far as they are given frame (see ParseFrame), vx_km_s,
// vy_km_s, vz_km_s, position_sigma_m, velocity_sigma_m_s. A row may leave its velocity and
// sigmas empty. Where there is no column frame, or it is empty, frame counts; nil: it must be
// there. name is the file's for messages. The error is a *TableFaults, with all faults.
func ReadTable(r io.Reader, name string, frame *orbit.Frame, earth orbit.EarthOrientation) (Table, error) {
	turner, err := orbit.NewTurner(earth)
	if err != nil {
		return Table{}, err
	}
	limited := &io.LimitedReader{R: r, N: MaxTable + 1}
	in := csv.NewReader(limited)
	in.FieldsPerRecord, in.ReuseRecord, in.Comment, in.TrimLeadingSpace = -1, true, '#', true
	t := tableReader{csv: in, frame: frame, turner: turner, faults: TableFaults{File: name}}
	data := t.read()
	if limited.N <= 0 {
		t.faults.add(0, "", "", fmt.Sprintf("holds more than the %d bytes that are read", MaxTable), "split the table")
	}
	if t.faults.Total > 0 {
		return Table{}, &t.faults
	}
	return Table{Data: data, Frames: t.frames}, nil
}

// Table is what was read of a table.
type Table struct {
	Data   []Datum       // in the order of the rows, in TEME
	Frames []orbit.Frame // that the rows are in, as they first come
}

type tableReader struct {
	csv    *csv.Reader
	at     [10]int // where each column stands, from 0; -1: it does not
	width  int
	frame  *orbit.Frame
	turner *orbit.Turner
	frames []orbit.Frame
	faults TableFaults
}

func (t *tableReader) read() (data []Datum) {
	header, err := t.csv.Read()
	if err != nil {
		t.broken(err, "is empty")
		return nil
	}
	if !t.header(header) {
		return nil
	}
	for {
		row, err := t.csv.Read()
		switch {
		case errors.Is(err, io.EOF) && len(data) == 0 && t.faults.Total == 0:
			t.broken(err, "holds a header and no row")
			return nil
		case errors.Is(err, io.EOF):
			return data
		case err != nil:
			t.broken(err, "")
			return data
		}
		if d, ok := t.row(row); ok {
			data = append(data, d)
		}
	}
}

// broken tells an error of the CSV reader.
func (t *tableReader) broken(err error, atEnd string) {
	var p *csv.ParseError
	switch {
	case errors.As(err, &p):
		t.faults.add(p.Line, "", "", p.Err.Error(), "write it as CSV")
	case errors.Is(err, io.EOF):
		t.faults.add(0, "", "", atEnd, "give a header with "+strings.Join(tableColumns[:5], ",")+" and a row for each position")
	default:
		t.faults.add(0, "", "", "cannot be read: "+err.Error(), "check the file")
	}
}

// header finds the columns.
func (t *tableReader) header(row []string) bool {
	line, _ := t.csv.FieldPos(0)
	for i := range t.at {
		t.at[i] = -1
	}
	t.width = len(row)
	for i, name := range row {
		name = strings.ToLower(strings.TrimSpace(strings.TrimPrefix(name, "\uFEFF")))
		j := columnNamed(name)
		switch {
		case j < 0:
			t.faults.add(line, "header", name, "is no column of a table of positions", "take "+strings.Join(tableColumns, ", "))
		case t.at[j] >= 0:
			t.faults.add(line, "header", name, "stands twice", "keep one")
		default:
			t.at[j] = i
		}
	}
	need := []int{colUTC, colX, colX + 1, colX + 2}
	if t.frame == nil {
		need = append(need, colFrame)
	}
	if t.at[colVX] >= 0 || t.at[colVX+1] >= 0 || t.at[colVX+2] >= 0 {
		need = append(need, colVX, colVX+1, colVX+2)
	}
	for _, j := range need {
		if t.at[j] < 0 {
			next := "add it"
			if j == colFrame {
				next = "add it, or name the frame of all rows"
			}
			t.faults.add(line, "header", "", "the column "+tableColumns[j]+" is missing", next)
		}
	}
	return t.faults.Total == 0
}

func columnNamed(name string) int {
	for j, c := range tableColumns {
		if c == name {
			return j
		}
	}
	return -1
}

// row reads one datum.
func (t *tableReader) row(row []string) (d Datum, ok bool) {
	d.Line, _ = t.csv.FieldPos(0)
	before := t.faults.Total
	if len(row) != t.width {
		t.faults.add(d.Line, "", "", fmt.Sprintf("has %d fields and the header %d", len(row), t.width), "give as many")
		return d, false
	}
	text := func(j int) string {
		if t.at[j] < 0 {
			return ""
		}
		return strings.TrimSpace(row[t.at[j]])
	}
	frame := t.readFrame(d.Line, text(colFrame))
	at, err := time.Parse("2006-01-02T15:04:05.999999999Z", text(colUTC))
	if err != nil || at.Year() < 1957 || at.Year() > 2056 {
		t.faults.add(d.Line, "utc", text(colUTC), "is no instant of 1957 to 2056", "give ISO 8601 in UTC ending in Z, as 2026-03-10T12:00:00Z")
	}
	d.Time = at
	d.Position = orbit.Vec3{X: t.number(d.Line, colX, text), Y: t.number(d.Line, colX+1, text), Z: t.number(d.Line, colX+2, text)}.Scale(1000)
	if text(colVX)+text(colVX+1)+text(colVX+2) != "" {
		d.HasVelocity = true
		d.Velocity = orbit.Vec3{X: t.number(d.Line, colVX, text), Y: t.number(d.Line, colVX+1, text), Z: t.number(d.Line, colVX+2, text)}.Scale(1000)
	}
	if text(colSigma) != "" {
		d.PositionSigma = unit.Length(t.sigma(d.Line, colSigma, text))
	}
	if text(colSpeedSigma) != "" {
		d.VelocitySigma = unit.Speed(t.sigma(d.Line, colSpeedSigma, text))
	}
	if t.faults.Total > before {
		return d, false
	}
	if !slices.Contains(t.frames, frame) {
		t.frames = append(t.frames, frame)
	}
	d.Position, d.Velocity = t.turner.Between(frame, orbit.TEME, d.Position, d.Velocity, d.Time)
	return d, true
}

func (t *tableReader) readFrame(line int, text string) orbit.Frame {
	switch {
	case text == "" && t.frame != nil:
		return *t.frame
	case text == "":
		t.faults.add(line, "frame", "", "is empty", "name one of "+frameList())
		return orbit.TEME
	}
	f, err := ParseFrame(text)
	if err != nil {
		t.faults.add(line, "frame", text, "is not known", "name one of "+frameList())
	}
	return f
}

// number reads a coordinate in km or km/s.
func (t *tableReader) number(line, j int, text func(int) string) float64 {
	v, err := strconv.ParseFloat(text(j), 64)
	if err != nil || !(math.Abs(v) <= 1e6) {
		t.faults.add(line, tableColumns[j], text(j), "is no number within ±1000000", "give "+unitOf(j))
		return 0
	}
	return v
}

func (t *tableReader) sigma(line, j int, text func(int) string) float64 {
	v, err := strconv.ParseFloat(text(j), 64)
	if err != nil || !(v >= 1e-6 && v <= 1e7) {
		t.faults.add(line, tableColumns[j], text(j), "is no standard deviation of 1e-6 to 1e7", "give "+unitOf(j)+", or leave it empty")
		return 0
	}
	return v
}

func unitOf(j int) string {
	switch {
	case j < colVX:
		return "kilometres"
	case j < colSigma:
		return "kilometres a second"
	case j == colSigma:
		return "metres"
	}
	return "metres a second"
}
