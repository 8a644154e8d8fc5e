package cli

import (
	"math"
	"strings"
	"testing"
)

// ratesOfProbe plans the passes of Probe A with its two modes, slow and quick.
var ratesOfProbe = []string{"rates", "--transmitter", "X-band", "--most-changes", "2", "--least-stay-s", "30", "--guard-db", "0.5", "--guard-s", "2", "--relock-s", "5"}

func rates(t *testing.T, more ...string) []map[string]string {
	t.Helper()
	return records(t, append(append([]string{}, ratesOfProbe...), more...)...)
}

// TestRatesKeepTheRules: steps follow one another within the pass, each as long as it
// must be, bytes add up to those of the pass, and no pass beats a bound or falls behind
// its best single mode.
func TestRatesKeepTheRules(t *testing.T) {
	inBytesScenario(t)
	steps, passes := rates(t), rates(t, "--show", "passes")
	byPass := map[string]float64{}
	count := map[string]int{}
	for i, s := range steps {
		aos := s["aos_utc"]
		count[aos]++
		byPass[aos] += float(t, s, "bytes")
		if i > 0 && steps[i-1]["aos_utc"] == aos && steps[i-1]["end_utc"] != s["start_utc"] {
			t.Errorf("step %d begins at %s, the one before ends at %s", i, s["start_utc"], steps[i-1]["end_utc"])
		}
		length := seconds(t, s["start_utc"], s["end_utc"])
		if float(t, s, "bytes") > float(t, s, "net_rate_bps")/8*length*(1+1e-9)+1 {
			t.Errorf("step %d: %s B in %.0f s at %s bit/s", i, s["bytes"], length, s["net_rate_bps"])
		}
	}
	gained := 0
	for _, p := range passes {
		aos, bytes := p["aos_utc"], float(t, p, "bytes")
		if math.Abs(bytes-byPass[aos]) > float64(count[aos]) || int(float(t, p, "changes")) != max(0, count[aos]-1) || count[aos] > 3 {
			t.Errorf("pass %s: %.0f B and %s changes, its %d steps hold %.0f B", aos, bytes, p["changes"], count[aos], byPass[aos])
		}
		if single := float(t, p, "single_mode_bytes"); bytes < single-1 || bytes > float(t, p, "free_switching_bytes")+1 || bytes > float(t, p, "shannon_bytes")+1 {
			t.Errorf("pass %s: %.0f B, single %.0f B, bounds %s and %s B", aos, bytes, single, p["free_switching_bytes"], p["shannon_bytes"])
		} else if bytes > single*1.01 {
			gained++
		}
	}
	if len(passes) == 0 || gained == 0 {
		t.Errorf("%d passes, of which %d gain from changing", len(passes), gained)
	}
	for _, s := range steps {
		length := seconds(t, s["start_utc"], s["end_utc"])
		if count[s["aos_utc"]] > 1 && length < 30 {
			t.Errorf("%s stays for %.0f s in a pass with changes", s["mode"], length)
		}
	}
}

// TestRatesSeries: the samples of a pass hold the mode of its steps and end with their
// bytes; outside the licence's elevation Shannon's limit is 0.
func TestRatesSeries(t *testing.T) {
	inBytesScenario(t)
	first := rates(t, "--show", "passes")[0]
	at := []string{"--pass", first["aos_utc"]}
	steps, samples := rates(t, at...), rates(t, append(at, "--show", "series")...)
	if last := samples[len(samples)-1]; math.Abs(float(t, last, "bytes_so_far")-float(t, first, "bytes")) > 1 {
		t.Errorf("the samples end with %s B, the pass has %s B", last["bytes_so_far"], first["bytes"])
	}
	if float(t, samples[0], "shannon_bps") != 0 || float(t, samples[0], "free_switching_bps") != 0 {
		t.Errorf("at AOS, under 10 deg, rates are %s and %s bit/s", samples[0]["shannon_bps"], samples[0]["free_switching_bps"])
	}
	for _, s := range samples {
		for _, st := range steps {
			if s["utc"] >= st["start_utc"] && s["utc"] < st["end_utc"] && (s["mode"] != st["mode"] || s["net_rate_bps"] != st["net_rate_bps"]) {
				t.Errorf("at %s: %s, its step sends %s", s["utc"], s["mode"], st["mode"])
			}
		}
	}
}

