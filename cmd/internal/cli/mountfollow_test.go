package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// demoWith writes the demo into a folder of its own, changed, and returns its file.
func demoWith(t *testing.T, change func(string) string) string {
	t.Helper()
	dir := t.TempDir()
	const from = "../scenario/demo"
	files, err := os.ReadDir(from)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		text, err := os.ReadFile(filepath.Join(from, f.Name()))
		if err != nil {
			t.Fatal(err)
		}
		if f.Name() == "slantwise.yaml" {
			changed := change(string(text))
			if changed == string(text) {
				t.Fatal("the demo has changed: nothing was replaced")
			}
			text = []byte(changed)
		}
		if err := os.WriteFile(filepath.Join(dir, f.Name()), text, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return filepath.Join(dir, "slantwise.yaml")
}

// slowMount makes the demo's mounts turn slowly.
func slowMount(s string) string {
	return strings.ReplaceAll(s, "azimuth_rate_deg_s: 6", "azimuth_rate_deg_s: 1.2")
}

// withoutMounts takes the demo's mounts out.
func withoutMounts(s string) string {
	var out []string
	inside := false
	for line := range strings.SplitSeq(s, "\n") {
		if strings.HasPrefix(line, "        mount:") {
			inside = true
			continue
		}
		if inside && strings.HasPrefix(line, "          ") {
			continue
		}
		inside = false
		out = append(out, line)
	}
	return strings.Join(out, "\n")
}

// TestMountTakesBytes flies the demo's keyhole pass with its mount, with a slower one
// and with none: the slower the mount, the less comes down, and the budget says why.
func TestMountTakesBytes(t *testing.T) {
	volume := func(file string) (bytes float64, notes string, lostS float64) {
		code, out, errOut := invoke(t, "budget", "--scenario", file, "--spacecraft", "Fulmar 1", "--station", "Tussock Bay", "--antenna", "dish", "--mode", "full",
			"--pass", "2026-09-15T07:04:02Z", "--step", "60s", "--format", "json")
		if code != 0 {
			t.Fatal(errOut)
		}
		var v struct {
			Pass struct {
				AchievableBytes float64 `json:"achievable_bytes"`
				Mount           *struct {
					NotFollowedS   float64 `json:"not_followed_s"`
					LostAchievable float64 `json:"lost_achievable_bytes"`
				}
			}
			Assumptions json.RawMessage
		}
		if err := json.Unmarshal([]byte(out), &v); err != nil {
			t.Fatal(err)
		}
		if m := v.Pass.Mount; m != nil {
			return v.Pass.AchievableBytes + m.LostAchievable, string(v.Assumptions), m.NotFollowedS
		}
		return v.Pass.AchievableBytes, string(v.Assumptions), 0
	}
	none, told, _ := volume(demoWith(t, withoutMounts))
	if strings.Contains(told, "the mount") {
		t.Errorf("without a mount the notes are %s", told)
	}
	demo, told, lost := volume(demoWith(t, func(s string) string { return s + "\n" }))
	if !strings.Contains(told, "the mount does not follow 14.6 s of the pass") || math.Abs(lost-14.6) > 0.1 {
		t.Errorf("the demo's notes are %s, lost are %g s", told, lost)
	}
	slow, _, slowLost := volume(demoWith(t, slowMount))
	if !(slowLost > 2*lost) {
		t.Errorf("a slow mount loses %g s, the demo's %g s", slowLost, lost)
	}
	for _, v := range []float64{demo, slow} {
		if math.Abs(v-none) > 1 {
			t.Errorf("what is left and what is lost are %g bytes together, without a mount %g come down", v, none)
		}
	}
}

// column returns the numbers of a column of CSV.
func numbersOf(t *testing.T, records []map[string]string, name string) []float64 {
	t.Helper()
	var out []float64
	for _, r := range records {
		v, err := strconv.ParseFloat(r[name], 64)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		out = append(out, v)
	}
	return out
}

// TestPointingAxes holds the axis angles of the demo's keyhole pass: within the rates that
// the scenario gives, without jumps, on the apparent direction but in the slew.
func TestPointingAxes(t *testing.T) {
	rows := records(t, "pointing", "--spacecraft", "Fulmar 1", "--station", "Tussock Bay", "--axes",
		"--from", "2026-09-15T07:04:02Z", "--to", "2026-09-15T07:18:00Z", "--step", "1s")
	lower, upper := numbersOf(t, rows, "lower_axis_deg"), numbersOf(t, rows, "upper_axis_deg")
	off, rate := numbersOf(t, rows, "following_error_deg"), numbersOf(t, rows, "lower_axis_rate_deg_s")
	azimuth, apparent := numbersOf(t, rows, "azimuth_deg"), numbersOf(t, rows, "apparent_elevation_deg")
	lost := 0
	for i := range rows {
		if off[i] > 0.027 {
			lost++
		} else if d := math.Remainder(lower[i]-azimuth[i], 360); math.Abs(d)*math.Cos(apparent[i]*math.Pi/180) > 0.03 || math.Abs(upper[i]-apparent[i]) > 0.03 {
			t.Errorf("%s: axes %g, %g deg, apparent direction %g, %g deg", rows[i]["utc"], lower[i], upper[i], azimuth[i], apparent[i])
		}
		if math.Abs(rate[i]) > 6.0001 || lower[i] < -270 || lower[i] > 270 || upper[i] > 90 {
			t.Errorf("%s: axes %g, %g deg, rate %g deg/s", rows[i]["utc"], lower[i], upper[i], rate[i])
		}
		if i > 0 && math.Abs(lower[i]-lower[i-1]) > 6.001 {
			t.Errorf("%s: from %g to %g deg", rows[i]["utc"], lower[i-1], lower[i])
		}
	}
	if lost < 14 || lost > 16 {
		t.Errorf("%d s are not followed, budget says 14.6 s", lost)
	}
	for _, bad := range [][]string{
		{"--station", "Reedmere", "--axes"}, {"--station", "Tussock Bay", "--antenna", "dish"}, {"--station", "Tussock Bay", "--axes", "--to", "2026-09-16T07:18:00Z"},
	} {
		args := append([]string{"pointing", "--spacecraft", "Fulmar 1", "--from", "2026-09-15T07:04:02Z", "--to", "2026-09-15T07:18:00Z"}, bad...)
		if code, _, errOut := invoke(t, args...); code != 2 || !strings.Contains(errOut, "slantwise: --a") {
			t.Errorf("%v: exit %d, %s", bad, code, errOut)
		}
	}
}

// TestPassesMount: the list names the keyhole pass; without the flag the promised columns
// stand alone, and with it each pass ends where its target does, a turn of the cable apart.
func TestPassesMount(t *testing.T) {
	rows := records(t, "passes", "--mount", "--station", "Tussock Bay")
	held := 0
	for _, r := range rows {
		if r["mount_antenna"] == "" {
			if r["spacecraft"] == "Fulmar 1" || r["spacecraft"] == "Wagtail 1" {
				t.Errorf("no mount for %s at %s", r["spacecraft"], r["aos_utc"])
			}
			continue
		}
		held++
		one := []map[string]string{r}
		for at, axis := range map[string]string{"aos_azimuth_deg": "start_lower_axis_deg", "los_azimuth_deg": "end_lower_axis_deg"} {
			if d := math.Remainder(numbersOf(t, one, axis)[0]-numbersOf(t, one, at)[0], 360); math.Abs(d) > 0.001 {
				t.Errorf("%s: %s is %s deg, %s %s deg", r["aos_utc"], axis, r[axis], at, r[at])
			}
		}
		if lost := numbersOf(t, one, "not_followed_s")[0]; (lost > 0) != (r["aos_utc"] == "2026-09-15T07:04:01.370Z") {
			t.Errorf("%s: %g s are not followed", r["aos_utc"], lost)
		}
	}
	if held < 8 {
		t.Errorf("%d passes are taken by the mount", held)
	}
	if code, _, errOut := invoke(t, "passes", "--mount", "--station", "Reedmere"); code != 2 || !strings.Contains(errOut, "no antenna has a mount") {
		t.Errorf("exit %d, %s", code, errOut)
	}
}
