package logbook

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"slantwise/cmd/internal/logbook/record"
)

// bookOf writes a logbook of n entries of 200 values each and returns its path.
func bookOf(t *testing.T, n int) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "team.logbook")
	b, err := Open(t.Context(), path, true)
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		e := sample(fmt.Sprint("log ", i))
		e.First = e.First.Add(time.Duration(i) * time.Hour)
		if i == 1 {
			e.Note = strings.Repeat("a long remark ", 2000) // over several pages
		}
		if _, err := b.Add(t.Context(), e); err != nil {
			t.Fatal(err)
		}
	}
	if err := b.Close(); err != nil {
		t.Fatal(err)
	}
	return path
}

// everything reads a whole book by the engine; the error is the first.
func everything(t *testing.T, path string) ([]Entry, error) {
	t.Helper()
	b, err := OpenToRead(t.Context(), path)
	if err != nil {
		return nil, err
	}
	defer b.Close()
	list, err := b.List(t.Context())
	for i := range list {
		if err == nil {
			err = b.Fill(t.Context(), &list[i])
		}
	}
	return list, err
}

func TestSalvageOfAWholeFileIsTheFile(t *testing.T) {
	path := bookOf(t, 7)
	want, err := everything(t, path)
	if err != nil {
		t.Fatal(err)
	}
	got, err := record.Salvage(path)
	if err != nil {
		t.Fatal(err)
	}
	if got.MissingPasses != 0 || got.MissingValues != 0 || len(got.Changed) != 0 || len(got.Entries) != 7 {
		t.Errorf("%s, changed %v", got, got.Changed)
	}
	for i := range want {
		if fmt.Sprint(want[i]) != fmt.Sprint(got.Entries[i]) || got.Entries[i].Sealed() != got.Entries[i].Seal {
			t.Errorf("entry %d differs", want[i].ID)
		}
	}
}

// TestSalvageReadsTheLogBesideTheFile: entries that the engine has only in its log.
func TestSalvageReadsTheLogBesideTheFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "open.logbook")
	b, err := Open(t.Context(), path, true)
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	for i := range 3 {
		if _, err := b.Add(t.Context(), sample(fmt.Sprint(i))); err != nil {
			t.Fatal(err)
		}
	}
	if info, err := os.Stat(path + "-wal"); err != nil || info.Size() == 0 {
		t.Fatal("nothing is in the log", err)
	}
	got, err := record.Salvage(path)
	if err != nil || len(got.Entries) != 3 || got.MissingValues != 0 || len(got.Entries[2].Values) != 200 {
		t.Errorf("%v, %v", got, err)
	}
}

