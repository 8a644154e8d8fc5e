package station

import (
	"bufio"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// maskFileLimit is the most bytes that a mask file may hold: a point every 0.001°
// needs 7 MB.
const maskFileLimit = 16 << 20

// ReadMaskCSV reads a mask from UTF-8 CSV text with the header
// azimuth_deg,elevation_deg and a point a row, checked as by NewMask. A byte order
// mark, CRLF, blank lines and blanks around numbers are taken as they come. Errors
// name the line, or the entry (the first row after the header is entry 1).
func ReadMaskCSV(r io.Reader, kind ElevationKind) (*Mask, error) {
	limited := &io.LimitedReader{R: r, N: maskFileLimit + 1}
	text := bufio.NewReader(limited)
	if mark, err := text.Peek(3); err == nil && string(mark) == "\ufeff" {
		if _, err := text.Discard(3); err != nil {
			return nil, fmt.Errorf("horizon mask: %w", err)
		}
	}
	points, err := maskRows(text)
	if limited.N == 0 {
		return nil, fmt.Errorf("horizon mask: the text is over %d MB; a mask needs a point every 0.001 deg at most", maskFileLimit>>20)
	}
	if err != nil {
		return nil, fmt.Errorf("horizon mask: %w", err)
	}
	return NewMask(points, kind)
}

func maskRows(text io.Reader) ([]MaskPoint, error) {
	rows := csv.NewReader(text)
	rows.FieldsPerRecord = -1
	rows.ReuseRecord = true
	row, err := rows.Read()
	if errors.Is(err, io.EOF) {
		return nil, errors.New("the text is empty; its first line must be azimuth_deg,elevation_deg")
	}
	if err != nil {
		return nil, err
	}
	if len(row) != 2 || strings.TrimSpace(row[0]) != "azimuth_deg" || strings.TrimSpace(row[1]) != "elevation_deg" {
		return nil, fmt.Errorf("line %d: the header is %.60q; it must be azimuth_deg,elevation_deg", line(rows), strings.Join(row, ","))
	}
	var points []MaskPoint
	for {
		row, err := rows.Read()
		if errors.Is(err, io.EOF) {
			return points, nil
		}
		if err != nil {
			return nil, err
		}
		if len(row) != 2 {
			return nil, fmt.Errorf("line %d: %d columns; give two, azimuth and elevation in degrees, with decimal points", line(rows), len(row))
		}
		var p MaskPoint
		for i, to := range []*unit.Angle{&p.Azimuth, &p.Elevation} {
			v, err := strconv.ParseFloat(strings.TrimSpace(row[i]), 64)
			if err != nil {
				return nil, fmt.Errorf("line %d: %.40q is not a number; give degrees with a decimal point", line(rows), row[i])
			}
			*to = unit.Angle(v) * unit.Degree
		}
		points = append(points, p)
	}
}

func line(rows *csv.Reader) int {
	n, _ := rows.FieldPos(0)
	return n
}
