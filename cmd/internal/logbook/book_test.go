package logbook

import (
	"database/sql"
	"errors"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
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

func TestMigration(t *testing.T) {
	path := filepath.Join(t.TempDir(), "old.logbook")
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range []string{steps[0], "PRAGMA user_version = 1",
		"INSERT INTO pass(spacecraft,station,first,last,source,elements,taken) VALUES('W','S','2026-09-15T00:50:00.000000000Z','2026-09-15T00:50:00.000000000Z','f','e','2026-09-15T00:50:00.000000000Z')"} {
		if _, err := db.Exec(s); err != nil {
			t.Fatal(err)
		}
	}
	db.Close()
	b, err := Open(t.Context(), path, false)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := b.Add(t.Context(), sample("new")); err != nil {
		t.Fatal(err)
	}
	if list, err := b.List(t.Context()); err != nil || len(list) != 2 {
		t.Errorf("%v, %v", list, err)
	}
	if _, err := b.db.Exec("PRAGMA user_version = 99"); err != nil {
		t.Fatal(err)
	}
	b.Close()
	if _, err := Open(t.Context(), path, false); err == nil || !strings.Contains(err.Error(), "newer program") {
		t.Errorf("a newer file: %v", err)
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
