package cli

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"
	"time"
)

// bytesScenario is the demo's spacecraft of the pass tests with all that the commands
// on volume, licence and design ask for.
const bytesScenario = `window: {start_utc: 2026-03-10T00:00:00Z, length_h: 24}
element_files: [e.tle]
spacecraft:
  - name: Probe A
    element_set: "99501"
    transmitters:
      - name: X-band
        frequency_mhz: 8180
        power_w: 2.0
        line_loss_db: 0.8
        antenna: {pattern: cosine_power, peak_gain_dbi: 6.0, exponent: 2.0}
        attitude: nadir
        modes:
          - {name: slow, modulation: qpsk, coding: ccsds-conv-1-2, data_rate_bps: 4.0e6}
          - {name: quick, modulation: qpsk, coding: ccsds-conv-1-2, data_rate_bps: 4.0e7}
      - {name: beacon, frequency_mhz: 437, eirp_dbw: -3}
    recorder:
      capacity_bytes: 4.0e9
      lock_on_s: 5
      frame_loss: 0.01
      data:
        - {name: telemetry, rate_bps: 16000}
        - {name: images, bytes_per_orbit: 3.0e8, after_node_s: 300, lasting_s: 600}
stations:
  - name: Test Hill
    latitude_deg: 55
    longitude_deg: -4
    altitude_m: 100
    minimum_elevation_deg: 5
    uplink: true
    ground_line_bps: 1.0e7
    antennas:
      - {name: dish, kind: dish, diameter_m: 3.7, efficiency: 0.6, noise: {system_temperature_k: 150}}
  - {name: Saltmarsh, latitude_deg: -33, longitude_deg: 20, altitude_m: 5}
licence:
  - name: sky
    transmitter: X-band
    stations: [Test Hill]
    least_elevation_to_receive_deg: 10
    highest_eirp_dbw: 5
    widest_bandwidth_mhz: 30
design_control:
  tolerances:
    - {term: transmit power, favourable_db: 0.5, adverse_db: -0.5, law: uniform}
    - {term: implementation loss, favourable_db: 0.3, adverse_db: -0.6, law: triangular, source: test}
  criteria:
    - {name: own, margin: nominal, least_db: 3}
    - {name: strict, margin: mean_minus_sigmas, sigmas: 3, least_db: 40}
`

