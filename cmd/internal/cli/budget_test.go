package cli

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// demoLink is a link of the embedded demo.
var demoLink = []string{"budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}

func budget(more ...string) []string { return append(append([]string{}, demoLink...), more...) }

// TestBudgetOnPaper is the table of a stated geometry.
func TestBudgetOnPaper(t *testing.T) {
	code, out, errOut := invoke(t, budget("--range-km", "1200", "--elevation-deg", "20")...)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	golden(t, "budget-stated.table", out)
}

type budgetAnswer struct {
	Mode    *string
	Samples []struct {
		UTC          *string `json:"utc"`
		ElevationDeg float64 `json:"elevation_deg"`
		RangeKm      float64 `json:"range_km"`
		OffBoresight *float64
		Terms        []struct {
			Name, Unit  string
			Sign, Value float64
		}
		ReceivedPower *float64 `json:"received_power_dbm"`
		Noise         []struct {
			Kelvin float64 `json:"temperature_k"`
		}
		SystemNoise *float64 `json:"system_noise_k"`
		CN0         float64  `json:"c_n0_dbhz"`
		EbN0        *float64 `json:"eb_n0_db"`
		Margin      *float64 `json:"margin_db"`
		Rate        *float64 `json:"data_rate_bps"`
		Cautions    []string
	}
	Pass *struct {
		AOS       string  `json:"aos_utc"`
		LOS       string  `json:"los_utc"`
		ModeBytes float64 `json:"mode_bytes"`
	}
	Assumptions []struct{ Kind, Text string }
}

func askBudget(t *testing.T, args ...string) budgetAnswer {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "json")...)
	if code != ExitAnswer {
		t.Fatalf("%q: code %d, stderr %s", args, code, errOut)
	}
	var a budgetAnswer
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// TestBudgetTermsAddAsPrinted sums the printed terms: nine decimals, so that what is
// left is the rounding of the sum in float64.
func TestBudgetTermsAddAsPrinted(t *testing.T) {
	a := askBudget(t, budget("--step", "30s")...)
	if len(a.Samples) < 10 || a.Pass == nil || len(a.Assumptions) == 0 {
		t.Fatalf("%d samples, pass %v, %d assumptions", len(a.Samples), a.Pass, len(a.Assumptions))
	}
	for _, s := range a.Samples {
		sum := 0.0
		for _, x := range s.Terms {
			sum += x.Sign * x.Value
		}
		if math.Abs(sum-*s.ReceivedPower) > 1e-12*math.Abs(sum) {
			t.Errorf("%s: terms add to %.12f, received power %.12f dBm", *s.UTC, sum, *s.ReceivedPower)
		}
		if math.Abs(*s.EbN0-(s.CN0-10*math.Log10(*s.Rate))) > 2e-9 {
			t.Errorf("%s: Eb/N0 %v is not C/N0 %v less the rate", *s.UTC, *s.EbN0, s.CN0)
		}
	}
	if first, last := a.Samples[0], a.Samples[len(a.Samples)-1]; *first.UTC != a.Pass.AOS || *last.UTC != a.Pass.LOS {
		t.Errorf("samples from %s to %s, pass from %s to %s", *first.UTC, *last.UTC, a.Pass.AOS, a.Pass.LOS)
	}
}

// TestBudgetAtIsTheSampleOfThePass asks for an instant of a pass by either way.
func TestBudgetAtIsTheSampleOfThePass(t *testing.T) {
	along := askBudget(t, budget("--step", "60s")...)
	s := along.Samples[3]
	at := askBudget(t, budget("--at", *s.UTC)...).Samples[0]
	// The two ephemerides have other knots, and SGP4 is reached through a clock of its
	// own rounding: a metre is 1e-5 dB at this range.
	if math.Abs(at.RangeKm-s.RangeKm) > 1e-3 || math.Abs(*at.ReceivedPower-*s.ReceivedPower) > 1e-4 {
		t.Errorf("at the instant %.6f km and %.6f dBm, along the pass %.6f and %.6f", at.RangeKm, *at.ReceivedPower, s.RangeKm, *s.ReceivedPower)
	}
}

// TestBudgetStepDoesNotChangeTheVolume: the volume has a step of its own.
func TestBudgetStepDoesNotChangeTheVolume(t *testing.T) {
	a, b := askBudget(t, budget("--step", "7s")...), askBudget(t, budget("--step", "5m")...)
	if a.Pass.ModeBytes != b.Pass.ModeBytes || !(a.Pass.ModeBytes > 0) {
		t.Errorf("%g and %g bytes", a.Pass.ModeBytes, b.Pass.ModeBytes)
	}
}

