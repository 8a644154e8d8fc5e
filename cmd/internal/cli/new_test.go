package cli

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestNewThenCheck(t *testing.T) {
	t.Chdir(t.TempDir())
	code, out, errOut := invoke(t, "new")
	if code != ExitAnswer || out != "wrote slantwise.yaml and slantwise.tle; next: slantwise check --scenario slantwise.yaml\n" {
		t.Fatalf("code %d, stdout %q, stderr %q", code, out, errOut)
	}
	if code, out, errOut = invoke(t, "check"); code != ExitAnswer || errOut != "" || !strings.HasPrefix(out, "slantwise.yaml: no faults\n") {
		t.Errorf("check of the new file: code %d, stdout %q, stderr %q", code, out, errOut)
	}
}

func TestNewReplacesNothing(t *testing.T) {
	for _, theirs := range []string{"mine.yaml", "mine.tle"} {
		dir := t.TempDir()
		if err := os.WriteFile(filepath.Join(dir, theirs), []byte("theirs"), 0o644); err != nil {
			t.Fatal(err)
		}
		code, _, errOut := invoke(t, "new", filepath.Join(dir, "mine.yaml"))
		if code != ExitInput || !strings.Contains(errOut, theirs+": there is such a file already, and it is left as it is; name another FILE") {
			t.Errorf("%s is there: code %d, stderr %q", theirs, code, errOut)
		}
		entries, err := os.ReadDir(dir)
		if err != nil || len(entries) != 1 {
			t.Errorf("%s is there: the folder holds %v (%v), want it alone", theirs, entries, err)
		}
		if text, err := os.ReadFile(filepath.Join(dir, theirs)); err != nil || string(text) != "theirs" {
			t.Errorf("%s now holds %q (%v)", theirs, text, err)
		}
	}
}

func TestNewRefusesOtherNames(t *testing.T) {
	for _, name := range []string{"scenario.toml", "scenario", "plans/.yaml", ""} {
		code, _, errOut := invoke(t, "new", name)
		if code != ExitInput || errOut != fmt.Sprintf("slantwise: %q: new writes YAML; give a name that ends in .yaml\n", name) {
			t.Errorf("%q: code %d, stderr %q", name, code, errOut)
		}
	}
}

func TestNewMakesTheFolder(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "plans/next/summer.yaml"); code != ExitAnswer {
		t.Fatalf("code %d, stderr %q", code, errOut)
	}
	if code, _, errOut := invoke(t, "check", "--scenario", "plans/next/summer.yaml"); code != ExitAnswer {
		t.Errorf("check of the new file: code %d, stderr %q", code, errOut)
	}
	code, _, errOut := invoke(t, "new", "plans/next/summer.tle/a.yaml")
	if code != ExitFailure || errOut != "slantwise: making the folder of plans/next/summer.tle/a.yaml: not a directory\n" {
		t.Errorf("a file in the way: code %d, stderr %q", code, errOut)
	}
}
