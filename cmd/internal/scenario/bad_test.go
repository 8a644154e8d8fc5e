package scenario_test

import (
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario"
)

var update = flag.Bool("update", false, "write the golden files anew")

// TestBadScenarios holds each file of testdata/bad to the exact message it must give.
func TestBadScenarios(t *testing.T) {
	files, err := filepath.Glob("testdata/bad/*")
	if err != nil {
		t.Fatal(err)
	}
	checked := 0
	for _, file := range files {
		ext := filepath.Ext(file)
		if ext == ".want" {
			continue
		}
		checked++
		t.Run(filepath.Base(file), func(t *testing.T) {
			s, err := scenario.Load(scenario.Request{Path: filepath.ToSlash(file)})
			if err == nil {
				t.Fatalf("accepted: %+v", s)
			}
			golden(t, strings.TrimSuffix(file, ext)+".want", err.Error()+"\n")
		})
	}
	if checked < 100 {
		t.Errorf("only %d bad files were found; the folder holds more", checked)
	}
}

// golden compares with a file, or writes it with -update, and shows the first line
// that differs.
func golden(t *testing.T, file, got string) {
	t.Helper()
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got == string(want) {
		return
	}
	g, w := strings.Split(got, "\n"), strings.Split(string(want), "\n")
	for i := 0; i < max(len(g), len(w)); i++ {
		var a, b string
		if i < len(g) {
			a = g[i]
		}
		if i < len(w) {
			b = w[i]
		}
		if a != b {
			t.Fatalf("%s line %d:\n got %s\nwant %s", file, i+1, a, b)
		}
	}
}