// TestBudgetOfAPass takes the pass under way, and the next.
func TestBudgetOfAPass(t *testing.T) {
	first := askBudget(t, budget()...)
	during := askBudget(t, budget("--pass", *first.Samples[2].UTC)...)
	next := askBudget(t, budget("--pass", "2026-09-15T01:00:00Z")...)
	if during.Pass.AOS != first.Pass.AOS || !(next.Pass.AOS > first.Pass.LOS) {
		t.Errorf("passes begin at %s, %s, %s", first.Pass.AOS, during.Pass.AOS, next.Pass.AOS)
	}
	code, out, errOut := invoke(t, budget("--pass", "2026-09-20T00:00:00Z", "--format", "json")...)
	if code != ExitAnswer || !strings.Contains(out, `"samples": []`) || !strings.Contains(errOut, "no such pass") {
		t.Errorf("no pass: code %d, stderr %s, stdout %s", code, errOut, out)
	}
}

// TestBudgetCSV has a column a term and adds up as printed.
func TestBudgetCSV(t *testing.T) {
	code, out, errOut := invoke(t, budget("--step", "60s", "--format", "csv")...)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil || len(rows) < 5 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	const want = "utc,azimuth_deg,elevation_deg,range_km,off_boresight_deg,transmit_power_dbm,line_loss_db,transmit_antenna_gain_dbi,spacecraft_pointing_db," +
		"free_space_loss_db,polarisation_mismatch_db,gas_attenuation_db,cloud_attenuation_db,rain_attenuation_db,scintillation_db,atmospheric_combination_db,station_antenna_gain_dbi,surface_loss_db,blockage_loss_db,pointing_loss_db,feed_loss_db," +
		"received_power_dbm,power_flux_density_dbw_m2,system_noise_k,g_over_t_db_k,c_n0_dbhz,eb_n0_db,margin_db,margin_over_required_db,data_rate_bps,achievable_rate_bps,achievable_rate_limit,usable," +
		"c_i_other_polarization_db,sun_off_beam_deg,moon_off_beam_deg,path_missing"
	if got := strings.Join(rows[0], ","); got != want {
		t.Errorf("columns\n%s\nwant\n%s", got, want)
	}
	signs := []float64{1, -1, 1, -1, -1, -1, -1, -1, -1, -1, 1, 1, -1, -1, -1, -1}
	for _, r := range rows[1:] {
		sum := 0.0
		for i, sign := range signs {
			v, err := strconv.ParseFloat(r[5+i], 64)
			if err != nil {
				t.Fatal(err)
			}
			sum += sign * v
		}
		if received, err := strconv.ParseFloat(r[21], 64); err != nil || math.Abs(received-sum) > 1e-10 {
			t.Errorf("%s: terms add to %.10f, received power %s", r[0], sum, r[21])
		}
	}
}

func TestTermColumnsAreUnique(t *testing.T) {
	t.Chdir(t.TempDir())
	writeScenario(t, "extra_losses: [{name: cover, loss_db: 1}, {name: Cover, loss_db: 2}]", "g_over_t_db_k: 20")
	code, out, errOut := invoke(t, "budget", "--range-km", "1000", "--elevation-deg", "30", "--format", "csv")
	if code != ExitAnswer || !strings.Contains(out, ",cover_db,cover_db_2,") {
		t.Errorf("code %d, stderr %s, stdout %s", code, errOut, out)
	}
}

