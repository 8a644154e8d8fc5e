package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var rehearsed = []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}

// inLogbook makes a folder with an invented log, r.csv, and adds it to the logbook with the
// further flags.
func inLogbook(t *testing.T, flags ...string) {
	t.Helper()
	t.Chdir(t.TempDir())
	for _, call := range [][]string{{"log", "rehearse", "--into", "r.csv"}, append([]string{"log", "add", "r.csv"}, flags...)} {
		if code, _, errOut := invoke(t, append(call, rehearsed...)...); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
}

// measuredPages returns the files of measurements in a report.
func measuredPages(t *testing.T, folder string) []string {
	t.Helper()
	found, err := filepath.Glob(filepath.Join(folder, "passes", "*-measured.csv"))
	if err != nil {
		t.Fatal(err)
	}
	return found
}

// TestReportShowsTheLog: the pass that was logged shows it, and no other; the invented
// difference comes back.
func TestReportShowsTheLog(t *testing.T) {
	inLogbook(t, "--taken-bytes", "1e7", "--remark", "light wind")
	if code, _, errOut := invoke(t, "report", "--station", "Skerry Point", "--into", "a"); code != ExitAnswer || !strings.Contains(errOut, "measurements of slantwise.logbook") {
		t.Fatalf("code %d, %s", code, errOut)
	}
	found := measuredPages(t, "a")
	if len(found) != 1 {
		t.Fatalf("files %v", found)
	}
	text, err := os.ReadFile(strings.TrimSuffix(found[0], "-measured.csv") + ".json")
	if err != nil {
		t.Fatal(err)
	}
	var pass struct {
		Measured []struct {
			Remark, Link string
			Predicted    float64 `json:"predicted_bytes"`
			Taken        float64 `json:"taken_bytes"`
			Quantities   []struct {
				Quantity string
				Figures  []struct {
					By               string
					Value, PlusMinus float64
				}
			}
		}
		Radio struct {
			Modes []struct {
				Name  string
				Bytes float64
			}
		}
	}
	if err := json.Unmarshal(text, &pass); err != nil {
		t.Fatal(err)
	}
	m := pass.Measured[0]
	if m.Remark != "light wind" || m.Taken != 1e7 || m.Link != "X-band to dish, mode safe" {
		t.Errorf("%+v", m)
	}
	for _, mode := range pass.Radio.Modes {
		if mode.Name == "safe" && math.Abs(mode.Bytes/m.Predicted-1) > 1e-3 {
			t.Errorf("log add predicted %g bytes, the report %g", m.Predicted, mode.Bytes)
		}
	}
	if b := m.Quantities[0].Figures[0]; m.Quantities[0].Quantity != "cn0_dbhz" || b.By != "alone" || math.Abs(b.Value-rehearsalLevelDB) > 0.1 {
		t.Errorf("bias %+v, put in %g dB", b, rehearsalLevelDB)
	}
	if code, _, errOut := invoke(t, "report", "--station", "Skerry Point", "--into", "b", "--log", ""); code != ExitAnswer || len(measuredPages(t, "b")) > 0 {
		t.Errorf("without a logbook: code %d, %v, %s", code, measuredPages(t, "b"), errOut)
	}
	if code, _, errOut := invoke(t, "report", "--into", "c", "--log", "other.logbook"); code != ExitInput || !strings.Contains(errOut, "other.logbook") {
		t.Errorf("a logbook that is not there: code %d, %s", code, errOut)
	}
}
