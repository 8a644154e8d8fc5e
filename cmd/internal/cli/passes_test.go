package cli

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"
)

// passScenario is two invented spacecraft over two stations, one name of each with
// what CSV and JSON must quote. The element sets are made up; their checksums hold.
const passScenario = `window: {start_utc: 2026-03-10T00:00:00Z, length_h: 24}
element_files: [e.tle]
spacecraft:
  - name: Probe A
    element_set: "99501"
    transmitters:
      - {name: X-band, frequency_mhz: 8180, eirp_dbw: 10}
      - {name: beacon, frequency_mhz: 437, eirp_dbw: -3}
  - {name: 'Still, "up"', element_set: "99502"}
stations:
  - {name: Test Hill, latitude_deg: 55, longitude_deg: -4, altitude_m: 100, minimum_elevation_deg: 5, time_zone: Europe/London}
  - name: 'Saltmarsh, east'
    latitude_deg: -33
    longitude_deg: 20
    altitude_m: 5
    horizon_mask: [[0, 2], [90, 6.5], [180, 3]]
    horizon_mask_kind: apparent
`

const passElements = `PROBE A
1 99501U 26001A   26069.25000000  .00001000  00000-0  50000-4 0  9993
2 99501  97.6000 150.0000 0010000  90.0000 270.0000 15.05000000    15
STILL
1 99502U 26002A   26069.25000000  .00000000  00000-0  00000-0 0  9995
2 99502   0.0200  70.0000 0002000  90.0000 140.0000  1.00270000    13
`

// inPassScenario goes to a folder with the scenario above.
func inPassScenario(t *testing.T) {
	t.Helper()
	t.Chdir(t.TempDir())
	for name, text := range map[string]string{"slantwise.yaml": passScenario, "e.tle": passElements} {
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// records runs a command and returns its CSV by row and column.
func records(t *testing.T, args ...string) []map[string]string {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "csv")...)
	if code != ExitAnswer {
		t.Fatalf("%v: code %d, stderr %s", args, code, errOut)
	}
	all, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	rows := []map[string]string{}
	for _, line := range all[1:] {
		r := map[string]string{}
		for i, name := range all[0] {
			r[name] = line[i]
		}
		rows = append(rows, r)
	}
	return rows
}

func float(t *testing.T, r map[string]string, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("%s: %v", column, err)
	}
	return v
}

func TestPassesColumns(t *testing.T) {
	inPassScenario(t)
	code, out, errOut := invoke(t, "passes", "--format", "csv")
	// The promise of the project's scenario description.
	const header = "spacecraft,station,aos_utc,culmination_utc,los_utc,duration_s,max_elevation_deg,aos_azimuth_deg,culmination_azimuth_deg,los_azimuth_deg,min_range_km,cut\n"
	if code != ExitAnswer || !strings.HasPrefix(out, header) {
		t.Fatalf("code %d, stderr %s, begins %.200q", code, errOut, out)
	}
	if !strings.Contains(errOut, "geometric elevation decides AOS and LOS") || !strings.Contains(errOut, `mask is compared in apparent elevation, as it was made, at "Saltmarsh, east"`) {
		t.Errorf("stderr does not say what decides:\n%s", errOut)
	}
	// A stationary spacecraft at 16° east stands over the second station all day.
	if !strings.Contains(out, `"Still, ""up""","Saltmarsh, east",2026-03-10T00:00:00.000Z,`) || !strings.Contains(out, ",2026-03-11T00:00:00.000Z,86400.000,") || !strings.Contains(out, ",both\n") {
		t.Errorf("no pass of a whole day in\n%s", out)
	}
}

func TestPassesFormatsAgree(t *testing.T) {
	inPassScenario(t)
	rows := records(t, "passes")
	_, out, _ := invoke(t, "passes", "--format", "json")
	var result struct {
		Horizon string           `json:"horizon"`
		Passes  []map[string]any `json:"passes"`
	}
	d := json.NewDecoder(strings.NewReader(out))
	d.UseNumber()
	if err := d.Decode(&result); err != nil {
		t.Fatal(err)
	}
	if len(result.Passes) != len(rows) || len(rows) < 8 || result.Horizon != "geometric" {
		t.Fatalf("%d passes in JSON, %d in CSV, horizon %q", len(result.Passes), len(rows), result.Horizon)
	}
	for i, r := range rows {
		for column, want := range r {
			got := result.Passes[i][column]
			if n, ok := got.(json.Number); ok {
				got = n.String()
			}
			if got != want {
				t.Errorf("pass %d, %s: JSON %v, CSV %s", i, column, got, want)
			}
		}
	}
	_, table, _ := invoke(t, "passes")
	if got := strings.Count(table, "\n"); got != len(rows)+2 {
		t.Errorf("the table has %d lines for %d passes", got, len(rows))
	}
	if !strings.Contains(table, " GMT ") {
		t.Errorf("no local time in\n%s", table)
	}
}

