package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The covariances that elements fit tells a scenario takes as they stand, and
// passes then has the spread of the fit: 3 standard deviations along at the orbit's speed.
func TestFittedCovarianceInAScenario(t *testing.T) {
	code, out, errOut := fitRun(t, samplePositions, "-", "--name", "WAGTAIL 9", "--catalog-number", "99009", "--format", "json")
	if code != ExitAnswer {
		t.Fatalf("exit %d, %s", code, errOut)
	}
	var fitted struct {
		TwoLine struct {
			Lines []string `json:"lines"`
		} `json:"two_line"`
		Spread []struct {
			UTC   string  `json:"utc"`
			Along float64 `json:"along_m"`
		} `json:"spread"`
		Position json.RawMessage `json:"position_covariances"`
	}
	if err := json.Unmarshal([]byte(out), &fitted); err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	write := func(name, text string) string {
		t.Helper()
		file := filepath.Join(dir, name)
		if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return file
	}
	write("fitted.tle", strings.Join(fitted.TwoLine.Lines, "\n")+"\n")
	file := write("sure.json", `{"window": {"start_utc": "2026-09-14T12:00:00Z", "length_h": 48}, "element_files": ["fitted.tle"],
		"spacecraft": [{"name": "Wagtail 9", "element_set": "99009", "position_uncertainty": {"covariances": `+string(fitted.Position)+`}}],
		"stations": [{"name": "Reedmere", "latitude_deg": 47.2, "longitude_deg": 8.6, "minimum_elevation_deg": 10}]}`)
	code, out, errOut = invoke(t, "pointing", "--scenario", file, "--from", fitted.Spread[1].UTC, "--to", fitted.Spread[1].UTC, "--format", "json")
	var p struct {
		Rows []struct {
			RangeKm float64 `json:"range_km"`
			Total   float64 `json:"pointing_plus_minus_deg"`
		} `json:"rows"`
	}
	if err := json.Unmarshal([]byte(out), &p); err != nil || code != ExitAnswer {
		t.Fatalf("exit %d, %v, %s", code, err, errOut)
	}
	// The along error seen from the station: at most all of it at a right angle to the sight, and a
	// good part of it wherever the spacecraft is.
	row := p.Rows[0]
	most := math.Hypot(fitted.Spread[1].Along, 500) / 1000 / row.RangeKm * 180 / math.Pi
	if !(row.Total > 0.02*most && row.Total < most) {
		t.Errorf("±%g deg at %g km, for %g m along", row.Total, row.RangeKm, fitted.Spread[1].Along)
	}
	code, out, errOut = invoke(t, "passes", "--scenario", file, "--format", "json")
	if code != ExitAnswer || !strings.Contains(out, `"aos_plus_minus_s": 0.`) || !strings.Contains(errOut, "from 6 covariances of ") {
		t.Errorf("exit %d, %s\n%.600s", code, errOut, out)
	}
}
