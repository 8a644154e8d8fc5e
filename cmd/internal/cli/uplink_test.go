package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// uplinkScenario is the scenario of bytes with an uplink and a transmit side.
func inUplinkScenario(t *testing.T) {
	t.Helper()
	inBytesScenario(t)
	text := strings.Replace(bytesScenario, "    recorder:\n", `    uplinks:
      - name: command
        frequency_mhz: 2065
        antenna: {pattern: isotropic, peak_gain_dbi: 0}
        modes:
          - {name: slow, modulation: bpsk, coding: none, data_rate_bps: 4000}
          - {name: quick, modulation: bpsk, coding: none, data_rate_bps: 64000}
        sensitivity_dbm: -105
        sensitivity_data_rate_bps: 4000
        sensitivity_mode: slow
        implementation_loss_db: 1
        required_margin_db: 3
    recorder:
`, 1)
	text = strings.Replace(text, "noise: {system_temperature_k: 150}}", "noise: {system_temperature_k: 150}, transmit: {power_w: 5, line_loss_db: 1, bands_mhz: [[2025, 2110]]}}\n      - {name: ear, kind: dish, diameter_m: 2, efficiency: 0.6, bands_mhz: [[430, 440]], noise: {system_temperature_k: 150}}", 1)
	text = strings.Replace(text, "licence:\n", "licence:\n  - {name: command, spacecraft: Probe A, transmitter: command, least_elevation_to_radiate_deg: 12, highest_eirp_dbw: 30}\n", 1)
	if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

type uplinkAnswer struct {
	Direction, Transmitter, Antenna string
	Samples                         []struct {
		Terms []struct {
			Name        string
			Sign, Value float64
		}
		Received float64 `json:"received_power_dbm"`
		Margin   float64 `json:"margin_db"`
	}
	Pass *struct {
		Closes []struct {
			From string `json:"from_utc"`
		}
	}
	Radiation *struct {
		EIRP      float64 `json:"eirp_dbw"`
		Most      float64 `json:"near_field_most_w_m2"`
		Densities []struct {
			Distance float64 `json:"distance_m"`
			Density  float64 `json:"w_m2"`
		} `json:"power_densities"`
		Caution string
	}
	Assumptions []struct{ Kind, Text string }
}

func askUplink(t *testing.T, args ...string) (a uplinkAnswer) {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "json")...)
	if code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// TestUplinkBudget: the printed terms add to the received power, the margin of the mode
// of the sensitivity is what is received over it, and that of the other 12.04 dB less.
func TestUplinkBudget(t *testing.T) {
	inUplinkScenario(t)
	for mode, less := range map[string]float64{"slow": 0, "quick": 10 * math.Log10(16)} {
		a := askUplink(t, "budget", "--station", "Test Hill", "--uplink", "command", "--mode", mode, "--range-km", "1000", "--elevation-deg", "30")
		if a.Direction != "up" || a.Transmitter != "command" || a.Antenna != "dish" {
			t.Errorf("%s: got %s, %s, %s", mode, a.Direction, a.Transmitter, a.Antenna)
		}
		s := a.Samples[0]
		sum := 0.0
		for _, x := range s.Terms {
			sum += x.Sign * x.Value
		}
		if math.Abs(sum-s.Received) > 1e-9 {
			t.Errorf("%s: terms add to %v, received %v", mode, sum, s.Received)
		}
		if want := s.Received + 105 - less; math.Abs(s.Margin-want) > 1e-6 {
			t.Errorf("%s: margin %v, want %v", mode, s.Margin, want)
		}
		// 5 W less 1 dB into 3.7 m: 4P/A, and EIRP over the sphere at 1 km.
		fed := 5 * math.Pow(10, -0.1)
		r := a.Radiation
		if want := 4 * fed / (math.Pi * 3.7 * 3.7 / 4); math.Abs(r.Most-want) > 1e-8 {
			t.Errorf("near field %v, want %v", r.Most, want)
		}
		for _, d := range r.Densities {
			if want := math.Pow(10, r.EIRP/10) / (4 * math.Pi * 1e6); d.Distance == 1000 && math.Abs(d.Density/want-1) > 1e-6 {
				t.Errorf("at 1 km %v, want %v", d.Density, want)
			}
		}
		if !strings.Contains(r.Caution, "licensed person decide") || !strings.Contains(r.Caution, "no figure here is called safe") {
			t.Errorf("caution %q", r.Caution)
		}
	}
	if a := askUplink(t, "budget", "--station", "Test Hill", "--transmitter", "beacon", "--antenna", "ear", "--range-km", "1000", "--elevation-deg", "30"); a.Direction != "down" || a.Radiation != nil {
		t.Errorf("a downlink has direction %s and radiation %v", a.Direction, a.Radiation)
	}
}

// TestUplinkOnPaper is the table of a stated geometry of the demo.
func TestUplinkOnPaper(t *testing.T) {
	code, out, errOut := invoke(t, "budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--uplink", "command", "--mode", "quick", "--range-km", "1200", "--elevation-deg", "20")
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	golden(t, "budget-uplink.table", out)
}

