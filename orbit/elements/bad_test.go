package elements

import (
	"errors"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "write the golden messages anew")

// TestBadFiles reads each file of testdata/bad and compares the whole message, and
// the warnings before it, with the golden one beside the file.
func TestBadFiles(t *testing.T) {
	files, err := filepath.Glob("testdata/bad/*.txt")
	if err != nil || len(files) < 90 {
		t.Fatalf("found %d bad files (%v), want at least 90", len(files), err)
	}
	for _, path := range files {
		name := strings.TrimSuffix(filepath.Base(path), ".txt")
		t.Run(name, func(t *testing.T) {
			f, err := os.Open(path)
			if err != nil {
				t.Fatal(err)
			}
			defer f.Close()
			sets, warnings, err := Read(f, name+".txt")
			if err == nil {
				t.Fatalf("was read without an error, %d sets", len(sets))
			}
			if sets != nil {
				t.Errorf("%d sets came with the error", len(sets))
			}
			var faults *Faults
			if !errors.As(err, &faults) {
				t.Errorf("error is a %T, want *Faults", err)
			}
			var b strings.Builder
			for _, w := range warnings {
				b.WriteString("warning: " + w.String() + "\n")
			}
			b.WriteString(err.Error() + "\n")
			golden(t, strings.TrimSuffix(path, ".txt")+".golden", b.String())
		})
	}
}

// golden compares a text with a file, or writes the file with -update.
func golden(t *testing.T, path, got string) {
	t.Helper()
	if *update {
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if got == string(want) {
		return
	}
	gotLines, wantLines := strings.Split(got, "\n"), strings.Split(string(want), "\n")
	for i := range max(len(gotLines), len(wantLines)) {
		var g, w string
		if i < len(gotLines) {
			g = gotLines[i]
		}
		if i < len(wantLines) {
			w = wantLines[i]
		}
		if g != w {
			t.Fatalf("%s differs at line %d\n got %s\nwant %s", path, i+1, g, w)
		}
	}
}