// TestTruncated cuts a file anywhere: nothing that is read is wrong, and what is lost is told.
func TestTruncated(t *testing.T) {
	path := bookOf(t, 12)
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	least := math.MaxInt
	for _, share := range []float64{0.02, 0.3, 0.55, 0.9, 0.99} {
		cut := filepath.Join(t.TempDir(), "cut.logbook")
		if err := os.WriteFile(cut, whole[:int(share*float64(len(whole)))], 0o600); err != nil {
			t.Fatal(err)
		}
		if _, err := everything(t, cut); !errors.Is(err, ErrDamaged) || !strings.Contains(err.Error(), cut) {
			t.Errorf("cut to %g: the engine says %v", share, err)
		}
		got, err := record.Salvage(cut)
		if share < 0.05 {
			if err == nil || !strings.Contains(err.Error(), "go back to a copy") {
				t.Errorf("of next to nothing: %v, %v", got, err)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		values := 0
		for i := range got.Entries {
			e := &got.Entries[i]
			values += len(e.Values)
			for _, v := range e.Values {
				if v.Quantity != "cn0_dbhz" || v.Measured != math.Trunc(v.Measured) || v.AzimuthDeg != 12.5 {
					t.Fatalf("cut to %g: %+v was never written", share, v)
				}
			}
		}
		least = min(least, values)
		if full := 12 * 200; values+got.MissingValues > full || values == full || share > 0.5 && values == 0 {
			t.Errorf("cut to %g: %s", share, got)
		}
		t.Logf("cut to %g: %s", share, got)
	}
	if least == 12*200 {
		t.Error("no cut lost anything")
	}
}

// TestFlippedBytes flips one byte at a time: either all is as written, or it is told, by the
// engine or by the seals; never a wrong number without a word.
func TestFlippedBytes(t *testing.T) {
	path := bookOf(t, 4)
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	want, err := everything(t, path)
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(2026, 12))
	file := filepath.Join(t.TempDir(), "flipped.logbook")
	told, saved := 0, 0
	const trials = 60
	for range trials {
		at, bit := rng.IntN(len(whole)), byte(1)<<rng.IntN(8)
		broken := bytes.Clone(whole)
		broken[at] ^= bit
		if err := os.WriteFile(file, broken, 0o600); err != nil {
			t.Fatal(err)
		}
		list, err := everything(t, file)
		if err == nil {
			if len(list) > len(want) {
				t.Fatalf("byte %d: %d entries of %d", at, len(list), len(want))
			}
			for i := range list {
				if fmt.Sprint(list[i]) != fmt.Sprint(want[list[i].ID-1]) {
					t.Errorf("byte %d, bit %d: entry %d is another, and nothing is said", at, bit, list[i].ID)
				}
			}
			if len(list) == len(want) {
				continue
			}
		}
		told++
		if s, err := record.Salvage(file); err == nil && len(s.Entries) >= 3 {
			saved++
		}
	}
	t.Logf("of %d flipped bytes %d were told, of these %d left three of four passes or more to salvage", trials, told, saved)
	if told < trials/4 || saved < told*9/10 {
		t.Errorf("of %d flipped bytes %d were told, %d saved", trials, told, saved)
	}
}

// TestHeadOrPageOverwritten: without the head of the file, and without the page in its middle.
func TestHeadOrPageOverwritten(t *testing.T) {
	path := bookOf(t, 12)
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for name, from := range map[string]int{"head": 0, "middle": len(whole) / 2 / 4096 * 4096} {
		broken := bytes.Clone(whole)
		copy(broken[from:from+4096], make([]byte, 4096))
		file := filepath.Join(t.TempDir(), name)
		if err := os.WriteFile(file, broken, 0o600); err != nil {
			t.Fatal(err)
		}
		_, err := everything(t, file)
		if err == nil {
			t.Errorf("%s: nothing is said", name)
		}
		got, err := record.Salvage(file)
		if err != nil || len(got.Entries) < 11 {
			t.Errorf("%s: %v, %v", name, got, err)
		}
		t.Logf("%s: %v", name, got)
	}
}

func TestOtherFiles(t *testing.T) {
	dir := t.TempDir()
	file := func(name, text string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	foreign := filepath.Join(dir, "foreign")
	db, err := open(foreign, "mode=rwc")
	if err != nil {
		t.Fatal(err)
	}
	if _, err := db.db.Exec("CREATE TABLE birds(name TEXT)"); err != nil {
		t.Fatal(err)
	}
	db.Close()
	for _, c := range []struct{ path, want string }{
		{file("empty", ""), "the file is empty"}, {file("text", strings.Repeat("no database. ", 500)), "damaged or no logbook"},
		{file("short", "SQLite format 3\x00"), ""}, {foreign, "another program"}, {dir, "folder"}, {filepath.Join(dir, "missing"), "log add makes one"},
	} {
		_, err := OpenToRead(t.Context(), c.path)
		if err == nil || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), c.path) {
			t.Errorf("%s: %v, want %q", c.path, err, c.want)
		}
	}
	if _, err := Open(t.Context(), foreign, true); err == nil || !strings.Contains(err.Error(), "another program") {
		t.Errorf("a table of ours was put into a foreign file: %v", err)
	}
	if _, err := record.Salvage(file("text", strings.Repeat("no database. ", 500))); err == nil || !strings.Contains(err.Error(), "no row of a logbook") {
		t.Errorf("%v", err)
	}
}

