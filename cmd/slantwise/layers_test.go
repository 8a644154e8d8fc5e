package main

import (
	"encoding/json"
	"errors"
	"io"
	"os/exec"
	"strings"
	"testing"
)

// layers is the order of the house, ground floor first. A package may import
// packages of lower rank only; a prefix stands for all that lies below it unless a
// longer prefix says otherwise.
var layers = []struct {
	prefix string
	rank   int
}{
	{"slantwise/orbit/unit", 0},
	{"slantwise/orbit", 1},
	{"slantwise/orbit/elements", 2},
	{"slantwise/orbit/fit", 2},
	{"slantwise/orbit/oem", 3},
	{"slantwise/orbit/attitude", 2},
	{"slantwise/station", 3},
	{"slantwise/station/pass", 4},
	{"slantwise/station/mount", 4},
	{"slantwise/downlink/modem", 5},
	{"slantwise/downlink/propagation", 5},
	{"slantwise/downlink", 6},
	{"slantwise/downlink/rateplan", 7},
	{"slantwise/downlink/tolerance", 7},
	{"slantwise/downlink/fluxdensity", 7},
	{"slantwise/downlink/licence", 7},
	{"slantwise/downlink/acceptance", 7},
	{"slantwise/downlink/recorder", 7},
	{"slantwise/downlink/passvolume", 7},
	{"slantwise/downlink/linkset", 7},
	{"slantwise/downlink/tuning", 7},
	{"slantwise/downlink/measured", 7},
	{"slantwise/downlink/sizing", 8},
	{"slantwise/downlink/contacts", 8},
	{"slantwise/downlink/contacts/verify", 9},
	{"slantwise/downlink/contacts/instance", 9},
	{"slantwise/downlink/contacts/change", 9},
	{"slantwise/downlink/contacts/solve", 10},
	{"slantwise/downlink/contacts/explain", 11},
	{"slantwise/reports/drawing", 5},
	{"slantwise/reports/paper/pdf", 5},
	{"slantwise/reports/paper", 6},
	{"slantwise/reports/viewing", 0}, // for tests alone
	{"slantwise/reports", 12},
	{"slantwise/cmd/internal/atomicfile", 12},
	{"slantwise/cmd/internal/nearest", 12},
	{"slantwise/cmd/internal/planfiles", 13},
	{"slantwise/cmd/internal/logbook/record", 12},
	{"slantwise/cmd/internal/logbook", 13},
	{"slantwise/cmd/internal/scenario", 14},
	{"slantwise/cmd/internal/web", 15},
	{"slantwise/cmd/internal/web/schematest", 0}, // for tests alone
	{"slantwise/cmd/internal/cli", 16},
	{"slantwise/cmd/slantwise", 17},
}

// banned are imports that would carry a concern into a layer which must not know
// it, each with its reason.
var banned = []struct{ in, path, why string }{
	{"slantwise/orbit", "net/http", "orbits come from files; fetching is the command's work"},
	{"slantwise/station", "os", "a station knows nothing of files; readers take an io.Reader"},
	{"slantwise/downlink", "os", "the budget knows nothing of files"},
	{"slantwise/downlink", "html/template", "the budget knows nothing of pages"},
	{"slantwise/reports", "slantwise/orbit/elements", "reports render finished values"},
	{"slantwise/orbit/unit", "slantwise/orbit", "the ground floor imports nothing of ours"},
}

type listed struct {
	ImportPath string
	Imports    []string
}

func TestImportsGoOneWay(t *testing.T) {
	packages := listPackages(t)
	if len(packages) < 5 {
		t.Fatalf("go list names only %d packages of the module", len(packages))
	}
	for _, p := range packages {
		rank, ok := rankOf(p.ImportPath)
		if !ok {
			t.Errorf("%s has no place in the order of the house: give it one in layers", p.ImportPath)
			continue
		}
		for _, imp := range p.Imports {
			for _, b := range banned {
				if within(p.ImportPath, b.in) && imp == b.path {
					t.Errorf("%s imports %s: %s", p.ImportPath, imp, b.why)
				}
			}
			if !within(imp, "slantwise") {
				continue
			}
			below, _ := rankOf(imp)
			sameTree := within(imp, p.ImportPath) || strings.Contains(imp, "/internal/")
			if below > rank || below == rank && !sameTree {
				t.Errorf("%s (rank %d) imports %s (rank %d): imports go down only", p.ImportPath, rank, imp, below)
			}
		}
	}
}

// rankOf returns the rank of the longest prefix that holds the package.
func rankOf(path string) (rank int, ok bool) {
	longest := -1
	for _, l := range layers {
		if within(path, l.prefix) && len(l.prefix) > longest {
			longest, rank, ok = len(l.prefix), l.rank, true
		}
	}
	return rank, ok
}

func within(path, prefix string) bool {
	return path == prefix || strings.HasPrefix(path, prefix+"/")
}

func listPackages(t *testing.T) []listed {
	t.Helper()
	out, err := exec.Command("go", "list", "-json=ImportPath,Imports", "slantwise/...").Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	var packages []listed
	dec := json.NewDecoder(strings.NewReader(string(out)))
	for {
		var p listed
		if err := dec.Decode(&p); errors.Is(err, io.EOF) {
			return packages
		} else if err != nil {
			t.Fatalf("go list: %v", err)
		}
		packages = append(packages, p)
	}
}
