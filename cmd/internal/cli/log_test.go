package cli

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"
)

// TestLogFitFindsWhatWasPutIn fits an invented log, whose differences are known.
func TestLogFitFindsWhatWasPutIn(t *testing.T) {
	t.Chdir(t.TempDir())
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	code, out, errOut := invoke(t, append([]string{"log", "fit", "r.csv", "--format", "json"}, who...)...)
	if code != ExitAnswer {
		t.Fatal(errOut)
	}
	var got struct {
		Fits []struct {
			Parameter string
			Value     float64
			PlusMinus float64 `json:"plus_minus"`
		}
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil {
		t.Fatal(err)
	}
	want := map[string]float64{"offset": rehearsalLevelDB, "transmitter offset": rehearsalOffsetHz, "time offset of the elements": rehearsalLate.Seconds()}
	for _, p := range got.Fits {
		if w, ok := want[p.Parameter]; ok && math.Abs(p.Value-w) > p.PlusMinus {
			t.Errorf("%s: %g ± %g, and %g was put in", p.Parameter, p.Value, p.PlusMinus, w)
		}
		delete(want, p.Parameter)
	}
	if len(want) > 0 || !strings.Contains(out, "oscillator: {measured: [{at_utc: ") {
		t.Errorf("%v is not in\n%s", want, out)
	}
}

// TestLogTableByTheScenario reads a table whose columns the scenario names.
func TestLogTableByTheScenario(t *testing.T) {
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS("../scenario/demo")); err != nil {
		t.Fatal(err)
	}
	t.Chdir(dir)
	text, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text = append(text, `
measurements:
  - name: modem
    separator: ";"
    time_column: When
    columns: [{column: Ratio, holds: cn0_dbhz, add: 1}, {column: Tone, holds: frequency_khz}]
`...)
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	made, err := os.ReadFile("r.csv")
	if err != nil {
		t.Fatal(err)
	}
	other := strings.NewReplacer(",", ";", "utc,cn0_dbhz,frequency_hz", "When;Ratio;Tone").Replace(string(made))
	for name, data := range map[string][]byte{"slantwise.yaml": text, "m.csv": []byte(other)} {
		if err := os.WriteFile(name, data, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	code, _, errOut := invoke(t, append([]string{"log", "fit", "m.csv"}, who...)...)
	if code != ExitInput || !strings.Contains(errOut, "frequency_hz") { // Tone holds Hz, not kHz: out of range or far off
		t.Errorf("a table in another unit: exit code %d, %s", code, errOut)
	}
	if err := os.WriteFile("slantwise.yaml", []byte(strings.Replace(string(text), "frequency_khz", "frequency_hz", 1)), 0o600); err != nil {
		t.Fatal(err)
	}
	code, out, errOut := invoke(t, append([]string{"log", "fit", "m.csv", "--format", "csv"}, who...)...)
	if code != ExitAnswer || !strings.Contains(errOut, "m.csv is read as modem") || !strings.Contains(out, "cn0_dbhz,offset,-0.5") {
		t.Errorf("exit code %d, %s\n%s", code, errOut, out)
	}
	if code, _, errOut = invoke(t, append([]string{"log", "fit", "m.csv", "--table", "moden"}, who...)...); code != ExitInput || !strings.Contains(errOut, "modem") {
		t.Errorf("an unknown table: exit code %d, %s", code, errOut)
	}
}
