package logbook

import (
	"database/sql"
	"errors"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/cmd/internal/logbook/record"
)

func sample(digest string) *Entry {
	at := time.Date(2026, 9, 15, 0, 50, 0, 500, time.UTC)
	e := &Entry{PredictedBytes: math.NaN(), TakenBytes: 2e6, Spacecraft: "Wagtail 1", Station: "Skerry Point", First: at, Last: at.Add(200 * time.Second), Source: "log.csv", Elements: "set", Digest: digest, Taken: at}
	for i := range 200 {
		e.Values = append(e.Values, Value{At: at.Add(time.Duration(i) * time.Second), Quantity: "cn0_dbhz", State: "used", Measured: float64(i), Predicted: math.NaN(), AzimuthDeg: 12.5, ElevationDeg: math.NaN()})
	}
	return e
}

func TestRoundTrip(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a % name?.logbook")
	b, err := Open(t.Context(), path, true)
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	if _, err := b.Add(t.Context(), sample("one")); err != nil {
		t.Fatal(err)
	}
	if _, err := b.Add(t.Context(), sample("one")); !errors.Is(err, ErrTaken) {
		t.Errorf("the same again: %v", err)
	}
	list, err := b.List(t.Context())
	if err != nil || len(list) != 1 {
		t.Fatal(list, err)
	}
	if err := b.Fill(t.Context(), &list[0]); err != nil {
		t.Fatal(err)
	}
	want := sample("one")
	if got := list[0]; !got.First.Equal(want.First) || len(got.Values) != 200 || got.Values[7].Measured != 7 || !math.IsNaN(got.Values[7].Predicted) {
		t.Errorf("%+v", list[0].Values[7])
	}
	if _, err := os.Stat(path); err != nil {
		t.Error(err)
	}
}

// oldBook writes a file of an earlier version with an entry of one value.
func oldBook(t *testing.T, version int) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "old.logbook")
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	for _, s := range append(slices.Clone(steps[:version]), fmt.Sprintf("PRAGMA user_version = %d", version),
		"INSERT INTO pass(spacecraft,station,first,last,source,elements,note,taken) VALUES('W','S','2026-09-15T00:50:00.000000000Z','2026-09-15T00:50:01.000000000Z','f','e','windy','2026-09-15T01:50:00.000000000Z')",
		"INSERT INTO sample(pass,at,quantity,measured,predicted,state) VALUES(1,'2026-09-15T00:50:00.000000000Z','cn0_dbhz',60,61.5,'used')") {
		if _, err := db.Exec(s); err != nil {
			t.Fatal(err)
		}
	}
	return path
}

// TestMigration opens a file of every earlier version: to read it stays as it is, to write it
// is brought up to date, and what was in it is the same each time, by the engine and without.
func TestMigration(t *testing.T) {
	for version := 1; version < len(steps); version++ {
		path := oldBook(t, version)
		check := func(how string, list []Entry, err error) {
			t.Helper()
			if err != nil || len(list) < 1 || len(list[0].Values) != 1 {
				t.Fatalf("version %d, %s: %v, %v", version, how, list, err)
			}
			e, v := list[0], list[0].Values[0]
			if e.Spacecraft != "W" || e.Note != "windy" || e.Samples != -1 || !math.IsNaN(e.TakenBytes) || e.Transmitter != "" || v.Predicted != 61.5 || !math.IsNaN(v.ElevationDeg) {
				t.Errorf("version %d, %s: %+v", version, how, e)
			}
		}
		list, err := everything(t, path)
		check("read", list, err)
		saved, err := record.Salvage(path)
		check("salvaged", saved.Entries, err)
		if got := versionOf(t, path); got != version {
			t.Errorf("reading made version %d of version %d", got, version)
		}
		b, err := Open(t.Context(), path, false)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := b.Add(t.Context(), sample("new")); err != nil {
			t.Fatal(err)
		}
		b.Close()
		list, err = everything(t, path)
		check("migrated", list, err)
		if got := versionOf(t, path); got != len(steps) || len(list) != 2 {
			t.Errorf("version %d became %d with %d entries", version, got, len(list))
		}
		saved, err = record.Salvage(path)
		check("migrated and salvaged", saved.Entries, err)
	}
}

func versionOf(t *testing.T, path string) (version int) {
	t.Helper()
	b, err := OpenToRead(t.Context(), path)
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	return b.version
}

func TestNewerVersion(t *testing.T) {
	path := bookOf(t, 1)
	b, err := Open(t.Context(), path, false)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := b.db.Exec("PRAGMA user_version = 99"); err != nil {
		t.Fatal(err)
	}
	b.Close()
	if _, err := Open(t.Context(), path, false); err == nil || !strings.Contains(err.Error(), "newer program") {
		t.Errorf("to write: %v", err)
	}
	if _, err := OpenToRead(t.Context(), path); err == nil || !strings.Contains(err.Error(), "newer program") {
		t.Errorf("to read: %v", err)
	}
}

func TestNotADatabase(t *testing.T) {
	path := filepath.Join(t.TempDir(), "text.logbook")
	if err := os.WriteFile(path, []byte(strings.Repeat("this is no database. ", 100)), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(t.Context(), path, false); err == nil || !strings.Contains(err.Error(), path) {
		t.Errorf("%v", err)
	}
}

// TestKilledWhileWriting kills a process that adds entries without end; what is in the
// book afterwards are whole entries, and it takes more.
func TestKilledWhileWriting(t *testing.T) {
	if path := os.Getenv("SLANTWISE_TEST_LOGBOOK"); path != "" {
		b, err := Open(t.Context(), path, true)
		for i := 0; err == nil; i++ {
			_, err = b.Add(t.Context(), sample(time.Now().String()))
		}
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "killed.logbook")
	whole := 0
	for range 3 {
		cmd := exec.Command(os.Args[0], "-test.run", "^TestKilledWhileWriting$")
		cmd.Env = append(os.Environ(), "SLANTWISE_TEST_LOGBOOK="+path)
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(700 * time.Millisecond)
		if err := cmd.Process.Kill(); err != nil {
			t.Fatal(err)
		}
		_ = cmd.Wait() // killed
		b, err := Open(t.Context(), path, true)
		if err != nil {
			t.Fatal(err)
		}
		list, err := b.List(t.Context())
		if err != nil {
			t.Fatal(err)
		}
		for i := range list {
			if err := b.Fill(t.Context(), &list[i]); err != nil || len(list[i].Values) != 200 {
				t.Errorf("entry %d has %d of 200 values, %v", list[i].ID, len(list[i].Values), err)
			}
		}
		if len(list) < whole {
			t.Errorf("%d entries, and there were %d", len(list), whole)
		}
		whole = len(list)
		b.Close()
	}
	if whole == 0 {
		t.Error("nothing was written before the kill")
	}
	t.Logf("%d whole entries after three kills", whole)
}
