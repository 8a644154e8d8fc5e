package record

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// smallBook is a logbook of one pass with three measurements, written by the engine with pages of
// 512 bytes; its remark goes over several of them.
func smallBook(t testing.TB) []byte {
	data, err := os.ReadFile(filepath.Join("testdata", "small.logbook"))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func TestSmallPages(t *testing.T) {
	s := salvage(smallBook(t), nil)
	if len(s.Entries) != 1 || s.MissingPasses+s.MissingValues+len(s.Changed) > 0 {
		t.Fatalf("%v", s)
	}
	e := &s.Entries[0]
	if e.Check() != nil || e.Samples != 3 || len(e.Values) != 3 || e.Note != strings.Repeat("gusts from the west; ", 60) || e.Values[2].Measured != 2 || e.TakenBytes != 2e6 || !math.IsNaN(e.PredictedBytes) {
		t.Errorf("%+v", e)
	}
}

// TestEveryByteFlipped flips each byte of the small file in turn: what is read is as written, or
// told as changed or missing.
func TestEveryByteFlipped(t *testing.T) {
	data := smallBook(t)
	want := salvage(data, nil).Entries[0].Sealed()
	silent := 0
	for i := range data {
		data[i] ^= 0x15
		s := salvage(data, nil)
		data[i] ^= 0x15
		for k := range s.Entries {
			e := &s.Entries[k]
			if e.Sealed() != want && e.Seal != "" && e.Check() == nil {
				t.Errorf("byte %d: another entry, and its seal holds", i)
			}
		}
		if len(s.Entries) == 1 && s.Entries[0].Sealed() == want {
			silent++ // the byte is none of a row's
		}
	}
	if silent == len(data) || silent == 0 {
		t.Errorf("%d of %d bytes matter to no row", silent, len(data))
	}
}

func FuzzSalvage(f *testing.F) {
	f.Add(smallBook(f), []byte{})
	f.Add([]byte("SQLite format 3\x00"), []byte{})
	f.Add(append(make([]byte, 4096), 0x0d, 0, 0, 0, 1, 0, 0, 0, 0, 10, 5, 1, 2, 9, 9), []byte{0x37, 0x7f, 6, 0x82})
	f.Fuzz(func(t *testing.T, data, ahead []byte) {
		s := salvage(data, ahead)
		for i := range s.Entries {
			e := &s.Entries[i]
			if e.ID < 1 || i > 0 && e.ID <= s.Entries[i-1].ID {
				t.Errorf("entry %d stands after another of a greater number", e.ID)
			}
			for _, v := range e.Values {
				if math.IsNaN(v.Measured) {
					t.Error("a measurement without a number")
				}
			}
		}
		if s.MissingPasses < 0 || s.MissingValues < 0 {
			t.Errorf("%+v", s)
		}
	})
}
