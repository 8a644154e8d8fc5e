package cli

import (
	"bufio"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"
)

// pointingColumns are the columns of a pointing file, a promise: names, units and
// order.
var pointingColumns = []string{
	"utc", "azimuth_deg", "elevation_deg", "apparent_elevation_deg", "range_km", "range_rate_km_s",
	"azimuth_rate_deg_s", "elevation_rate_deg_s", "doppler_hz", "received_frequency_hz", "sunlit",
}

// pointingNumbers is how many columns after the first hold numbers.
const pointingNumbers = 9

// number returns number n of the row, from 1, as pointingColumns has them, and its
// decimals: the last one is under what a metre, or a millimetre per second, makes.
func (p *pointing) number(r *pointingRow, n int) (v float64, decimals int) {
	l := &r.look
	switch n {
	case 1:
		return l.Azimuth.Degrees(), 6
	case 2:
		return l.Elevation.Degrees(), 6
	case 3:
		if !r.apparentOK {
			return math.NaN(), 6
		}
		return r.apparent.Degrees(), 6
	case 4:
		return l.Range.Kilometres(), 6
	case 5:
		return l.RangeRate.KilometresPerSecond(), 9
	case 6:
		return l.AzimuthRate.DegreesPerSecond(), 9
	case 7:
		return l.ElevationRate.DegreesPerSecond(), 9
	}
	if p.transmitter == nil {
		return math.NaN(), 3
	}
	shift, received := p.shift(r)
	if n == 8 {
		return shift, 3
	}
	return received, 3
}

func (p *pointing) appendNumber(b []byte, r *pointingRow, n int) []byte {
	v, decimals := p.number(r, n)
	if n == 1 {
		return appendAzimuth(b, v, decimals)
	}
	return appendFixed(b, v, decimals)
}

// writeCSV writes the promised columns; plusMinus adds spreadColumns.
func (p *pointing) writeCSV(ctx context.Context, w io.Writer, plusMinus bool) error {
	out := bufio.NewWriterSize(w, 1<<16)
	columns := pointingColumns
	if plusMinus {
		columns = append(slices.Clone(columns), spreadColumns...)
	}
	if p.axes != nil {
		columns = append(slices.Clone(columns), axisColumns...)
	}
	b := append([]byte(strings.Join(columns, ",")), '\n')
	var day dayStamp
	err := p.rows(ctx, func(r *pointingRow) error {
		if _, err := out.Write(b); err != nil {
			return fmt.Errorf("write the CSV: %w", err)
		}
		b = append(day.append(b[:0], r.at), ',')
		for n := 1; n <= pointingNumbers; n++ {
			b = append(p.appendNumber(b, r, n), ',')
		}
		b = append(b, r.light.String()...)
		if plusMinus {
			b = p.sure.appendCSV(b, r)
		}
		if p.axes != nil {
			b = p.axes.appendCSV(b, r)
		}
		b = append(b, '\n')
		return nil
	})
	if err != nil {
		return err
	}
	out.Write(b) // an error stays in the writer until it is flushed
	if err := out.Flush(); err != nil {
		return fmt.Errorf("write the CSV: %w", err)
	}
	return nil
}

// writeJSON writes who points at what, by which element set, and the rows with the
// columns' names.
func (p *pointing) writeJSON(ctx context.Context, w io.Writer) error {
	out := bufio.NewWriterSize(w, 1<<16)
	transmitter, frequency := "null", math.NaN()
	if p.transmitter != nil {
		transmitter, frequency = jsonField(p.transmitter.Name), p.transmitter.Frequency.Hertz()
	}
	carrier, err := num(frequency, 3).MarshalJSON()
	if err != nil {
		return err
	}
	flown := p.flown.json(4)
	head, err := json.Marshal(flown)
	if err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	epoch := "null"
	if flown.EpochUTC != nil {
		epoch = jsonField(*flown.EpochUTC)
	}
	fmt.Fprintf(out, "{\n  \"spacecraft\": %s,\n  \"station\": %s,\n  \"transmitter\": %s,\n  \"frequency_hz\": %s,\n  \"element_set_epoch_utc\": %s,\n  \"orbit\": %s,\n  \"rows\": [",
		jsonField(p.spacecraft.Name), jsonField(p.station.Site.Name), transmitter, carrier, epoch, head)
	var b []byte
	var day dayStamp
	separator := "\n"
	err = p.rows(ctx, func(r *pointingRow) error {
		b = append(append(b[:0], separator...), `    {"utc": "`...)
		b = append(day.append(b, r.at), '"')
		for n := 1; n <= pointingNumbers; n++ {
			b = append(append(append(b, `, "`...), pointingColumns[n]...), `": `...)
			before := len(b)
			if b = p.appendNumber(b, r, n); len(b) == before {
				b = append(b, "null"...)
			}
		}
		b = append(append(append(b, `, "sunlit": "`...), r.light.String()...), '"')
		if p.sure != nil {
			b = p.sure.appendJSON(b, r)
		}
		if p.axes != nil {
			b = p.axes.appendJSON(b, r)
		}
		b = append(b, '}')
		separator = ",\n"
		if _, err := out.Write(b); err != nil {
			return fmt.Errorf("write the JSON: %w", err)
		}
		return nil
	})
	if err != nil {
		return err
	}
	out.WriteString("\n  ]\n}\n") // an error stays in the writer until it is flushed
	if err := out.Flush(); err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	return nil
}

// writeTable writes the rows for people, with the station's own time where it has a
// time zone.
func (p *pointing) writeTable(ctx context.Context, env *Env) error {
	zone := p.station.Site.TimeZone
	columns := []column{textColumn("UTC")}
	if zone != nil {
		columns = append(columns, textColumn("local"))
	}
	for _, head := range []string{"azimuth deg", "elevation deg", "apparent elevation deg", "range km", "range rate km/s",
		"azimuth rate deg/s", "elevation rate deg/s", "Doppler Hz", "received Hz"} {
		columns = append(columns, numberColumn(head))
	}
	columns = append(columns, textColumn("light"))
	if p.sure != nil {
		columns = append(columns, numberColumn("along ± deg"), numberColumn("direction ± deg"), numberColumn("Doppler ± Hz"))
	}
	if p.axes != nil {
		columns = append(columns, numberColumn("lower axis deg"), numberColumn("upper axis deg"), numberColumn("lower deg/s"), numberColumn("upper deg/s"), numberColumn("error deg"))
	}
	var rows [][]string
	err := p.rows(ctx, func(r *pointingRow) error {
		row := []string{utc(r.at)}
		if zone != nil {
			row = append(row, localTime(r.at, zone))
		}
		for n := 1; n <= pointingNumbers; n++ {
			v, decimals := p.number(r, n)
			// For the eye: angles to 0.001 deg, metres, millimetres per second, hertz.
			decimals = map[int]int{9: 6, 6: 3, 3: 0}[decimals]
			if n == 1 {
				row = append(row, azimuth(v, decimals))
			} else {
				row = append(row, fixed(v, decimals))
			}
		}
		row = append(row, r.light.String())
		if p.sure != nil {
			m := p.sure.spread(r)
			row = append(row, fixed(m[0], 4), fixed(m[1], 4), fixed(m[2], 1))
		}
		if p.axes != nil {
			for _, v := range p.axes.numbers(r) {
				row = append(row, fixed(v, 3))
			}
		}
		rows = append(rows, row)
		return nil
	})
	if err != nil {
		return err
	}
	return writeTable(env.Out, env.outWidth(), columns, rows)
}
