package downlink

import (
	"bufio"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// patternFileLimit is the most bytes that a pattern file may hold: every degree in both
// angles takes 1.5 MB.
const patternFileLimit = 16 << 20

// The headers of a pattern file.
var (
	oneAngleHeader = []string{"off_boresight_deg", "gain_dbi"}
	twoAngleHeader = []string{"off_boresight_deg", "around_boresight_deg", "gain_dbi"}
)

// ReadPatternCSV reads a measured pattern from UTF-8 CSV text with the header
// off_boresight_deg,gain_dbi (a GainTable, its rows in order) or
// off_boresight_deg,around_boresight_deg,gain_dbi (a GainGrid, checked as by
// NewPatternGrid). A byte order mark, CRLF, blank lines and blanks around numbers are
// taken as they come. Errors name the line or the row, the first after the header being
// row 1.
func ReadPatternCSV(r io.Reader) (Pattern, error) {
	limited := &io.LimitedReader{R: r, N: patternFileLimit + 1}
	text := bufio.NewReader(limited)
	if mark, err := text.Peek(3); err == nil && string(mark) == "\ufeff" {
		if _, err := text.Discard(3); err != nil {
			return Pattern{}, fmt.Errorf("pattern: %w", err)
		}
	}
	rows, two, err := patternRows(text)
	if limited.N == 0 {
		return Pattern{}, fmt.Errorf("pattern: the text is over %d MB; no measured pattern is", patternFileLimit>>20)
	}
	if err != nil {
		return Pattern{}, fmt.Errorf("pattern: %w", err)
	}
	return patternOf(rows, two)
}

func patternOf(rows []PatternRow, two bool) (Pattern, error) {
	if two {
		g, err := NewPatternGrid(rows)
		if err != nil {
			return Pattern{}, fmt.Errorf("pattern: %w", err)
		}
		return Pattern{Kind: GainGrid, Grid: g}, nil
	}
	p := Pattern{Kind: GainTable}
	for _, row := range rows {
		p.Table = append(p.Table, PatternPoint{row.Off, row.Gain})
	}
	return p, p.Validate()
}

func patternRows(text io.Reader) (out []PatternRow, two bool, err error) {
	rows := csv.NewReader(text)
	rows.FieldsPerRecord = -1
	rows.ReuseRecord = true
	header, err := rows.Read()
	if errors.Is(err, io.EOF) {
		return nil, false, fmt.Errorf("the text is empty; its first line must be %s or %s", strings.Join(oneAngleHeader, ","), strings.Join(twoAngleHeader, ","))
	}
	if err != nil {
		return nil, false, err
	}
	two = sameHeader(header, twoAngleHeader)
	if !two && !sameHeader(header, oneAngleHeader) {
		return nil, false, fmt.Errorf("the header is %.80q; it must be %s or %s", strings.Join(header, ","), strings.Join(oneAngleHeader, ","), strings.Join(twoAngleHeader, ","))
	}
	width := len(header)
	for {
		row, err := rows.Read()
		if errors.Is(err, io.EOF) {
			return out, two, nil
		}
		if err != nil {
			return nil, two, err
		}
		line, _ := rows.FieldPos(0)
		if len(row) != width {
			return nil, two, fmt.Errorf("line %d: %d columns; the header has %d", line, len(row), width)
		}
		var v [3]float64
		for i, field := range row {
			if v[i], err = strconv.ParseFloat(strings.TrimSpace(field), 64); err != nil || math.IsNaN(v[i]) || math.IsInf(v[i], 0) {
				return nil, two, fmt.Errorf("line %d: %.40q is not a finite number; write it with a decimal point", line, field)
			}
		}
		p := PatternRow{Off: unit.Angle(v[0]) * unit.Degree, Gain: unit.DB(v[width-1])}
		if two {
			p.Around = unit.Angle(v[1]) * unit.Degree
		}
		out = append(out, p)
	}
}

func sameHeader(got, want []string) bool {
	if len(got) != len(want) {
		return false
	}
	for i := range want {
		if strings.TrimSpace(got[i]) != want[i] {
			return false
		}
	}
	return true
}
