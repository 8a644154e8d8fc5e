package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
)

var pointProbe = []string{"pointing", "--spacecraft", "Probe A", "--station", "Test Hill", "--transmitter", "X-band"}

func TestPointingColumns(t *testing.T) {
	inPassScenario(t)
	args := append(pointProbe, "--from", "2026-03-12T10:00:00Z", "--to", "2026-03-12T10:00:25Z", "--step", "10s", "--format", "csv")
	code, out, errOut := invoke(t, args...)
	// The promise of the project's scenario description.
	const header = "utc,azimuth_deg,elevation_deg,apparent_elevation_deg,range_km,range_rate_km_s,azimuth_rate_deg_s,elevation_rate_deg_s,doppler_hz,received_frequency_hz,sunlit\n"
	if code != ExitAnswer || !strings.HasPrefix(out, header) {
		t.Fatalf("code %d, stderr %s, begins %.200q", code, errOut, out)
	}
	var times []string
	for _, r := range records(t, args[:len(args)-2]...) {
		times = append(times, r["utc"])
	}
	want := "2026-03-12T10:00:00.000Z 2026-03-12T10:00:10.000Z 2026-03-12T10:00:20.000Z 2026-03-12T10:00:25.000Z"
	if got := strings.Join(times, " "); got != want {
		t.Errorf("outside the window, with a short last step:\n got %s\nwant %s", got, want)
	}
	if !strings.Contains(errOut, "the element set of Probe A has the epoch 2026-03-10T06:00:00.000Z, 2.17 days before the middle of the span") {
		t.Errorf("the age is not told: %s", errOut)
	}
	_, _, errOut = invoke(t, append(pointProbe, "--from", "2026-03-10T00:00:00Z", "--to", "2026-03-10T00:00:00Z")...)
	if !strings.Contains(errOut, ", 0.25 days after the middle of the span") {
		t.Errorf("the age of a set from later is not told: %s", errOut)
	}
}

// Rates must be those of the columns beside them: central differences over 2 ms, whose
// rounding is 0.5e-6 deg, 0.5 mm and a metre per second.
func TestPointingRates(t *testing.T) {
	inPassScenario(t)
	pass := records(t, "passes", "--spacecraft", "Probe A", "--station", "Test Hill")[0]
	rows := records(t, append(pointProbe, "--from", pass["aos_utc"], "--to", pass["los_utc"], "--step", "1s")...)
	for i := 1; i < len(rows)-2; i++ {
		r := rows[i]
		for column, rate := range map[string]string{"azimuth_deg": "azimuth_rate_deg_s", "elevation_deg": "elevation_rate_deg_s", "range_km": "range_rate_km_s"} {
			got, want := math.Remainder(float(t, rows[i+1], column)-float(t, rows[i-1], column), 360)/2, float(t, r, rate)
			// What is left is the third derivative over 1 s.
			if math.Abs(got-want) > 2e-3*max(1, math.Abs(want)) {
				t.Errorf("%s: %s is %g, by difference %g", r["utc"], rate, want, got)
			}
		}
		// f ṙ/c with the defined speed of light, to half the last digit of each.
		shift := -8.18e9 * float(t, r, "range_rate_km_s") / 299792.458
		if got := float(t, r, "doppler_hz"); math.Abs(got-shift) > 1e-3 {
			t.Errorf("%s: Doppler shift %g Hz, want %g", r["utc"], got, shift)
		}
		if got := float(t, r, "received_frequency_hz"); math.Abs(got-8.18e9-shift) > 2e-3 {
			t.Errorf("%s: received %g Hz, want %g", r["utc"], got, 8.18e9+shift)
		}
		if float(t, r, "apparent_elevation_deg") <= float(t, r, "elevation_deg") {
			t.Errorf("%s: the air does not lift: %v", r["utc"], r)
		}
	}
}

func TestPointingBelowTheHorizonAndWithoutTransmitter(t *testing.T) {
	inPassScenario(t)
	r := records(t, append(pointProbe, "--from", "2026-03-10T00:30:00Z", "--to", "2026-03-10T00:30:00Z")...)
	if len(r) != 1 || float(t, r[0], "elevation_deg") > -5 || r[0]["apparent_elevation_deg"] != "" || r[0]["doppler_hz"] == "" {
		t.Errorf("below the horizon: %v", r)
	}
	still := []string{"pointing", "--spacecraft", `Still, "up"`, "--station", "Saltmarsh, east", "--from", "2026-03-10T00:30:00Z", "--to", "2026-03-10T00:30:00.002Z", "--step", "1ms"}
	r = records(t, still...)
	if len(r) != 3 || r[2]["utc"] != "2026-03-10T00:30:00.002Z" || r[0]["doppler_hz"] != "" || r[0]["received_frequency_hz"] != "" {
		t.Errorf("without transmitter: %v", r)
	}
	_, out, _ := invoke(t, append(still, "--format", "json")...)
	var result struct {
		Transmitter *string
		Rows        []map[string]any
	}
	if err := json.Unmarshal([]byte(out), &result); err != nil {
		t.Fatal(err)
	}
	if result.Transmitter != nil || len(result.Rows) != 3 || result.Rows[0]["doppler_hz"] != nil {
		t.Errorf("JSON: %s", out)
	}
	code, table, _ := invoke(t, still...)
	if code != ExitAnswer || strings.Count(table, "\n") != 5 {
		t.Errorf("table, code %d:\n%s", code, table)
	}
}

func TestPointingRefuses(t *testing.T) {
	inPassScenario(t)
	span := []string{"--from", "2026-03-10T00:00:00Z", "--to", "2026-03-10T01:00:00Z"}
	for _, c := range []struct {
		args []string
		want string
	}{
		{append([]string{"pointing", "--spacecraft", "Probe A", "--station", "Test Hill"}, span...), `--transmitter: left out, and the scenario holds 2; name one of "X-band", "beacon"`},
		{append([]string{"pointing", "--station", "Test Hill"}, span...), `--spacecraft: left out, and the scenario holds 2`},
		{append([]string{"pointing", "--spacecraft", `Still, "up"`, "--station", "Test Hill", "--transmitter", "X-band"}, span...), "transmitter: the scenario holds none"},
		{pointProbe, "--from: left out"},
		{append(pointProbe, "--from", "2026-03-10T00:00:00Z"), "--to: left out"},
		{append(pointProbe, "--from", "2026-03-10T00:00:00Z", "--to", "2026-03-09T00:00:00Z"), "--to: 2026-03-09T00:00:00.000Z lies before --from, 2026-03-10T00:00:00.000Z"},
		{append(append(pointProbe, span...), "--step", "1500us"), "--step: there is a fraction of a millisecond in it"},
		{append(append(pointProbe, span...), "--step", "-1s"), "it must be greater than 0"},
		{append(append(pointProbe, span...), "--step", "1ms"), "gives a table of 3600000 rows"},
		{append(pointProbe, "--from", "2056-03-10T00:00:00Z", "--to", "2056-03-10T00:00:01Z"), "within ±3652 days"},
	} {
		code, out, errOut := invoke(t, c.args...)
		if code != ExitInput || out != "" || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, stdout %q, stderr\n  %swant\n  %s", c.args, code, out, errOut, c.want)
		}
	}
}