func TestPassesFilters(t *testing.T) {
	inPassScenario(t)
	all := records(t, "passes")
	for _, c := range []struct {
		name string
		args []string
		keep func(r map[string]string) bool
	}{
		{"spacecraft", []string{"--spacecraft", "Probe A"}, func(r map[string]string) bool { return r["spacecraft"] == "Probe A" }},
		{"station", []string{"--station", "Saltmarsh, east"}, func(r map[string]string) bool { return r["station"] == "Saltmarsh, east" }},
		{"both spacecraft", []string{"--spacecraft", "Probe A", "--spacecraft", `Still, "up"`}, func(map[string]string) bool { return true }},
		{"elevation", []string{"--least-elevation-deg", "30"}, func(r map[string]string) bool { return float(t, r, "max_elevation_deg") >= 30 }},
		{"duration", []string{"--least-duration", "8m"}, func(r map[string]string) bool { return float(t, r, "duration_s") >= 480 }},
	} {
		var want []map[string]string
		for _, r := range all {
			if c.keep(r) {
				want = append(want, r)
			}
		}
		got := records(t, append([]string{"passes"}, c.args...)...)
		if len(got) != len(want) || len(want) == 0 || c.name != "both spacecraft" && len(want) == len(all) {
			t.Errorf("%s: %d passes, want %d of %d", c.name, len(got), len(want), len(all))
			continue
		}
		for i := range got {
			if got[i]["aos_utc"] != want[i]["aos_utc"] {
				t.Errorf("%s: pass %d at %s, want %s", c.name, i, got[i]["aos_utc"], want[i]["aos_utc"])
			}
		}
	}
}

// A least elevation of 0 is a filter like any other: where the horizon lies below the
// horizontal, there are passes that it leaves out.
func TestPassesLeastElevationZero(t *testing.T) {
	inPassScenario(t)
	text := strings.Replace(passScenario, "minimum_elevation_deg: 5", "minimum_elevation_deg: -5", 1)
	if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	all := records(t, "passes", "--station", "Test Hill", "--spacecraft", "Probe A")
	want := 0
	for _, r := range all {
		if float(t, r, "max_elevation_deg") >= 0 {
			want++
		}
	}
	got := records(t, "passes", "--station", "Test Hill", "--spacecraft", "Probe A", "--least-elevation-deg", "0")
	if len(got) != want || want == len(all) {
		t.Errorf("%d passes, want %d of %d", len(got), want, len(all))
	}
}

// --sunlit must keep just those that the pointing file calls sunlit.
func TestPassesSunlit(t *testing.T) {
	inPassScenario(t)
	lit := map[string]bool{}
	for _, r := range records(t, "passes", "--sunlit", "--spacecraft", "Probe A", "--station", "Test Hill") {
		lit[r["aos_utc"]] = true
	}
	all := records(t, "passes", "--spacecraft", "Probe A", "--station", "Test Hill")
	for _, r := range all {
		at := r["culmination_utc"]
		p := records(t, "pointing", "--spacecraft", "Probe A", "--station", "Test Hill", "--transmitter", "X-band", "--from", at, "--to", at)
		if (p[0]["sunlit"] == "sun") != lit[r["aos_utc"]] {
			t.Errorf("pass at %s: pointing says %s, the filter %v", r["aos_utc"], p[0]["sunlit"], lit[r["aos_utc"]])
		}
	}
	if len(lit) == 0 || len(lit) == len(all) {
		t.Errorf("%d of %d passes are sunlit: the case shows nothing", len(lit), len(all))
	}
}

func TestPassesOrders(t *testing.T) {
	inPassScenario(t)
	for order, less := range map[string]func(a, b map[string]string) bool{
		"aos": func(a, b map[string]string) bool { return a["aos_utc"] <= b["aos_utc"] },
		"elevation": func(a, b map[string]string) bool {
			return float(t, a, "max_elevation_deg") >= float(t, b, "max_elevation_deg")
		},
		"duration":   func(a, b map[string]string) bool { return float(t, a, "duration_s") >= float(t, b, "duration_s") },
		"spacecraft": func(a, b map[string]string) bool { return a["spacecraft"] <= b["spacecraft"] },
		"station":    func(a, b map[string]string) bool { return a["station"] >= b["station"] }, // Test Hill stands first
	} {
		rows := records(t, "passes", "--sort", order)
		for i := 1; i < len(rows); i++ {
			if !less(rows[i-1], rows[i]) {
				t.Errorf("--sort %s: row %d %v\nbefore row %d %v", order, i-1, rows[i-1], i, rows[i])
			}
		}
	}
}

