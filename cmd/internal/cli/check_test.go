package cli

import (
	"encoding/json"
	"os"
	"strings"
	"testing"
)

func TestCheckDemo(t *testing.T) {
	for _, f := range []string{"table", "csv", "json"} {
		code, out, errOut := invoke(t, "check", "--format", f)
		if code != ExitAnswer || !strings.HasPrefix(errOut, "slantwise: no --scenario and no slantwise.yaml here: this is the embedded demo") {
			t.Errorf("%s: code %d, stderr %q", f, code, errOut)
		}
		golden(t, "check-demo."+f, out)
		if f == "json" && !json.Valid([]byte(out)) {
			t.Error("the JSON is none")
		}
	}
}

func TestCheckTellsAllFaults(t *testing.T) {
	t.Chdir(t.TempDir())
	const text = "window: {start_utc: 2026-09-15T00:00:00Z, length_h: -1}\nelement_files: [a.tle]\nstations: [{name: A, latitude_deg: 91, longitude_deg: 0, altitude_m: 0}]\n"
	if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	code, out, errOut := invoke(t, "check")
	if code != ExitInput || out != "" || strings.Count(errOut, "\n") != 3 {
		t.Errorf("code %d, stdout %q, stderr\n%s want three faults", code, out, errOut)
	}
}

// TestCheckFliesTheOrbit finds an orbit that has decayed before the window.
func TestCheckFliesTheOrbit(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	code, _, errOut := invoke(t, "check", "--window-start", "2046-01-01T00:00:00Z")
	if code != ExitInput || !strings.Contains(errOut, "spacecraft My spacecraft: ") {
		t.Errorf("twenty years on: code %d, stderr %s", code, errOut)
	}
}