// TestUplinkKeepsToItsLicence: the station may not radiate under 12 deg, and its EIRP is
// over the licence's 30 dBW.
func TestUplinkKeepsToItsLicence(t *testing.T) {
	inUplinkScenario(t)
	a := askUplink(t, "budget", "--station", "Test Hill", "--uplink", "command", "--mode", "slow", "--pass", "2026-03-10T11:20:00Z")
	var told string
	for _, n := range a.Assumptions {
		if n.Kind == "warning" {
			told += n.Text + "\n"
		}
	}
	if !strings.Contains(told, "least elevation to radiate 12 deg takes") || !strings.Contains(told, "EIRP at most 30 dBW is not kept") || strings.Contains(told, `"sky"`) {
		t.Errorf("told:\n%s", told)
	}
	if len(a.Pass.Closes) == 0 {
		t.Error("commanding works at no time")
	}
}

func TestUplinkWrongNames(t *testing.T) {
	inUplinkScenario(t)
	ask := []string{"budget", "--range-km", "1000", "--elevation-deg", "30", "--station"}
	for _, c := range []struct {
		more []string
		want string
	}{
		{[]string{"Test Hill", "--uplink", "commnad"}, `--uplink: "commnad" is not in the scenario`},
		{[]string{"Test Hill", "--uplink", "command", "--transmitter", "beacon"}, "give one of the two"},
		{[]string{"Test Hill"}, `or --uplink with one of "command"`},
		{[]string{"Test Hill", "--uplink", "command", "--mode", "slow", "--antenna", "ear"}, "it has no transmit side"},
		{[]string{"Saltmarsh", "--uplink", "command", "--mode", "slow"}, "no antenna has a transmit side"},
	} {
		code, _, errOut := invoke(t, append(append([]string{}, ask...), c.more...)...)
		if code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, %s; want %s", c.more, code, errOut, c.want)
		}
	}
}

// TestReportHoldsUplinks: the pages over the station that sends show when commanding
// works, as budget does, and the caution; those over the other do not.
func TestReportHoldsUplinks(t *testing.T) {
	inUplinkScenario(t)
	if code, _, errOut := invoke(t, "report"); code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	files, err := filepath.Glob("slantwise-report/passes/probe-a-test-hill-*.json")
	if err != nil || len(files) == 0 {
		t.Fatalf("%d files, %v", len(files), err)
	}
	compared := 0
	for _, file := range files {
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		var page struct {
			Uplinks []struct {
				Mode  string
				Works []struct {
					From string `json:"from_utc"`
				}
				Budgets []struct {
					Margin float64 `json:"margin_db"`
				}
				Radiation struct{ Caution string }
			}
		}
		if err := json.Unmarshal(text, &page); err != nil {
			t.Fatal(err)
		}
		if len(page.Uplinks) != 1 || page.Uplinks[0].Radiation.Caution != radiationCaution {
			t.Fatalf("%s: uplinks %+v", file, page.Uplinks)
		}
		u := page.Uplinks[0]
		if len(u.Works) == 0 {
			continue
		}
		compared++
		budget := askUplink(t, "budget", "--station", "Test Hill", "--uplink", "command", "--mode", u.Mode, "--step", "60s", "--pass", u.Works[0].From)
		if len(budget.Pass.Closes) != len(u.Works) || budget.Pass.Closes[0].From != u.Works[0].From || math.Abs(u.Budgets[0].Margin-budget.Samples[0].Margin) > 1e-3 {
			t.Errorf("%s: %+v, budget %+v", file, u, budget.Pass.Closes)
		}
	}
	if compared < 2 {
		t.Errorf("commanding works in %d passes", compared)
	}
	others, err := filepath.Glob("slantwise-report/passes/probe-a-saltmarsh-*.html")
	if err != nil || len(others) == 0 {
		t.Fatalf("%d files, %v", len(others), err)
	}
	if text, err := os.ReadFile(others[0]); err != nil || strings.Contains(string(text), "Commanding") {
		t.Errorf("a station that cannot send commands: %v", err)
	}
}

// TestLicenceOfAnUplink: the station's EIRP is over the licence's, and passes lose the
// time under 12 deg of elevation to it.
func TestLicenceOfAnUplink(t *testing.T) {
	inUplinkScenario(t)
	code, out, errOut := invoke(t, "licence", "--station", "Test Hill", "--format", "csv")
	if code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	for _, want := range []string{"breach,command,EIRP at most 30 dBW,Probe A,command,Test Hill", "binds,command,least elevation to radiate 12 deg,Probe A,command,Test Hill"} {
		if !strings.Contains(out, want) {
			t.Errorf("no row %s in\n%s", want, out)
		}
	}
}

// TestNothingIsAcknowledgedWithoutUplink: with a deaf receiver the station's uplink: true
// is of no use, and recorder says so.
func TestNothingIsAcknowledgedWithoutUplink(t *testing.T) {
	inUplinkScenario(t)
	text, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	const said = "no uplink of the scenario closes in it"
	// One of the six passes stays under the 12 deg that the licence asks for.
	for dbm, want := range map[string]int{"-130": 1, "-20": 6} {
		if err := os.WriteFile("slantwise.yaml", []byte(strings.Replace(string(text), "sensitivity_dbm: -105", "sensitivity_dbm: "+dbm, 1)), 0o644); err != nil {
			t.Fatal(err)
		}
		code, out, errOut := invoke(t, "recorder", "--station", "Test Hill", "--transmitter", "X-band")
		if code != ExitAnswer || strings.Count(out+errOut, said) != want {
			t.Errorf("%s dBm: code %d, %d passes, want %d", dbm, code, strings.Count(out+errOut, said), want)
		}
	}
}
