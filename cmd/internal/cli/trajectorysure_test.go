package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const newcomerCovariance = `
COVARIANCE_START
EPOCH = 2026-09-15T00:20:00.000
COV_REF_FRAME = RTN
0
0 4.0
0 0 0
0 0 0 0
0 0 0 0 0
0 0 0 0 0 0
COVARIANCE_STOP
`

// An ephemeris with a covariance tells how uncertain it is without a word in the scenario, and a launch
// that slips takes it along: the track over the ground is the same, later, and so is the
// plus-minus.
func TestCovarianceOfAnEphemeris(t *testing.T) {
	states, err := os.ReadFile("../scenario/testdata/newcomer.oem")
	if err != nil {
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
	write("sure.oem", strings.TrimRight(string(states), "\n")+"\n"+newcomerCovariance)
	write("plain.oem", string(states))
	ask := func(file, more, at string) (along, rangeKm float64, known bool, told string) {
		t.Helper()
		s := write("s.json", `{"window": {"start_utc": "2026-09-15T00:00:00Z", "length_h": 2}, "element_files": ["`+file+`"],
			"spacecraft": [{"name": "Newcomer", "element_set": "2026-099A"`+more+`}],
			"stations": [{"name": "Reedmere", "latitude_deg": 47.2, "longitude_deg": 8.6}]}`)
		code, out, errOut := invoke(t, "pointing", "--scenario", s, "--from", at, "--to", at, "--format", "json")
		var p struct {
			Rows []struct {
				RangeKm float64  `json:"range_km"`
				Total   *float64 `json:"pointing_plus_minus_deg"`
			} `json:"rows"`
		}
		if err := json.Unmarshal([]byte(out), &p); err != nil || code != ExitAnswer {
			t.Fatalf("exit %d, %v, %s", code, err, errOut)
		}
		if p.Rows[0].Total == nil {
			return math.NaN(), p.Rows[0].RangeKm, false, errOut
		}
		return *p.Rows[0].Total, p.Rows[0].RangeKm, true, errOut
	}
	total, rangeKm, known, told := ask("sure.oem", "", "2026-09-15T00:20:00Z")
	// 2 km along, at most all of it at a right angle to the sight.
	if most := math.Atan(2/rangeKm) * 180 / math.Pi; !known || !(total > 0.05*most && total <= most*1.0001) {
		t.Errorf("±%g deg at %g km, %v, at most %g deg", total, rangeKm, known, most)
	}
	if !strings.Contains(told, "from the covariance of 2026-09-15T00:20:00.000Z (ephemeris)") {
		t.Errorf("told: %s", told)
	}
	late, lateKm, known, told := ask("sure.oem", `, "launch_slip_s": 660`, "2026-09-15T00:31:00Z")
	if !known || math.Abs(late-total) > 1e-4 || math.Abs(lateKm-rangeKm) > 0.1 || !strings.Contains(told, "2026-09-15T00:31:00.000Z (ephemeris)") {
		t.Errorf("eleven minutes late: ±%g deg at %g km, before ±%g deg at %g km; told: %s", late, lateKm, total, rangeKm, told)
	}
	if _, _, known, _ := ask("plain.oem", "", "2026-09-15T00:20:00Z"); known {
		t.Error("an ephemeris without a covariance tells a plus-minus")
	}
	_, _, known, told = ask("plain.oem", `, "position_uncertainty": {"along_km": 1, "along_km_per_day": 1}`, "2026-09-15T00:20:00Z")
	if !known || !strings.Contains(told, "by the age of the ephemeris, counted from its beginning, of 2026-09-15T00:00:00.000Z") {
		t.Errorf("by a rule: %v, told: %s", known, told)
	}
}
