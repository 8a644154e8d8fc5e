package record

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"strconv"
)

// Format is how a logbook is written out.
type Format int

// Formats.
const (
	CSV Format = iota
	JSON
)

// formatName stands in a JSON file, and formatVersion is that of the fields.
const (
	formatName    = "slantwise logbook"
	formatVersion = 1
)

// exchanged is an entry in a JSON file. Fields get added, not renamed.
type exchanged struct {
	Number         int64            `json:"number"`
	Spacecraft     string           `json:"spacecraft"`
	Station        string           `json:"station"`
	Transmitter    string           `json:"transmitter"`
	Antenna        string           `json:"antenna"`
	Mode           string           `json:"mode"`
	FirstUTC       string           `json:"first_utc"`
	LastUTC        string           `json:"last_utc"`
	Source         string           `json:"source"`
	Elements       string           `json:"elements"`
	Remark         string           `json:"remark"`
	Digest         string           `json:"digest"` // SHA-256 of the file of measurements
	AddedUTC       string           `json:"added_utc"`
	PredictedBytes *float64         `json:"predicted_bytes"`
	TakenBytes     *float64         `json:"taken_bytes"`
	Samples        *int             `json:"samples"` // measurements that were written; null: not known
	Seal           string           `json:"seal"`    // SHA-256 over all of it; empty: none
	Measurements   []exchangedValue `json:"measurements"`
}

type exchangedValue struct {
	UTC          string   `json:"utc"`
	Quantity     string   `json:"quantity"`
	Measured     *float64 `json:"measured"`
	Predicted    *float64 `json:"predicted"`
	AzimuthDeg   *float64 `json:"azimuth_deg"`
	ElevationDeg *float64 `json:"elevation_deg"`
	State        string   `json:"state"`
}

func pointer(v float64) *float64 {
	if math.IsNaN(v) {
		return nil
	}
	v += 0 // no minus nought
	return &v
}

func fromPointer(v *float64) float64 {
	if v == nil {
		return math.NaN()
	}
	return *v
}

// Exporter writes entries one after the other, so that a large logbook is never held whole.
type Exporter struct {
	w      io.Writer
	format Format
	csv    *csv.Writer
	count  int
	err    error
}

// exportColumns are the columns of the CSV: a row a measurement, its pass beside it each time.
var exportColumns = []string{"number", "spacecraft", "station", "transmitter", "antenna", "mode", "first_utc", "last_utc", "source", "elements", "remark", "digest",
	"added_utc", "predicted_bytes", "taken_bytes", "samples", "seal", "utc", "quantity", "measured", "predicted", "azimuth_deg", "elevation_deg", "state"}

// passColumnCount is how many of the columns are those of the pass.
const passColumnCount = 17

// NewExporter begins a file.
func NewExporter(w io.Writer, format Format) *Exporter {
	x := &Exporter{w: w, format: format}
	if format == JSON {
		_, x.err = fmt.Fprintf(w, `{"format":%q,"version":%d,"passes":[`, formatName, formatVersion)
		return x
	}
	x.csv = csv.NewWriter(w)
	x.err = x.csv.Write(exportColumns)
	return x
}

// Entry writes a filled entry.
func (x *Exporter) Entry(e *Entry) error {
	if x.err != nil {
		return x.err
	}
	if x.format == JSON {
		x.err = x.entryJSON(e)
	} else {
		x.err = x.entryCSV(e)
	}
	x.count++
	return x.err
}

// Close ends the file; it does not close what is written to.
func (x *Exporter) Close() error {
	switch {
	case x.err != nil:
	case x.format == JSON:
		_, x.err = io.WriteString(x.w, "\n]}\n")
	default:
		x.csv.Flush()
		x.err = x.csv.Error()
	}
	return x.err
}

func (x *Exporter) entryJSON(e *Entry) error {
	h := exchanged{Number: e.ID, Spacecraft: e.Spacecraft, Station: e.Station, Transmitter: e.Transmitter, Antenna: e.Antenna, Mode: e.Mode,
		FirstUTC: Stamp(e.First), LastUTC: Stamp(e.Last), Source: e.Source, Elements: e.Elements, Remark: e.Note, Digest: e.Digest, AddedUTC: Stamp(e.Taken),
		PredictedBytes: pointer(e.PredictedBytes), TakenBytes: pointer(e.TakenBytes), Seal: e.Seal, Measurements: []exchangedValue{}}
	if e.Samples >= 0 {
		h.Samples = &e.Samples
	}
	for i := range e.Values {
		v := &e.Values[i]
		h.Measurements = append(h.Measurements, exchangedValue{Stamp(v.At), v.Quantity, pointer(v.Measured), pointer(v.Predicted), pointer(v.AzimuthDeg), pointer(v.ElevationDeg), v.State})
	}
	text, err := json.Marshal(h)
	if err != nil {
		return err
	}
	lead := ",\n"
	if x.count == 0 {
		lead = "\n"
	}
	_, err = x.w.Write(append([]byte(lead), text...))
	return err
}

func (x *Exporter) entryCSV(e *Entry) error {
	samples := ""
	if e.Samples >= 0 {
		samples = strconv.Itoa(e.Samples)
	}
	row := []string{strconv.FormatInt(e.ID, 10), e.Spacecraft, e.Station, e.Transmitter, e.Antenna, e.Mode, Stamp(e.First), Stamp(e.Last), e.Source, e.Elements, e.Note, e.Digest,
		Stamp(e.Taken), exact(e.PredictedBytes), exact(e.TakenBytes), samples, e.Seal}
	if len(e.Values) == 0 {
		return x.csv.Write(append(row, make([]string, len(exportColumns)-passColumnCount)...))
	}
	for i := range e.Values {
		v := &e.Values[i]
		if err := x.csv.Write(append(row[:passColumnCount:passColumnCount], Stamp(v.At), v.Quantity, exact(v.Measured), exact(v.Predicted), exact(v.AzimuthDeg), exact(v.ElevationDeg), v.State)); err != nil {
			return err
		}
	}
	return nil
}

// exact writes a number with all its digits, empty where it does not exist.
func exact(v float64) string {
	if math.IsNaN(v) {
		return ""
	}
	return strconv.FormatFloat(v+0, 'g', -1, 64) // no minus nought
}
