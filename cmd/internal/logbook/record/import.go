package record

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"
)

// MaxExchange is the largest file that Import reads, in bytes.
const MaxExchange = 1_000_000_000

// Import reads entries from a file that an Exporter wrote, told apart by its beginning. The error
// holds all faults of a CSV with their lines, of JSON the first. Entries that are not what was
// exported are returned too; Check tells of them.
func Import(r io.Reader, name string) ([]Entry, error) {
	data, err := io.ReadAll(io.LimitReader(r, MaxExchange+1))
	if err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	if len(data) > MaxExchange {
		return nil, fmt.Errorf("%s: the file is larger than the %d bytes that are read; split it", name, MaxExchange)
	}
	data = bytes.TrimPrefix(data, []byte("\uFEFF"))
	if strings.HasPrefix(strings.TrimSpace(string(data[:min(len(data), 64)])), "{") {
		return importJSON(data, name)
	}
	return importCSV(data, name)
}

func importJSON(data []byte, name string) ([]Entry, error) {
	var file struct {
		Format  string      `json:"format"`
		Version int         `json:"version"`
		Passes  []exchanged `json:"passes"`
	}
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(&file); err != nil {
		return nil, fmt.Errorf("%s: byte %d: %w", name, d.InputOffset(), err)
	}
	if _, err := d.Token(); !errors.Is(err, io.EOF) {
		return nil, fmt.Errorf("%s: byte %d: there is more after the end of the logbook; cut it off", name, d.InputOffset())
	}
	if file.Format != formatName {
		return nil, fmt.Errorf("%s: format: %q is not allowed; it must be %q, as log export writes it", name, file.Format, formatName)
	}
	if file.Version < 1 || file.Version > formatVersion {
		return nil, fmt.Errorf("%s: version: %d is not known to this program, which knows up to %d; use a newer program", name, file.Version, formatVersion)
	}
	var out []Entry
	for i := range file.Passes {
		h := &file.Passes[i]
		e := Entry{ID: h.Number, Spacecraft: h.Spacecraft, Station: h.Station, Transmitter: h.Transmitter, Antenna: h.Antenna, Mode: h.Mode, Source: h.Source, Elements: h.Elements,
			Note: h.Remark, Digest: h.Digest, PredictedBytes: fromPointer(h.PredictedBytes), TakenBytes: fromPointer(h.TakenBytes), Samples: -1, Seal: h.Seal}
		if h.Samples != nil {
			e.Samples = *h.Samples
		}
		err := e.ReadTimes(h.FirstUTC, h.LastUTC, h.AddedUTC)
		for k := range h.Measurements {
			m := &h.Measurements[k]
			v := Value{Quantity: m.Quantity, State: m.State, Measured: fromPointer(m.Measured), Predicted: fromPointer(m.Predicted),
				AzimuthDeg: fromPointer(m.AzimuthDeg), ElevationDeg: fromPointer(m.ElevationDeg)}
			var fault error
			if v.At, fault = time.Parse(Layout, m.UTC); fault == nil && m.Measured == nil {
				fault = errors.New("measured: it is null; give a number")
			}
			if fault != nil && err == nil {
				err = fmt.Errorf("measurement %d: %w", k+1, fault)
			}
			e.Values = append(e.Values, v)
		}
		if err != nil {
			return nil, fmt.Errorf("%s: pass %d: %w", name, i+1, err)
		}
		out = append(out, e)
	}
	return out, nil
}

// mostFaults is how many faults of a file are told; the rest is counted.
const mostFaults = 20

func importCSV(data []byte, name string) ([]Entry, error) {
	r := csv.NewReader(bytes.NewReader(data))
	head, err := r.Read()
	if err != nil || !slices.Equal(head, exportColumns) {
		return nil, fmt.Errorf("%s: line 1: these are not the columns of a logbook; give a file that log export wrote, which begins with %s", name, strings.Join(exportColumns[:4], ","))
	}
	var out []Entry
	var faults []error
	more := 0
	for {
		row, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		var fault *csv.ParseError
		if err == nil {
			err = importRow(row, &out)
		} else if errors.As(err, &fault) && !errors.Is(err, csv.ErrFieldCount) {
			faults = append(faults, fmt.Errorf("%s: line %d: %w", name, fault.Line, fault.Err))
			break
		}
		if err == nil {
			continue
		}
		if len(faults) == mostFaults {
			more++
			continue
		}
		line, _ := r.FieldPos(0)
		faults = append(faults, fmt.Errorf("%s: line %d: %w", name, line, err))
	}
	if more > 0 {
		faults = append(faults, fmt.Errorf("%s: and %d more faults", name, more))
	}
	return out, errors.Join(faults...)
}

// importRow adds a row to the entry before it where it is of the same, else begins another.
func importRow(row []string, out *[]Entry) error {
	number, err := strconv.ParseInt(row[0], 10, 64)
	if err != nil {
		return fmt.Errorf("number: %q is not a whole number", row[0])
	}
	if n := len(*out); n == 0 || (*out)[n-1].ID != number {
		e := Entry{ID: number, Spacecraft: row[1], Station: row[2], Transmitter: row[3], Antenna: row[4], Mode: row[5], Source: row[8], Elements: row[9], Note: row[10], Digest: row[11],
			Samples: -1, Seal: row[16]}
		if err := e.ReadTimes(row[6], row[7], row[12]); err != nil {
			return err
		}
		if e.PredictedBytes, err = number64("predicted_bytes", row[13]); err != nil {
			return err
		}
		if e.TakenBytes, err = number64("taken_bytes", row[14]); err != nil {
			return err
		}
		if row[15] != "" {
			if e.Samples, err = strconv.Atoi(row[15]); err != nil || e.Samples < 0 {
				return fmt.Errorf("samples: %q is not a count", row[15])
			}
		}
		*out = append(*out, e)
	}
	if strings.Join(row[passColumnCount:], "") == "" {
		return nil
	}
	e := &(*out)[len(*out)-1]
	v := Value{Quantity: row[18], State: row[23]}
	if v.At, err = time.Parse(Layout, row[17]); err != nil {
		return fmt.Errorf("utc: %q is not a time as log export writes it", row[17])
	}
	for i, into := range []*float64{&v.Measured, &v.Predicted, &v.AzimuthDeg, &v.ElevationDeg} {
		if *into, err = number64(exportColumns[19+i], row[19+i]); err != nil {
			return err
		}
	}
	if math.IsNaN(v.Measured) {
		return errors.New("measured: it is empty; give a number")
	}
	e.Values = append(e.Values, v)
	return nil
}

func number64(name, text string) (float64, error) {
	if text == "" {
		return math.NaN(), nil
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return 0, fmt.Errorf("%s: %q is not a number", name, text)
	}
	return v, nil
}
