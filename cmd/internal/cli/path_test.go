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

// climateScenario writes a scenario of one Ka-band link with the climate given.
func climateScenario(t *testing.T, climate, path string) {
	t.Helper()
	t.Chdir(t.TempDir())
	text := path + `spacecraft:
  - name: Probe A
    transmitters:
      - name: Ka-band
        frequency_mhz: 26000
        eirp_dbw: 24
        polarization: rhcp
stations:
  - name: Test Hill
    latitude_deg: 48
    longitude_deg: 4
    altitude_m: 300
    climate: ` + climate + `
    antennas:
      - name: dish
        kind: dish
        diameter_m: 3
        efficiency: 0.6
        polarization: rhcp
        noise:
          spill_over_fraction: 0.08
          receiver_chain: [{name: amplifier, gain_db: 45, noise_temperature_k: 90}]
`
	if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

const wholeClimate = "{rain_rate_001_mm_h: 35, rain_height_km: 2.9, cloud_liquid_water_kg_m2: [[0.1, 1.5], [5, 0.5], [50, 0.02]], integrated_water_vapour_kg_m2: [[1, 30], [50, 15]]}"

// What the scenario does not state is told at the head of every output, and is in no
// number.
func TestMissingRainStandsAtTheHead(t *testing.T) {
	climateScenario(t, "{}", "")
	stated := []string{"budget", "--range-km", "1500", "--elevation-deg", "20"}
	for _, c := range []struct {
		args    []string
		head    int  // within how many lines
		errToo  bool // told on stderr
		inStdio string
	}{
		{stated, 4, false, "missing from the path: rain (rain_rate_001_mm_h or the months under climate is not stated), cloud ("},
		{append(stated, "--format", "json"), 20, true, `"missing": [`},
		{append(stated, "--format", "csv"), 2, true, ",rain cloud"},
		{[]string{"path", "--frequency-mhz", "26000", "--elevation-deg", "20"}, 2, false, "missing from the path: rain ("},
		{[]string{"path", "--frequency-mhz", "26000", "--elevation-deg", "20", "--format", "json"}, 6, false, `"missing": [`},
		{[]string{"path", "--frequency-mhz", "26000", "--sweep", "elevation", "--points", "3"}, 2, false, "missing from the path: rain ("},
		{[]string{"path", "--frequency-mhz", "26000", "--sweep", "elevation", "--points", "3", "--format", "csv"}, 0, true, ""},
	} {
		code, out, errOut := invoke(t, c.args...)
		if code != ExitAnswer {
			t.Errorf("%q: code %d, stderr %s", c.args, code, errOut)
			continue
		}
		head := strings.Join(strings.SplitN(out, "\n", c.head+1)[:c.head], "\n")
		if !strings.Contains(head, c.inStdio) {
			t.Errorf("%q: the head is\n%s\nwithout %q", c.args, head, c.inStdio)
		}
		if c.errToo != strings.Contains(errOut, "missing from the path: rain (") {
			t.Errorf("%q: stderr %s", c.args, errOut)
		}
		if strings.Contains(out, "rain attenuation") {
			t.Errorf("%q: rain stands in the answer", c.args)
		}
	}
}

// A clear sky has gas alone, from the scenario or from the flag, and the head says so.
func TestClearSky(t *testing.T) {
	for _, c := range []struct {
		path string
		flag []string
	}{{"path: {clear_sky: true}\n", nil}, {"", []string{"--clear-sky"}}} {
		climateScenario(t, wholeClimate, c.path)
		code, out, errOut := invoke(t, append([]string{"budget", "--range-km", "1500", "--elevation-deg", "20"}, c.flag...)...)
		if code != ExitAnswer || !strings.Contains(out, "\npath: clear sky\n") || !strings.Contains(out, "gas attenuation") {
			t.Errorf("%v: code %d, stderr %s, stdout %s", c, code, errOut, out)
		}
		for _, not := range []string{"rain attenuation", "rain emission", "cloud attenuation", "scintillation  ", "exceeded for"} {
			if strings.Contains(strings.SplitN(out, "assumption:", 2)[0], not) {
				t.Errorf("%v: %q stands in the budget of a clear sky:\n%s", c, not, out)
			}
		}
	}
}

type pathTestAnswer struct {
	Missing []string
	Points  []map[string]*float64
}

func askPath(t *testing.T, args ...string) pathTestAnswer {
	t.Helper()
	code, out, errOut := invoke(t, append(append([]string{"path"}, args...), "--format", "json")...)
	if code != ExitAnswer {
		t.Fatalf("%q: code %d, stderr %s", args, code, errOut)
	}
	var a pathTestAnswer
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// The terms of the path are those of the budget at the same place, and the terms of a
// point add to its total.
func TestPathAgreesWithTheBudget(t *testing.T) {
	climateScenario(t, wholeClimate, "")
	q := askPath(t, "--spacecraft", "Probe A", "--elevation-deg", "20").Points[0]
	b := askBudget(t, "budget", "--range-km", "1500", "--elevation-deg", "20").Samples[0]
	found := 0
	for _, term := range b.Terms {
		column := strings.ReplaceAll(term.Name, " ", "_") + "_db"
		v, is := q[column]
		if !is {
			continue
		}
		found++
		if v == nil || math.Abs(*v-term.Value) > 1e-9 {
			t.Errorf("%s: %v, the budget has %g", term.Name, v, term.Value)
		}
	}
	if found != 5 {
		t.Errorf("%d terms of the path in the budget, want 5", found)
	}
	sum := *q["gas_attenuation_db"] + *q["cloud_attenuation_db"] + *q["rain_attenuation_db"] + *q["scintillation_db"] - *q["atmospheric_combination_db"]
	if math.Abs(sum-*q["total_attenuation_db"]) > 1e-8 {
		t.Errorf("terms add to %g dB, total %g dB", sum, *q["total_attenuation_db"])
	}
	if *q["sky_brightness_k"] < *q["clear_sky_brightness_k"] || *q["clear_sky_brightness_k"] < 2.7 {
		t.Errorf("sky of %g K, clear %g K", *q["sky_brightness_k"], *q["clear_sky_brightness_k"])
	}
}

// Sweeps run from end to end; over the elevation gas, cloud and the clear sky fall.
func TestPathSweeps(t *testing.T) {
	climateScenario(t, wholeClimate, "")
	for _, c := range []struct {
		args        []string
		column      string
		first, last float64
		points      int
	}{
		{[]string{"--frequency-mhz", "26000", "--sweep", "elevation"}, "elevation_deg", 5, 90, 86},
		{[]string{"--frequency-mhz", "26000", "--sweep", "percentage", "--elevation-deg", "30", "--points", "5", "--from", "0.1", "--to", "10"}, "exceeded_percent", 0.1, 10, 5},
		{[]string{"--sweep", "frequency", "--elevation-deg", "30", "--points", "3", "--from", "8000", "--to", "32000"}, "frequency_mhz", 8000, 32000, 3},
	} {
		a := askPath(t, c.args...)
		n := len(a.Points)
		if n != c.points || math.Abs(*a.Points[0][c.column]-c.first) > 1e-9 || math.Abs(*a.Points[n-1][c.column]-c.last) > 1e-9 {
			t.Errorf("%q: %d points from %g to %g", c.args, n, *a.Points[0][c.column], *a.Points[n-1][c.column])
		}
	}
	all := askPath(t, "--frequency-mhz", "26000", "--sweep", "elevation").Points
	for i := 1; i < len(all); i++ {
		for _, name := range []string{"gas_attenuation_db", "cloud_attenuation_db", "clear_sky_brightness_k"} {
			if !(*all[i][name] < *all[i-1][name]) {
				t.Errorf("%s rises from %g to %g at %g deg", name, *all[i-1][name], *all[i][name], *all[i]["elevation_deg"])
			}
		}
	}
	code, _, errOut := invoke(t, "path", "--frequency-mhz", "26000", "--sweep", "elevation", "--into", "page.html")
	page, err := os.ReadFile("page.html")
	if code != ExitAnswer || err != nil || !strings.Contains(string(page), `id="attenuation"`) {
		t.Errorf("page: code %d, %v, stderr %s", code, err, errOut)
	}
	code, _, errOut = invoke(t, "path", "--frequency-mhz", "26000", "--sweep", "elevation", "--into", "page.html", "--static")
	if page, err = os.ReadFile("page.html"); code != ExitAnswer || err != nil || strings.Contains(string(page), "<script") || !strings.Contains(string(page), `<svg xmlns=`) {
		t.Errorf("page without script: code %d, %v, stderr %s", code, err, errOut)
	}
}

func TestPathRefuses(t *testing.T) {
	climateScenario(t, wholeClimate, "")
	for _, c := range []struct {
		args []string
		want string
	}{
		{nil, "give --elevation-deg for the path at one elevation"},
		{[]string{"--elevation-deg", "20"}, "give --frequency-mhz, or --spacecraft"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "0"}, "0 MHz is not allowed"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--spacecraft", "Probe A"}, "give one of the two"},
		{[]string{"--elevation-deg", "91", "--frequency-mhz", "26000"}, "elevation: 91 deg is not allowed"},
		{[]string{"--elevation-deg", "-5", "--frequency-mhz", "26000"}, "-5.0000 deg is under the horizon"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--exceeded-percent", "60"}, `"60" is not allowed; it must be 0.001 to 50 %`},
		{[]string{"--sweep", "azimuth", "--frequency-mhz", "26000"}, `"azimuth" is not allowed; it must be elevation, frequency or percentage`},
		{[]string{"--sweep", "elevation", "--frequency-mhz", "26000", "--from", "50", "--to", "10"}, "a sweep rises"},
		{[]string{"--sweep", "elevation", "--frequency-mhz", "26000", "--points", "1.5"}, "whole number"},
		{[]string{"--sweep", "percentage", "--frequency-mhz", "26000"}, "needs --elevation-deg"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--to", "3"}, "go with --sweep"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--days", "3"}, "go with --year"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--keep-going"}, "go with --model and --batch"},
		{[]string{"--elevation-deg", "20", "--frequency-mhz", "26000", "--efficiency", "0.5"}, "goes with --diameter-m"},
	} {
		code, out, errOut := invoke(t, append([]string{"path"}, c.args...)...)
		if code != ExitInput || out != "" || !strings.Contains(errOut, c.want) {
			t.Errorf("%q: code %d, stdout %q, stderr %s want %q in it", c.args, code, out, errOut, c.want)
		}
	}
}

// Under the horizon the air has no term: the budget is that of free space, and says so.
func TestBudgetUnderTheHorizon(t *testing.T) {
	a := askBudget(t, budget("--range-km", "3000", "--elevation-deg", "-3")...)
	s := a.Samples[0]
	for _, term := range s.Terms {
		if term.Name == "gas attenuation" {
			t.Error("gas attenuation under the horizon")
		}
	}
	if !strings.Contains(strings.Join(s.Cautions, " "), "the terms of the air are left out") {
		t.Errorf("cautions %q", s.Cautions)
	}
}

// TestPathYear: thirty days of the demo's Ka-band link. Attenuation falls with the
// fraction of time, weather only takes, the worst month is worse, and the same input
// gives the same bytes.
func TestPathYear(t *testing.T) {
	args := []string{"path", "--year", "--days", "30", "--spacecraft", "Fulmar 1", "--station", "Tussock Bay", "--mode", "steady", "--format", "json"}
	code, out, errOut := invoke(t, args...)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	var a struct {
		Passes      int     `json:"passes_flown"`
		ContactH    float64 `json:"contact_h_per_year"`
		Attenuation []struct {
			Percent  float64  `json:"contact_percent"`
			Exceeded *float64 `json:"total_attenuation_exceeded_db"`
		}
		Margin []struct {
			Margin    float64 `json:"margin_over_required_db"`
			Low       float64 `json:"below_contact_percent_low"`
			High      float64 `json:"below_contact_percent_high"`
			MonthLow  float64 `json:"below_worst_month_percent_low"`
			MonthHigh float64 `json:"below_worst_month_percent_high"`
			Clear     float64 `json:"below_clear_sky_percent"`
		}
		Bytes struct {
			Mode, Achievable float64
			ClearMode        float64 `json:"clear_sky_mode"`
			ClearAchievable  float64 `json:"clear_sky_achievable"`
		} `json:"bytes_per_year"`
		Assumptions []struct{ Kind, Text string }
	}
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	if a.Passes < 100 || a.ContactH < 100 || a.ContactH > 2000 {
		t.Errorf("%d passes, %g h", a.Passes, a.ContactH)
	}
	for i := 1; i < len(a.Attenuation); i++ {
		if p, q := a.Attenuation[i-1], a.Attenuation[i]; p.Exceeded != nil && q.Exceeded != nil && !(*q.Exceeded > *p.Exceeded) {
			t.Errorf("%g dB for %g %%, %g dB for %g %%", *p.Exceeded, p.Percent, *q.Exceeded, q.Percent)
		}
	}
	for i, m := range a.Margin {
		if !(m.Low <= m.High && m.MonthLow >= m.Low && m.MonthHigh >= m.High && m.Clear <= m.Low) {
			t.Errorf("margin %g dB: %+v", m.Margin, m)
		}
		if i > 0 && m.Low < a.Margin[i-1].Low {
			t.Errorf("the time below %g dB is less than below %g dB", m.Margin, a.Margin[i-1].Margin)
		}
	}
	if b := a.Bytes; !(b.Mode > 0 && b.Mode <= b.ClearMode && b.Achievable > 0 && b.Achievable <= b.ClearAchievable) {
		t.Errorf("bytes %+v", b)
	}
	told := ""
	for _, n := range a.Assumptions {
		told += n.Text + "\n"
	}
	for _, want := range []string{"no correlation in time", "as one set does not carry SGP4 through a year"} {
		if !strings.Contains(told, want) {
			t.Errorf("the assumptions lack %q:\n%s", want, told)
		}
	}
	if _, again, _ := invoke(t, args...); again != out {
		t.Error("the same input gives other bytes")
	}
}

// The columns of the CSV of a path are a promise.
func TestPathCSV(t *testing.T) {
	climateScenario(t, wholeClimate, "")
	code, out, errOut := invoke(t, "path", "--frequency-mhz", "26000", "--elevation-deg", "20", "--format", "csv")
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if code != ExitAnswer || err != nil || len(rows) != 2 {
		t.Fatalf("code %d, %v, stderr %s, stdout %s", code, err, errOut, out)
	}
	const want = "elevation_deg,frequency_mhz,exceeded_percent,gas_attenuation_db,cloud_attenuation_db,rain_attenuation_db,scintillation_db,atmospheric_combination_db," +
		"total_attenuation_db,clear_sky_gas_attenuation_db,ionospheric_scintillation_db,ionospheric_polarisation_rotation_db,sky_brightness_k,clear_sky_brightness_k,xpd_db,path_missing"
	if got := strings.Join(rows[0], ","); got != want {
		t.Errorf("columns %s", got)
	}
	if v, err := strconv.ParseFloat(rows[1][8], 64); err != nil || !(v > 1 && v < 20) {
		t.Errorf("total %s", rows[1][8])
	}
}