func inBytesScenario(t *testing.T) {
	t.Helper()
	t.Chdir(t.TempDir())
	for name, text := range map[string]string{"slantwise.yaml": bytesScenario, "e.tle": passElements} {
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// TestTuningFollowsThePointing: between its instants the table stays within the
// residual of the shift that the command pointing writes.
func TestTuningFollowsThePointing(t *testing.T) {
	inBytesScenario(t)
	steps := records(t, "tuning", "--station", "Test Hill", "--transmitter", "X-band", "--residual-hz", "5000", "--quantum-hz", "500")
	if len(steps) < 10 {
		t.Fatalf("only %d steps", len(steps))
	}
	last := steps[len(steps)-1]["to_utc"]
	shifts := records(t, "pointing", "--spacecraft", "Probe A", "--station", "Test Hill", "--transmitter", "X-band",
		"--from", steps[0]["from_utc"], "--to", last, "--step", "250ms")
	k := 0
	for _, p := range shifts {
		for p["utc"] > steps[k]["to_utc"] {
			k++
		}
		if d := math.Abs(float(t, p, "doppler_hz") - float(t, steps[k], "shift_hz")); d > 5000 {
			t.Errorf("at %s the shift is %.1f Hz off the setting", p["utc"], d)
		}
	}
	if code, _, errOut := invoke(t, "tuning", "--station", "Test Hill", "--transmitter", "X-band"); code != ExitInput || !strings.Contains(errOut, "--residual-hz") {
		t.Errorf("without a residual: code %d, %s", code, errOut)
	}
}

// TestFluxOfTwoTransmitters: the X band passes on the ground, and is not assessed toward
// the geostationary orbit, since the pattern ends at 90 deg; for the beacon's band no
// limit is known. 2 W less 0.8 dB with 6 dBi is 8.21 dBW; 4 Mbit/s at rate 1/2 on QPSK
// are 4 Mbaud, so the density is that of 30 dB less in 4 kHz: in the zenith
// 8.21 - 30 - 10 log10(4π d²).
func TestFluxOfTwoTransmitters(t *testing.T) {
	inBytesScenario(t)
	rows := records(t, "flux", "--spacecraft", "Probe A", "--station", "Test Hill")
	want := map[string]string{
		"worst of the orbit, ground, X-band": "pass", "worst of the orbit, geostationary, X-band": "not assessed", "worst of the orbit, , beacon": "not assessed",
		"passes over Test Hill, ground, X-band": "pass", "passes over Test Hill, geostationary, X-band": "not assessed", "passes over Test Hill, , beacon": "not assessed",
	}
	for _, r := range rows {
		key := r["geometry"] + ", " + r["place"] + ", " + r["transmitters"]
		if want[key] != r["outcome"] {
			t.Errorf("%s: %s, want %q", key, r["outcome"], want[key])
		}
		delete(want, key)
		if r["outcome"] == "not assessed" && r["reason"] == "" {
			t.Errorf("%s: no reason", key)
		}
		if r["place"] == "ground" && r["geometry"] == "worst of the orbit" {
			d := float(t, r, "range_km") * 1000
			flux := 10*math.Log10(2) - 0.8 + 6 - 30 - 10*math.Log10(4*math.Pi*d*d)
			if math.Abs(float(t, r, "flux_density_dbw_m2")-flux) > 0.01 {
				t.Errorf("flux %s, want %.3f", r["flux_density_dbw_m2"], flux)
			}
			if !strings.Contains(r["known"], "memory") {
				t.Errorf("the limit is recalled, and the row says %q", r["known"])
			}
		}
	}
	if len(want) > 0 {
		t.Errorf("missing: %v", want)
	}
	_, out, _ := invoke(t, "flux", "--spacecraft", "Probe A", "--format", "json")
	if !strings.Contains(out, "needs a licence") {
		t.Errorf("JSON does not say that a licence is needed: %s", out)
	}
}

// TestDesignControl: the items add up to the budget's own margin, and the criteria are
// judged; 0.5 dB either way, uniform, has a variance of 1/12 dB².
func TestDesignControl(t *testing.T) {
	inBytesScenario(t)
	where := []string{"--station", "Test Hill", "--transmitter", "X-band", "--mode", "slow", "--range-km", "1500", "--elevation-deg", "12"}
	rows := records(t, append([]string{"design-control"}, where...)...)
	sum := 0.0
	byName := map[string]map[string]string{}
	for _, r := range rows {
		byName[r["name"]] = r
		if r["row"] == "term" {
			sum += float(t, r, "design_db")
		}
	}
	b := askBudget(t, append([]string{"budget"}, where...)...)
	if m := *b.Samples[0].Margin; math.Abs(sum-m) > 1e-3 || math.Abs(float(t, byName["nominal"], "margin_db")-m) > 1e-4 {
		t.Errorf("the terms add up to %.4f dB, nominal %s, margin of the budget %.4f", sum, byName["nominal"]["margin_db"], m)
	}
	if v := float(t, byName["transmit power"], "variance_db2"); math.Abs(v-1.0/12) > 1e-6 {
		t.Errorf("variance of the power %g", v)
	}
	if byName["own: nominal"]["outcome"] != "pass" || byName["strict: mean_minus_sigmas"]["outcome"] != "fail" {
		t.Errorf("criteria: %v, %v", byName["own: nominal"], byName["strict: mean_minus_sigmas"])
	}
	if code, _, errOut := invoke(t, "design-control", "--station", "Test Hill"); code != ExitInput || !strings.Contains(errOut, "one geometry") {
		t.Errorf("without a geometry: code %d, %s", code, errOut)
	}
}

// TestLicence: the EIRP of 8.21 dBW breaks 5 dBW; the bandwidth is not known, since no
// roll-off is given; below 10 deg each pass over the hill loses time, and over the
// other station all of it.
func TestLicence(t *testing.T) {
	inBytesScenario(t)
	kinds := map[string]int{}
	for _, r := range records(t, "licence") {
		kinds[r["kind"]]++
		if r["transmitter"] != "X-band" {
			t.Errorf("the licence is not about %s", r["transmitter"])
		}
		switch {
		case r["kind"] == "breach" && (r["rule"] != "EIRP at most 5 dBW" || r["found"] != "8.21 dBW"):
			t.Errorf("breach %v", r)
		case r["kind"] == "binds" && r["station"] == "Saltmarsh" && r["rule"] != "stations allowed: Test Hill" && r["rule"] != "least elevation to receive 10 deg":
			t.Errorf("binds %v", r)
		}
	}
	if kinds["breach"] != 1 || kinds["not checked"] != 1 || kinds["binds"] < 8 {
		t.Errorf("rows: %v", kinds)
	}
}

// TestRecorderKeepsAccount: what is made is received, lost or on board; contacts lie
// over the one licensed station with an antenna, above the licence's elevation, and
// days add up to what was received.
func TestRecorderKeepsAccount(t *testing.T) {
	inBytesScenario(t)
	rows := records(t, "recorder", "--transmitter", "X-band")
	if len(rows) != 3 || rows[2]["data"] != "all" {
		t.Fatalf("rows %v", rows)
	}
	for _, r := range rows {
		in := float(t, r, "on_board_start_bytes") + float(t, r, "made_bytes")
		out := float(t, r, "received_bytes") + float(t, r, "lost_full_bytes") + float(t, r, "lost_on_the_way_bytes") + float(t, r, "on_board_end_bytes")
		if math.Abs(in-out) > 3 {
			t.Errorf("%s: %.0f B in, %.0f B out", r["data"], in, out)
		}
	}
	if v := float(t, rows[0], "made_bytes"); v != 2000*86400 { // 16 kbit/s over a day
		t.Errorf("telemetry made: %.0f B", v)
	}
	received := float(t, rows[2], "received_bytes")
	contacts := records(t, "recorder", "--transmitter", "X-band", "--show", "contacts")
	passes := records(t, "passes", "--station", "Test Hill", "--spacecraft", "Probe A")
	if len(contacts) != len(passes) {
		t.Errorf("%d contacts of %d passes", len(contacts), len(passes))
	}
	sum := 0.0
	for i, c := range contacts {
		if c["from_utc"] != passes[i]["aos_utc"] {
			t.Errorf("contact %d begins at %s, the pass at %s", i, c["from_utc"], passes[i]["aos_utc"])
		}
		if length := seconds(t, passes[i]["aos_utc"], passes[i]["los_utc"]); float(t, c, "offered_bytes") > 5e6*length {
			t.Errorf("contact %d offers %s B in %.0f s at 5 MB/s", i, c["offered_bytes"], length)
		}
		sum += float(t, c, "received_bytes")
	}
	days := 0.0
	for _, v := range records(t, "recorder", "--transmitter", "X-band", "--show", "volumes") {
		if v["span"] == "day" {
			days += float(t, v, "received_bytes")
		}
	}
	if received == 0 || math.Abs(sum-received) > 20 || math.Abs(days-received) > 5 {
		t.Errorf("received %.0f B, by contacts %.0f B, by days %.0f B", received, sum, days)
	}
	var answer struct {
		Filling []struct {
			Stored *float64 `json:"stored_bytes"`
		}
		Notes []string
	}
	_, out, _ := invoke(t, "recorder", "--transmitter", "X-band", "--show", "filling", "--format", "json")
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatal(err)
	}
	for _, p := range answer.Filling {
		if p.Stored == nil || *p.Stored > 4.0e9 {
			t.Fatalf("filling %v", p.Stored)
		}
	}
	if text := strings.Join(answer.Notes, "\n"); !strings.Contains(text, "no contact over Saltmarsh: it has no antenna") || !strings.Contains(text, "least elevation to receive 10 deg takes") {
		t.Errorf("notes %s", text)
	}
}

func seconds(t *testing.T, from, to string) float64 {
	t.Helper()
	a, err := time.Parse(time.RFC3339, from)
	if err != nil {
		t.Fatal(err)
	}
	b, err := time.Parse(time.RFC3339, to)
	if err != nil {
		t.Fatal(err)
	}
	return b.Sub(a).Seconds()
}

func TestRecorderRefuses(t *testing.T) {
	inBytesScenario(t)
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"--transmitter", "X-bnad"}, `"X-bnad" is not in the scenario; did you mean "X-band"`},
		{[]string{"--transmitter", "X-band", "--mode", "slwo"}, `--mode: "slwo" is not in the scenario; did you mean "slow"`},
		{[]string{"--transmitter", "X-band", "--show", "all"}, `--show: "all" is not allowed; it must be "data", "contacts", "volumes", "filling"`},
	} {
		if code, _, errOut := invoke(t, append([]string{"recorder"}, c.args...)...); code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, %s", c.args, code, errOut)
		}
	}
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "recorder", "--spacecraft", "Dunlin 1"); code != ExitInput || !strings.Contains(errOut, "gives it no recorder") {
		t.Errorf("Dunlin 1 of the demo has no recorder: code %d, %s", code, errOut)
	}
}
