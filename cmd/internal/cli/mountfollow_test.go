package cli

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
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
