package modem

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// userRowsLimit is the most bytes that a file of rows may hold.
const userRowsLimit = 4 << 20

// UserColumns are the columns of a file of the user's own rows, in this order. The
// numbers of the frame and the width may be empty; a row without a frame loses nothing
// to markers and headers.
var UserColumns = []string{
	"modulation", "coding", "code_rate", "bits_per_symbol", "width_hz_per_baud", "frame_information_bits", "frame_header_bits",
	"frame_sent_bits", "frame_marker_bits", "required_eb_n0_db", "error_rate", "metric", "source",
}

// ReadRows reads rows of the user's own from UTF-8 CSV text with the header UserColumns.
// Several lines of one modulation and coding are thresholds of one row; two or more of
// a metric, with Eb/N0 rising and the error rate falling, are its curve as well. Every row must name its source.
// An empty width is that of shaped pulses. All faults come at once, each with its line.
func ReadRows(r io.Reader) ([]Row, error) {
	limited := &io.LimitedReader{R: r, N: userRowsLimit + 1}
	text, err := io.ReadAll(limited)
	switch {
	case err != nil:
		return nil, fmt.Errorf("modes: %w", err)
	case limited.N == 0:
		return nil, fmt.Errorf("modes: the text is over %d MB; a row takes some hundred bytes", userRowsLimit>>20)
	}
	rows := csv.NewReader(strings.NewReader(strings.TrimPrefix(string(text), "\ufeff")))
	rows.FieldsPerRecord = -1
	head, err := rows.Read()
	if errors.Is(err, io.EOF) {
		return nil, fmt.Errorf("modes: the text is empty; its first line must be %s", strings.Join(UserColumns, ","))
	}
	if err != nil {
		return nil, fmt.Errorf("modes: %w", err)
	}
	for i := range head {
		head[i] = strings.TrimSpace(head[i])
	}
	if !slices.Equal(head, UserColumns) {
		return nil, fmt.Errorf("modes: line 1: the header is %.200q; it must be %s", strings.Join(head, ","), strings.Join(UserColumns, ","))
	}
	return gatherRows(rows)
}

func gatherRows(rows *csv.Reader) ([]Row, error) {
	var out []Row
	var faults []error
	for {
		fields, err := rows.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, errors.Join(append(faults, fmt.Errorf("modes: %w", err))...)
		}
		line, _ := rows.FieldPos(0)
		row, err := userRow(fields)
		if err == nil {
			out, err = addLine(out, row)
		}
		if err != nil {
			faults = append(faults, fmt.Errorf("modes: line %d: %w", line, err))
		}
	}
	for i := range out {
		if err := out[i].addCurves(); err != nil {
			faults = append(faults, fmt.Errorf("modes: %s: %w", out[i].Name(), err))
		}
	}
	if len(faults) > 0 {
		return nil, errors.Join(faults...)
	}
	return out, nil
}