// writeScenario writes a scenario without orbit: a stated EIRP and an antenna.
func writeScenario(t *testing.T, transmitter, antenna string) {
	t.Helper()
	text := `path: {models: []} # free space
spacecraft:
  - name: Probe A
    transmitters:
      - name: S-band
        frequency_mhz: 2245
        eirp_dbw: 3
        ` + transmitter + `
stations:
  - name: Test Hill
    latitude_deg: 55
    longitude_deg: -4
    altitude_m: 100
    antennas:
      - name: dish
        kind: directive
        ` + antenna + "\n"
	if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

// TestBudgetWithoutOrbitAntennaOrMode: a stated EIRP over a stated range into a G/T
// of which the gain is not known. C/N0 by hand: 3 - 159.472 + 20 + 228.599 dBHz, the
// loss from the table of free-space losses (2245 MHz, 1000 km: 159.4721 dB).
func TestBudgetWithoutOrbitAntennaOrMode(t *testing.T) {
	t.Chdir(t.TempDir())
	writeScenario(t, "polarization: rhcp", "g_over_t_db_k: 20")
	a := askBudget(t, "budget", "--range-km", "1000", "--elevation-deg", "30")
	s := a.Samples[0]
	if s.UTC != nil || s.ReceivedPower != nil || s.SystemNoise != nil || s.EbN0 != nil || s.Margin != nil || s.Rate != nil || a.Mode != nil {
		t.Errorf("numbers that do not exist: %+v", s)
	}
	if math.Abs(s.CN0-(3-159.4721+20+228.5992)) > 1e-4 {
		t.Errorf("C/N0 %.6f dBHz", s.CN0)
	}
	warned := false
	for _, n := range a.Assumptions {
		warned = warned || n.Kind == "warning" && strings.Contains(n.Text, "up to 3 dB may hide")
	}
	if !warned {
		t.Errorf("no warning about the polarisation: %v", a.Assumptions)
	}
}

func TestBudgetRefuses(t *testing.T) {
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"budget"}, `--spacecraft: left out, and the scenario holds 4; name one of "Wagtail 1"`},
		{[]string{"budget", "--spacecraft", "Wagtale 1"}, `did you mean "Wagtail 1"`},
		{[]string{"budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point"}, `--mode: left out, and the scenario holds 3; name one of "safe", "middle", "fast"`},
		{[]string{"budget", "--spacecraft", "Wagtail 1", "--station", "Acacia Ridge", "--mode", "safe"}, `antenna "dish": 8180 MHz lies outside its bands 2200 to 2290 MHz`},
		{budget("--range-km", "1200"), "needs --range-km and --elevation-deg, both"},
		{budget("--range-km", "-1", "--elevation-deg", "20"), "range: -1 km is not allowed"},
		{budget("--range-km", "NaN", "--elevation-deg", "20"), `--range-km: "NaN" is not allowed; it must be a number; only finite numbers are`},
		{budget("--range-km", "1e-300", "--elevation-deg", "20"), "range: 1e-300 km is not allowed; it must be 0.001 to 1e9 km"},
		{budget("--range-km", "1200", "--elevation-deg", "91"), "elevation: 91 deg is not allowed"},
		{budget("--range-km", "1200", "--elevation-deg", "20", "--off-boresight-deg", "-3"), "off-boresight angle: -3 deg"},
		{budget("--range-km", "1200", "--elevation-deg", "20", "--at", "2026-09-15T01:00:00Z"), "give one of the two"},
		{budget("--at", "2026-09-15T01:00:00Z", "--pass", "2026-09-15T01:00:00Z"), "give one of the two"},
		{budget("--at", "2026-09-15T01:00:00Z", "--step", "5s"), "--step goes along a pass"},
		{budget("--range-km", "1200", "--elevation-deg", "20", "--step", "5s"), "--step goes along a pass"},
		{budget("--range-km", "1200 km", "--elevation-deg", "20"), `--range-km: "1200 km" is not allowed; it must be a number; give the number alone, the name says the unit`},
		{budget("--range-km", "1200", "--elevation-deg", "0x14"), `--elevation-deg: "0x14" is not allowed; it must be a number; give the number alone`},
		{budget("--step", "1ms"), "take a longer step"},
		{budget("--step", "0s"), "greater than 0"},
	} {
		code, out, errOut := invoke(t, c.args...)
		if code != ExitInput || out != "" || !strings.Contains(errOut, c.want) {
			t.Errorf("%q: code %d, stderr %s want %q in it", c.args, code, errOut, c.want)
		}
	}
}

// TestBudgetNamesTheLicence: an instant that the demo's licence does not allow is told
// of, one that it allows is not.
func TestBudgetNamesTheLicence(t *testing.T) {
	for at, binds := range map[string]bool{"2026-09-15T00:40:34Z": true, "2026-09-15T00:55:34Z": false} {
		code, out, errOut := invoke(t, "budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "fast", "--at", at)
		if code != ExitAnswer {
			t.Fatal(errOut)
		}
		told := strings.Contains(out, `licence "X-band downlink" does not allow this instant: least elevation to receive 3 deg`)
		if told != binds {
			t.Errorf("%s: told %v, want %v:\n%s", at, told, binds, out)
		}
	}
}
