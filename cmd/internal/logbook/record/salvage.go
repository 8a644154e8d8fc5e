package record

import (
	"errors"
	"fmt"
	"math"
	"os"
	"slices"
	"time"
)

// Salvaged is what could be read of a damaged file, whatever the engine says of it.
type Salvaged struct {
	Entries []Entry // filled, by number; one without a spacecraft is of measurements whose pass is lost
	// MissingValues and MissingPasses were written, by the count of an entry and the gaps in the
	// running numbers, and were not found: at least so many, since what stood behind the last is not
	// known.
	MissingValues, MissingPasses int
	Changed                      []int64 // entries that are whole and yet not what was written
}

// String says in a line what is there and what is lost.
func (s *Salvaged) String() string {
	values := 0
	for i := range s.Entries {
		values += len(s.Entries[i].Values)
	}
	text := fmt.Sprintf("%d passes with %d measurements can be read", len(s.Entries), values)
	if s.MissingPasses > 0 || s.MissingValues > 0 {
		text += fmt.Sprintf("; %d passes and %d measurements cannot, at least", s.MissingPasses, s.MissingValues)
	}
	if n := len(s.Changed); n > 0 {
		text += fmt.Sprintf("; %d of the passes have a changed text or number", n)
	}
	return text
}

// maxSalvage is the largest file that is salvaged, in bytes.
const maxSalvage = 2_000_000_000

// Salvage reads the rows of a damaged file page by page: each leaf of a table that can be read is,
// also where the head of the file, the way to the leaf, or the end of the file is gone. What was
// committed to the log of the engine beside it counts. It fails where there is no row of a
// logbook.
func Salvage(path string) (*Salvaged, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	if info.Size() > maxSalvage {
		return nil, fmt.Errorf("logbook %s: it is damaged and larger than the %d bytes that are searched; go back to a copy", path, maxSalvage)
	}
	data, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	ahead, err := os.ReadFile(path + "-wal")
	if err != nil && !errors.Is(err, os.ErrNotExist) {
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	out := salvage(data, ahead)
	if len(out.Entries) == 0 {
		return nil, fmt.Errorf("logbook %s: no row of a logbook is in it; go back to a copy, or move it away and let log add begin a new one", path)
	}
	return out, nil
}

// salvage reads a file and the log beside it.
func salvage(data, ahead []byte) *Salvaged {
	passes, values := map[int64]*Entry{}, map[int64]numbered{}
	p := newPager(data, ahead)
	for n := range p.count() {
		for _, c := range p.leaf(n + 1) {
			if e, ok := passOf(c); ok {
				if passes[c.rowid] == nil {
					passes[c.rowid] = e
				}
			} else if v, ok := valueOf(c); ok {
				if _, had := values[c.rowid]; !had {
					values[c.rowid] = v
				}
			}
		}
	}
	return gather(passes, values)
}

// numbered is a measurement with the number of its pass.
type numbered struct {
	pass int64
	Value
}

func gather(passes map[int64]*Entry, values map[int64]numbered) *Salvaged {
	out := &Salvaged{}
	rows := make([]int64, 0, len(values))
	for id := range values {
		rows = append(rows, id)
	}
	slices.Sort(rows)
	for _, id := range rows {
		v := values[id]
		if passes[v.pass] == nil {
			passes[v.pass] = &Entry{ID: v.pass, Samples: -1, First: v.At, Last: v.At, Taken: v.At, PredictedBytes: math.NaN(), TakenBytes: math.NaN(),
				Note: "the pass of these measurements cannot be read"}
			out.MissingPasses++
		}
		e := passes[v.pass]
		e.Values = append(e.Values, v.Value)
	}
	gaps, short := gapsIn(rows), 0
	var ids []int64
	for id, e := range passes {
		ids = append(ids, id)
		if e.Samples > len(e.Values) {
			short += e.Samples - len(e.Values)
		}
	}
	out.MissingValues = max(gaps, short)
	slices.Sort(ids)
	out.MissingPasses += gapsIn(ids)
	for _, id := range ids {
		e := passes[id]
		if e.Samples == len(e.Values) && e.Check() != nil {
			out.Changed = append(out.Changed, id)
		}
		out.Entries = append(out.Entries, *e)
	}
	return out
}

// gapsIn counts the numbers from 1 to the last that are not in a sorted list. Nothing is ever
// taken out of a logbook, so that its running numbers have no gap.
func gapsIn(sorted []int64) int {
	if len(sorted) == 0 {
		return 0
	}
	last := sorted[len(sorted)-1]
	if last > 1<<40 { // a damaged number
		return 0
	}
	return int(last) - len(sorted)
}

// passOf reads a row of the table of passes.
func passOf(c cell) (*Entry, bool) {
	v := c.values
	if len(v) != 9 && len(v) != 10 && len(v) != 17 || v[0] != nil {
		return nil, false
	}
	text := make([]string, len(v))
	for i := range v {
		s, ok := v[i].(string)
		if numeric := i >= 13 && i <= 15; !ok && i > 0 && !numeric {
			return nil, false
		}
		text[i] = s
	}
	e := &Entry{ID: c.rowid, Samples: -1, PredictedBytes: math.NaN(), TakenBytes: math.NaN(),
		Spacecraft: text[1], Station: text[2], Source: text[5], Elements: text[6], Note: text[7]}
	if e.ReadTimes(text[3], text[4], text[8]) != nil || c.rowid < 1 {
		return nil, false
	}
	if len(v) > 9 {
		e.Digest = text[9]
	}
	if len(v) == 17 {
		e.Transmitter, e.Antenna, e.Mode, e.Seal = text[10], text[11], text[12], text[16]
		e.PredictedBytes, e.TakenBytes = realOf(v[13]), realOf(v[14])
		if n, ok := v[15].(int64); ok && n >= 0 && n < 1<<32 {
			e.Samples = int(n)
		}
	}
	return e, true
}

// valueOf reads a row of the table of measurements.
func valueOf(c cell) (numbered, bool) {
	v := c.values
	if len(v) != 6 && len(v) != 8 {
		return numbered{}, false
	}
	pass, ok0 := v[0].(int64)
	at, ok1 := v[1].(string)
	quantity, ok2 := v[2].(string)
	state, ok3 := v[5].(string)
	t, err := time.Parse(Layout, at)
	measured := realOf(v[3])
	if !(ok0 && ok1 && ok2 && ok3) || err != nil || math.IsNaN(measured) || pass < 1 || c.rowid < 1 {
		return numbered{}, false
	}
	out := numbered{pass, Value{At: t, Quantity: quantity, State: state, Measured: measured, Predicted: realOf(v[4]), AzimuthDeg: math.NaN(), ElevationDeg: math.NaN()}}
	if len(v) == 8 {
		out.AzimuthDeg, out.ElevationDeg = realOf(v[6]), realOf(v[7])
	}
	return out, true
}

// realOf returns a number of a row, which stands as an integer where it is one; else NaN.
func realOf(v any) float64 {
	switch x := v.(type) {
	case float64:
		return x
	case int64:
		return float64(x)
	}
	return math.NaN()
}
