package record

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"hash"
	"math"
	"strconv"
	"time"
)

// Entry is a pass of the logbook.
type Entry struct {
	ID                             int64
	Spacecraft, Station            string
	Transmitter, Antenna, Mode     string    // what was predicted for; empty before version 3
	First, Last                    time.Time // of the samples
	Source, Elements, Note, Digest string
	Taken                          time.Time // into the book
	PredictedBytes, TakenBytes     float64   // of the pass; NaN: not known
	Values                         []Value

	Samples int    // values that were written; -1: not known (before version 3)
	Seal    string // of what was written; empty before version 3
}

// Value is one measured number with what was predicted (NaN: nothing), where the spacecraft was
// predicted (NaN: not known) and how it is used.
type Value struct {
	At                       time.Time
	Quantity, State          string
	Measured, Predicted      float64
	AzimuthDeg, ElevationDeg float64
}

// ErrChanged says that an entry is not what was written.
var ErrChanged = errors.New("it is not what was written")

// Layout is how the times are written.
const Layout = "2006-01-02T15:04:05.000000000Z"

// Stamp writes a time.
func Stamp(t time.Time) string { return t.UTC().Format(Layout) }

// Check compares an entry, filled, with the seal that was written with it: SHA-256 over every
// text and number. The engine finds broken structure and no changed number; this does. An entry
// from before version 3 has no seal and passes.
func (e *Entry) Check() error {
	switch {
	case e.Samples >= 0 && len(e.Values) != e.Samples:
		return fmt.Errorf("entry %d: %w: %d of %d measurements are there", e.ID, ErrChanged, len(e.Values), e.Samples)
	case e.Seal != "" && e.Seal != e.Sealed():
		return fmt.Errorf("entry %d: %w: a text or number in it was changed", e.ID, ErrChanged)
	}
	return nil
}

// Sealed returns the seal of an entry as it stands, its number left out.
func (e *Entry) Sealed() string {
	h := sha256.New()
	for _, s := range []string{e.Spacecraft, e.Station, e.Transmitter, e.Antenna, e.Mode, Stamp(e.First), Stamp(e.Last), e.Source, e.Elements, e.Note, e.Digest, Stamp(e.Taken)} {
		text(h, s)
	}
	number(h, e.PredictedBytes)
	number(h, e.TakenBytes)
	for i := range e.Values {
		v := &e.Values[i]
		text(h, Stamp(v.At))
		text(h, v.Quantity)
		text(h, v.State)
		for _, x := range []float64{v.Measured, v.Predicted, v.AzimuthDeg, v.ElevationDeg} {
			number(h, x)
		}
	}
	return hex.EncodeToString(h.Sum(nil))
}

// ReadTimes sets the times of an entry from their texts.
func (e *Entry) ReadTimes(first, last, taken string) (err error) {
	if e.First, err = time.Parse(Layout, first); err == nil {
		if e.Last, err = time.Parse(Layout, last); err == nil {
			e.Taken, err = time.Parse(Layout, taken)
		}
	}
	return err
}

func text(h hash.Hash, s string) { fmt.Fprintf(h, "%d:%s", len(s), s) }

func number(h hash.Hash, v float64) {
	if math.IsNaN(v) {
		text(h, "")
		return
	}
	v += 0 // the engine does not keep the sign of nought
	text(h, strconv.FormatFloat(v, 'g', -1, 64))
}
