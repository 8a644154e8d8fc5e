package cli

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"iter"

	"slantwise/station/pass"
)

// passColumns are the columns of the list, a promise: names, units and order.
var passColumns = []string{
	"spacecraft", "station", "aos_utc", "culmination_utc", "los_utc", "duration_s", "max_elevation_deg",
	"aos_azimuth_deg", "culmination_azimuth_deg", "los_azimuth_deg", "min_range_km", "cut",
}

// firstPassNumber and lastPassNumber are the columns that hold numbers.
const firstPassNumber, lastPassNumber = 5, 10

// passNumber appends number n of the columns, in fixed decimals: milliseconds,
// 0.0001 deg, metres.
func passNumber(b []byte, f *pass.Found, n int) []byte {
	switch n {
	case 5:
		return appendFixed(b, f.Duration().Seconds(), 3)
	case 6:
		return appendFixed(b, f.MaxElevation.Degrees(), 4)
	case 7:
		return appendAzimuth(b, f.AOSAzimuth.Degrees(), 4)
	case 8:
		return appendAzimuth(b, f.CulminationAzimuth.Degrees(), 4)
	case 9:
		return appendAzimuth(b, f.LOSAzimuth.Degrees(), 4)
	}
	return appendFixed(b, f.MinRange.Kilometres(), 3)
}

// appendAzimuth appends an azimuth in deg, in [0, 360): what rounds up to a full turn
// is north.
func appendAzimuth(b []byte, deg float64, decimals int) []byte {
	at := len(b)
	b = appendFixed(b, deg, decimals)
	if bytes.HasPrefix(b[at:], []byte("360.")) {
		b = appendFixed(b[:at], 0, decimals)
	}
	return b
}

// writeCSV writes the list without keeping it as text: a million passes must not
// take a gigabyte. plusMinus adds plusMinusColumns.
func (p *passSearch) writeCSV(w io.Writer, passes iter.Seq[pass.Found], plusMinus bool) error {
	craft, stations := p.quoted(csvField)
	out := bufio.NewWriterSize(w, 1<<16)
	b := make([]byte, 0, 512)
	var day dayStamp
	for i, c := range passColumns {
		if i > 0 {
			b = append(b, ',')
		}
		b = append(b, c...)
	}
	if plusMinus {
		for _, c := range plusMinusColumns {
			b = append(append(b, ','), c...)
		}
	}
	if p.mounts != nil {
		for _, c := range mountColumns {
			b = append(append(b, ','), c...)
		}
	}
	b = append(b, '\n')
	for f := range passes {
		if _, err := out.Write(b); err != nil {
			return fmt.Errorf("write the CSV: %w", err)
		}
		b = append(append(append(append(b[:0], craft[f.Spacecraft]...), ','), stations[f.Site]...), ',')
		b = append(day.append(b, f.AOS), ',')
		b = append(day.append(b, f.Culmination), ',')
		b = append(day.append(b, f.LOS), ',')
		for n := firstPassNumber; n <= lastPassNumber; n++ {
			b = append(passNumber(b, &f, n), ',')
		}
		b = append(b, f.Cut.String()...)
		if plusMinus {
			m := p.sure.of(&f)
			for n := range m {
				b = sureNumber(append(b, ','), &m, n)
			}
		}
		if p.mounts != nil {
			b = p.mounts.appendCSV(b, &f)
		}
		b = append(b, '\n')
	}
	out.Write(b) // an error stays in the writer until it is flushed
	if err := out.Flush(); err != nil {
		return fmt.Errorf("write the CSV: %w", err)
	}
	return nil
}

// writeJSON writes the window, what decided, and the list with the columns' names.
func (p *passSearch) writeJSON(w io.Writer, passes iter.Seq[pass.Found]) error {
	craft, stations := p.quoted(jsonField)
	out := bufio.NewWriterSize(w, 1<<16)
	fmt.Fprintf(out, "{\n  \"window_start_utc\": \"%s\",\n  \"window_end_utc\": \"%s\",\n  \"horizon\": \"%s\",\n  \"passes\": [",
		utc(p.window.From), utc(p.window.To), p.decides)
	b := make([]byte, 0, 1024)
	var day dayStamp
	separator := "\n"
	for f := range passes {
		b = append(append(b[:0], separator...), `    {"spacecraft": `...)
		b = append(append(append(b, craft[f.Spacecraft]...), `, "station": `...), stations[f.Site]...)
		b = append(day.append(append(b, `, "aos_utc": "`...), f.AOS), '"')
		b = append(day.append(append(b, `, "culmination_utc": "`...), f.Culmination), '"')
		b = append(day.append(append(b, `, "los_utc": "`...), f.LOS), '"')
		for n := firstPassNumber; n <= lastPassNumber; n++ {
			b = append(append(append(b, `, "`...), passColumns[n]...), `": `...)
			b = passNumber(b, &f, n)
		}
		b = append(append(append(b, `, "cut": "`...), f.Cut.String()...), '"')
		if p.sure != nil {
			b = p.sure.appendFields(b, &f)
		}
		if p.mounts != nil {
			b = p.mounts.appendFields(b, &f)
		}
		b = append(b, '}')
		if _, err := out.Write(b); err != nil {
			return fmt.Errorf("write the JSON: %w", err)
		}
		separator = ",\n"
	}
	if separator != "\n" {
		out.WriteString("\n  ")
	}
	out.WriteString("]\n}\n") // an error stays in the writer until it is flushed
	if err := out.Flush(); err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	return nil
}

// quoted returns the names of spacecraft and stations as fields, once for all rows.
func (p *passSearch) quoted(field func(string) string) (craft, stations []string) {
	for i := range p.spacecraft {
		craft = append(craft, field(p.spacecraft[i].Name))
	}
	for i := range p.stations {
		stations = append(stations, field(p.stations[i].Site.Name))
	}
	return craft, stations
}

// csvField returns a text as a field of CSV, in quotes where it needs them.
func csvField(s string) string {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	// A buffer takes everything.
	_ = w.Write([]string{s, ""})
	w.Flush()
	return string(bytes.TrimSuffix(b.Bytes(), []byte(",\n")))
}

// jsonField returns a text as a JSON string.
func jsonField(s string) string {
	b, err := json.Marshal(s)
	if err != nil { // no text fails
		panic(err)
	}
	return string(b)
}