func TestPassesSameForAnyWorkers(t *testing.T) {
	inPassScenario(t)
	_, one, _ := invoke(t, "passes", "--format", "csv", "--workers", "1")
	_, many, _ := invoke(t, "passes", "--format", "csv", "--workers", "7")
	if one != many || len(one) < 500 {
		t.Error("one and seven workers differ")
	}
}

func TestPassesRefuses(t *testing.T) {
	inPassScenario(t)
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"--spacecraft", "Prob A"}, `--spacecraft: "Prob A" is not in the scenario; did you mean "Probe A"; it holds "Probe A", "Still, \"up\""`},
		{[]string{"--station", "Test Hil"}, `did you mean "Test Hill"`},
		{[]string{"--sort", "elevatoin"}, `did you mean "elevation"`},
		{[]string{"--least-elevation-deg", "NaN"}, `--least-elevation-deg: "NaN" is not allowed; it must be a number; only finite numbers are`},
		{[]string{"--least-elevation-deg", "90.5"}, "--least-elevation-deg: 90.5 deg is not allowed; it must be -90 to 90 deg"},
		{[]string{"--least-elevation-deg", "−5"}, "it holds a dash that is no minus sign, U+2212"},
		{[]string{"--least-elevation-deg", "5,5"}, "write the decimal point as ."},
		{[]string{"--spacecraft", " "}, "--spacecraft: the name is empty; give one, or leave the flag out for all"},
		{[]string{"--workers", "-1"}, `--workers: "-1" is not allowed; it must be a whole number, 0 (as many as the machine can) to 10000`},
		{[]string{"--least-duration", "0s"}, "it must be greater than 0"},
	} {
		code, out, errOut := invoke(t, append([]string{"passes"}, c.args...)...)
		if code != ExitInput || out != "" || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, stdout %q, stderr\n  %swant\n  %s", c.args, code, out, errOut, c.want)
		}
	}
}

func TestNoPassesIsAnAnswer(t *testing.T) {
	inPassScenario(t)
	for f, want := range map[string]string{
		"table": "no passes from 2026-03-10T00:00:00.000Z to 2026-03-11T00:00:00.000Z\n",
		"csv":   strings.Join(passColumns, ",") + "\n",
		"json":  "{\n  \"window_start_utc\": \"2026-03-10T00:00:00.000Z\",\n  \"window_end_utc\": \"2026-03-11T00:00:00.000Z\",\n  \"horizon\": \"geometric\",\n  \"passes\": []\n}\n",
	} {
		code, out, _ := invoke(t, "passes", "--spacecraft", "Probe A", "--least-duration", "2h", "--format", f)
		if code != ExitAnswer || out != want {
			t.Errorf("%s: code %d, got %q", f, code, out)
		}
	}
}

// At AOS and LOS the spacecraft stands at the minimum elevation, at culmination at the
// maximum: the two commands must agree.
func TestPassesAgreeWithPointing(t *testing.T) {
	inPassScenario(t)
	for _, r := range records(t, "passes", "--spacecraft", "Probe A", "--station", "Test Hill") {
		if r["cut"] != "" {
			continue
		}
		for column, want := range map[string]float64{"aos_utc": 5, "los_utc": 5, "culmination_utc": float(t, r, "max_elevation_deg")} {
			p := records(t, "pointing", "--spacecraft", "Probe A", "--station", "Test Hill", "--transmitter", "beacon", "--from", r[column], "--to", r[column])
			// 1 ms at under 1 deg/s, and half the last digit.
			if got := float(t, p[0], "elevation_deg"); math.Abs(got-want) > 1.1e-3 {
				t.Errorf("%s %s: elevation %g deg, want %g", column, r[column], got, want)
			}
		}
	}
}

func TestDayStamp(t *testing.T) {
	var d dayStamp
	start := time.Date(2026, 2, 28, 23, 59, 59, 998_600_000, time.UTC)
	times := []time.Time{start, start.Add(time.Millisecond), start.Add(2 * time.Hour), start, time.Date(1969, 12, 31, 23, 59, 59, 999_000_000, time.UTC), time.Unix(0, 0)}
	for i := range 500 {
		times = append(times, start.Add(time.Duration(i)*7*time.Hour+time.Duration(i)*1234567))
	}
	for _, at := range times {
		if got := d.append(nil, at); !bytes.Equal(got, appendUTC(nil, at)) {
			t.Errorf("got %s, want %s", got, utc(at))
		}
	}
}

func TestAppendAzimuth(t *testing.T) {
	for v, want := range map[float64]string{359.99996: "0.0000", 359.9999: "359.9999", 0: "0.0000", 36: "36.0000"} {
		if got := azimuth(v, 4); got != want {
			t.Errorf("%g: got %s, want %s", v, got, want)
		}
	}
}