func TestLockedByAnother(t *testing.T) {
	usual := patience
	patience = 150
	t.Cleanup(func() { patience = usual })
	path := bookOf(t, 1)
	other, err := Open(t.Context(), path, false)
	if err != nil {
		t.Fatal(err)
	}
	defer other.Close()
	tx, err := other.db.BeginTx(t.Context(), nil)
	if err != nil {
		t.Fatal(err)
	}
	defer tx.Rollback() // the test is over
	if _, err := Open(t.Context(), path, false); !errors.Is(err, ErrLocked) || !strings.Contains(err.Error(), "try again") {
		t.Errorf("to write: %v", err)
	}
	if list, err := everything(t, path); err != nil || len(list) != 1 {
		t.Errorf("to read: %v, %v", list, err)
	}
}

// TestTwoWriters add at the same time; all of it is there.
func TestTwoWriters(t *testing.T) {
	path := bookOf(t, 1)
	var both sync.WaitGroup
	for k := range 2 {
		both.Go(func() {
			b, err := Open(t.Context(), path, false)
			if err != nil {
				t.Error(err)
				return
			}
			defer b.Close()
			for i := range 5 {
				if _, err := b.Add(t.Context(), sample(fmt.Sprint(k, i))); err != nil {
					t.Error(err)
				}
			}
		})
	}
	both.Wait()
	if list, err := everything(t, path); err != nil || len(list) != 11 {
		t.Errorf("%d entries, %v", len(list), err)
	}
}

func TestDiskFull(t *testing.T) {
	path := bookOf(t, 2)
	b, err := Open(t.Context(), path, false)
	if err != nil {
		t.Fatal(err)
	}
	pages := 0
	if err := b.db.QueryRow("PRAGMA page_count").Scan(&pages); err != nil {
		t.Fatal(err)
	}
	if _, err := b.db.Exec(fmt.Sprintf("PRAGMA max_page_count = %d", pages+1)); err != nil {
		t.Fatal(err)
	}
	if _, err := b.Add(t.Context(), sample("too much")); err == nil || !strings.Contains(err.Error(), "the disk is full, and nothing was added") {
		t.Errorf("%v", err)
	}
	b.Close()
	if list, err := everything(t, path); err != nil || len(list) != 2 {
		t.Errorf("%d entries, %v", len(list), err)
	}
}

// TestThroughABook: what is exported of one book and added to another is the same there, also a
// number that the engine keeps otherwise than it came.
func TestThroughABook(t *testing.T) {
	from := bookOf(t, 3)
	b, err := Open(t.Context(), from, false)
	if err != nil {
		t.Fatal(err)
	}
	odd := sample("odd")
	odd.Values[0].Measured, odd.Values[1].Measured, odd.Values[2].Predicted = math.Copysign(0, -1), 1e-300, 1<<53
	odd.Note = "lines\nand \"quotes\", ☂"
	if _, err := b.Add(t.Context(), odd); err != nil {
		t.Fatal(err)
	}
	b.Close()
	list, err := everything(t, from)
	if err != nil {
		t.Fatal(err)
	}
	for _, format := range []record.Format{record.CSV, record.JSON} {
		first := written(t, list, format)
		back, err := record.Import(bytes.NewReader(first), "export")
		if err != nil {
			t.Fatal(err)
		}
		to := filepath.Join(t.TempDir(), "to.logbook")
		b, err := Open(t.Context(), to, true)
		if err != nil {
			t.Fatal(err)
		}
		for i := range back {
			if _, err := b.Add(t.Context(), &back[i]); err != nil {
				t.Fatal(err)
			}
		}
		b.Close()
		again, err := everything(t, to)
		if err != nil || !bytes.Equal(written(t, again, format), first) {
			t.Errorf("format %d: through a file and a book it is another (%v)", format, err)
		}
	}
}

func written(t *testing.T, list []Entry, format record.Format) []byte {
	t.Helper()
	var out bytes.Buffer
	x := record.NewExporter(&out, format)
	for i := range list {
		if err := x.Entry(&list[i]); err != nil {
			t.Fatal(err)
		}
	}
	if err := x.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}
