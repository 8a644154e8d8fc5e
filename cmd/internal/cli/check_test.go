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

// TestCheckWarnsOfAnOrbitThatEnds takes a made-up set with so much drag that SGP4 leads
// nowhere after minutes: the rest of the window has no passes, and that is said.
func TestCheckWarnsOfAnOrbitThatEnds(t *testing.T) {
	t.Chdir(t.TempDir())
	for name, text := range map[string]string{
		"slantwise.yaml": "window: {start_utc: 2026-09-14T23:00:00Z, length_h: 24}\nelement_files: [a.tle]\nstations: [{name: A, latitude_deg: 40, longitude_deg: 0, altitude_m: 0}]\n",
		"a.tle": `FALLING
1 99004U 26001A   26258.00000000  .05000000  00000-0  50000-2 0  9996
2 99004  51.6000 100.0000 0005000  90.0000   0.0000 16.55000000    19
`,
	} {
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	code, out, errOut := invoke(t, "check", "--format", "csv")
	if code != ExitAnswer || !strings.Contains(out, "\nwarning,spacecraft FALLING,") || !strings.Contains(out, "passes end where its orbit does: element set 99004") {
		t.Errorf("code %d, stdout %s stderr %s", code, out, errOut)
	}
	if code, _, errOut = invoke(t, "check", "--window-start", "2026-09-16T00:00:00Z"); code != ExitInput || !strings.Contains(errOut, "spacecraft FALLING: element set 99004") {
		t.Errorf("after its end: code %d, stderr %s", code, errOut)
	}
}

// TestCheckPreparesLinks: what budget would warn of, check tells before; here a
// pattern that radiates ten times the power it is fed.
func TestCheckPreparesLinks(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	text, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	hot := strings.Replace(string(text), "peak_gain_dbi: 5.0", "peak_gain_dbi: 15.0", 1)
	if err := os.WriteFile("slantwise.yaml", []byte(hot), 0o600); err != nil {
		t.Fatal(err)
	}
	code, out, errOut := invoke(t, "check", "--format", "csv")
	if code != ExitAnswer || !strings.Contains(out, "warning,\"spacecraft My spacecraft, transmitter downlink to station My station, antenna dish\",") || !strings.Contains(out, "radiates") {
		t.Errorf("code %d, %s\n%s", code, errOut, out)
	}
}