// TestRatesVolumes: the clear sky brings the most, quantiles fall, and both sums have
// the mean of the passes' means.
func TestRatesVolumes(t *testing.T) {
	inBytesScenario(t)
	rows := rates(t, "--show", "volumes")
	sum := 0.0
	for _, r := range rows {
		if float(t, r, "reached_99_percent_bytes") > float(t, r, "reached_90_percent_bytes")+1 || float(t, r, "reached_90_percent_bytes") > float(t, r, "median_bytes")+1 {
			t.Errorf("quantiles of %v do not fall", r)
		}
		if r["row"] == "pass" {
			sum += float(t, r, "mean_bytes")
		} else if m := float(t, r, "mean_bytes"); math.Abs(m-sum) > 1e-6*sum {
			t.Errorf("%s: mean %.0f B, the passes' means add up to %.0f B", r["row"], m, sum)
		}
	}
	for _, r := range rates(t, "--show", "volumes", "--clear-sky", "--silent") {
		planned, clear := float(t, r, "planned_bytes"), float(t, r, "clear_sky_bytes")
		if math.Abs(clear-planned) > 1e-3*planned {
			t.Errorf("%s of %s: %.0f B planned and %.0f B by the distribution, the sky being clear in both", r["row"], r["aos_utc"], planned, clear)
		}
	}
	if len(rows) < 5 || !(sum > 0) {
		t.Errorf("%d rows, mean %g B", len(rows), sum)
	}
}

// TestRatesChoices: one mode for all passes brings no more than one for each, and that
// no more than changing; a range of symbol rates that holds the modes brings more.
func TestRatesChoices(t *testing.T) {
	inBytesScenario(t)
	total := func(flags ...string) float64 {
		sum := 0.0
		for _, p := range records(t, append([]string{"rates", "--transmitter", "X-band", "--show", "passes"}, flags...)...) {
			sum += float(t, p, "bytes")
		}
		return sum
	}
	forAll, aPass, changing := total("--modes", "one_for_all"), total("--modes", "one_a_pass"), total("--most-changes", "4")
	if !(forAll > 0 && forAll <= aPass && aPass < changing) {
		t.Errorf("one for all %.0f B, one a pass %.0f B, changing %.0f B", forAll, aPass, changing)
	}
	family := []string{"--lowest-symbol-rate-baud", "4e6", "--highest-symbol-rate-baud", "4e7"}
	if v := total(append(family, "--modes", "one_for_all")...); v < forAll {
		t.Errorf("the best symbol rate for all brings %.0f B, less than %.0f B", v, forAll)
	}
	if v := total(append(family, "--most-changes", "4")...); v < changing {
		t.Errorf("changing among symbol rates brings %.0f B, less than %.0f B", v, changing)
	}
}

func TestRatesRefuses(t *testing.T) {
	inBytesScenario(t)
	for _, c := range []struct{ flags, want string }{
		{"--modes often", `--modes: "often" is not allowed; it must be "one_a_pass", "changing", "one_for_all"`},
		{"--most-changes 1.5", "--most-changes: 1.5 is not allowed"},
		{"--most-changes 2 --modes one_a_pass", "--most-changes has no effect with --modes one_a_pass"},
		{"--modes changing", "--most-changes: left out"},
		{"--least-stay-s -1", "--least-stay-s: -1 s is not allowed"},
		{"--guard-db 200", "--guard-db: 200 dB is not allowed"},
		{"--lowest-symbol-rate-baud 1e6", "go together; give both"},
		{"--lowest-symbol-rate-baud 2e6 --highest-symbol-rate-baud 1e6", "give a range that rises"},
		{"--show all", `--show: "all" is not allowed; it must be "steps", "passes", "series", "volumes"`},
		{"--mode slwo", `--mode: "slwo" is not in the scenario; did you mean "slow"`},
	} {
		code, _, errOut := invoke(t, append([]string{"rates", "--transmitter", "X-band"}, strings.Fields(c.flags)...)...)
		if code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%s: code %d, %s", c.flags, code, errOut)
		}
	}
	// A pass after the window's end is none, which is an answer.
	if code, out, errOut := invoke(t, "rates", "--transmitter", "X-band", "--pass", "2026-04-01T00:00:00Z"); code != 0 || !strings.Contains(errOut, "no such pass") || strings.Count(out, "\n") > 2 {
		t.Errorf("no pass: code %d, %s", code, errOut)
	}
}

// TestRatesSayWhereToBeSilent: a schedule that goes on through time which a licence takes
// says so; one with silence does not need to.
func TestRatesSayWhereToBeSilent(t *testing.T) {
	inBytesScenario(t)
	for _, silent := range []bool{false, true} {
		args := append([]string{}, ratesOfProbe...)
		if silent {
			args = append(args, "--silent")
		}
		code, _, errOut := invoke(t, args...)
		if told := strings.Contains(errOut, "steps go on through the time that a licence takes"); code != ExitAnswer || told == silent {
			t.Errorf("silent %v: exit %d, told %v: %s", silent, code, told, errOut)
		}
	}
}