// userRow reads a line into a row of one threshold.
func userRow(fields []string) (Row, error) {
	if len(fields) != len(UserColumns) {
		return Row{}, fmt.Errorf("%d columns; give %d: %s", len(fields), len(UserColumns), strings.Join(UserColumns, ","))
	}
	var faults []error
	text := func(column string) string {
		return strings.TrimSpace(fields[slices.Index(UserColumns, column)])
	}
	number := func(column string, low, high float64, open bool, otherwise float64) float64 {
		s := text(column)
		if s == "" && otherwise >= 0 {
			return otherwise
		}
		v, err := strconv.ParseFloat(s, 64)
		if strings.Contains(s, "/") {
			v, err = fraction(s)
		}
		if err != nil || !(v >= low && v <= high) || open && v == low {
			faults = append(faults, fmt.Errorf("%s: %.40q is not allowed; it must be a number from %g (%s) to %g", column, s, low, map[bool]string{true: "not itself", false: "itself too"}[open], high))
		}
		return v
	}
	const must = -1
	r := Row{
		Modulation: Modulation{Name: text("modulation"), Width: number("width_hz_per_baud", 0, 1000, true, 0), What: "of the user's own"},
		Coding:     Coding{Name: text("coding"), RateText: text("code_rate"), Rate: number("code_rate", 0, 1, true, must)},
	}
	bits := number("bits_per_symbol", 1, 16, false, must)
	r.Modulation.BitsPerSymbol = int(bits)
	r.Coding.Frame = Frame{
		InformationBits: number("frame_information_bits", 1, 1e9, false, 0), HeaderBits: number("frame_header_bits", 0, 1e9, false, 0),
		SentBits: number("frame_sent_bits", 1, 1e9, false, 0), MarkerBits: number("frame_marker_bits", 0, 1e9, false, 0),
		Provenance: "user", Source: text("source"),
	}
	t := Threshold{EbN0: unit.DB(number("required_eb_n0_db", -20, 100, false, must)), ErrorRate: number("error_rate", 0, 1, true, must), Provenance: "user", Source: text("source")}
	var err error
	if t.Metric, err = ParseMetric(text("metric")); err != nil {
		faults = append(faults, fmt.Errorf("metric: %w", err))
	}
	switch {
	case t.Source == "":
		faults = append(faults, errors.New("source: it is empty; say where the threshold comes from"))
	case bits != float64(int(bits)):
		faults = append(faults, fmt.Errorf("bits_per_symbol: %g is not a whole number", bits))
	case t.ErrorRate == 1:
		faults = append(faults, errors.New("error_rate: 1 is not allowed; it must be less than 1"))
	}
	r.Thresholds = []Threshold{t}
	if len(faults) == 0 {
		if known, err := FindModulation(r.Modulation.Name); err == nil && r.Modulation.Width == 0 && r.Modulation.BitsPerSymbol == known.BitsPerSymbol {
			r.Modulation = known // its width and its words
		}
		faults = append(faults, r.check(), r.checkBound(&t))
	}
	return r, errors.Join(faults...)
}

// checkBound refuses a threshold that no coding could reach: Shannon's bound for the
// information that is left when so many bits are wrong, η (1 - h(p)) with the binary
// entropy h (C. E. Shannon, 1959). A count of larger units than bits bounds it no less.
func (r *Row) checkBound(t *Threshold) error {
	if !(t.ErrorRate < 0.5) {
		return nil
	}
	density := r.SpectralEfficiency()
	if !r.Modulation.Shaped() {
		density /= r.Modulation.Width
	}
	p := t.ErrorRate
	kept := 1 + p*math.Log2(p) + (1-p)*math.Log2(1-p)
	least := 10 * math.Log10(math.Expm1(density*kept*math.Ln2)/density)
	if float64(t.EbN0) >= least {
		return nil
	}
	return fmt.Errorf("required_eb_n0_db: %g dB is not allowed; at an error rate of %g Shannon's bound for %g information bits a symbol is %.2f dB", float64(t.EbN0), p, r.SpectralEfficiency(), math.Round(100*least)/100+0)
}

// addLine adds a line's threshold to its row, or begins a row.
func addLine(rows []Row, r Row) ([]Row, error) {
	for i := range rows {
		had := &rows[i]
		if had.Modulation.Name != r.Modulation.Name || had.Coding.Name != r.Coding.Name {
			continue
		}
		r.Coding.Frame.Source = had.Coding.Frame.Source
		if had.Modulation != r.Modulation || had.Coding != r.Coding {
			return rows, fmt.Errorf("%s stands above with other numbers of its modulation, code rate or frame; they must be the same", r.Name())
		}
		for _, t := range had.Thresholds {
			if t.Metric == r.Thresholds[0].Metric && sameRate(t.ErrorRate, r.Thresholds[0].ErrorRate) {
				return rows, fmt.Errorf("%s stands above with the same error rate", r.Name())
			}
		}
		had.Thresholds = append(had.Thresholds, r.Thresholds...)
		return rows, nil
	}
	return append(rows, r), nil
}

// addCurves makes a curve of the thresholds of each metric that has several.
func (r *Row) addCurves() error {
	for _, m := range metrics {
		var points []Point
		for _, t := range r.Thresholds {
			if t.Metric == m {
				points = append(points, Point{t.EbN0, t.ErrorRate})
			}
		}
		if len(points) < 2 {
			continue
		}
		c, err := NewCurve(m, points, "user", r.Thresholds[0].Source)
		if err != nil {
			return err
		}
		r.Curves = append(r.Curves, c)
	}
	return nil
}
