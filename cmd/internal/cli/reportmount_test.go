package cli

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestReportMount: the page of the demo's keyhole pass says what its mount does, in words, as CSV
// and as JSON; a page of an antenna without a mount says nothing of one.
func TestReportMount(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "out")
	if code, _, errOut := invoke(t, "report", "--spacecraft", "Fulmar 1", "--into", dir); code != 0 {
		t.Fatal(errOut)
	}
	read := func(name string) string {
		t.Helper()
		text, err := os.ReadFile(filepath.Join(dir, "passes", name))
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	const stem = "fulmar-1-tussock-bay-20260915t070401z"
	page := read(stem + ".html")
	for _, want := range []string{"The mount", "It does not follow 14.6 s of the pass", "slews through the keyhole", "Axes of the mount", "lock it out before work"} {
		if !strings.Contains(page, want) {
			t.Errorf("the page does not say %q", want)
		}
	}
	if head, _, _ := strings.Cut(read(stem+".csv"), "\n"); !strings.HasSuffix(strings.TrimSpace(head), "lower_axis_deg,upper_axis_deg,following_error_deg,ground_latitude_deg,ground_longitude_deg,height_km,sunlit") {
		t.Errorf("columns %s", head)
	}
	var j struct {
		Radio struct {
			Mount *struct {
				NotFollowedS float64 `json:"not_followed_s"`
				LostMode     float64 `json:"lost_mode_bytes"`
				Slews        []struct {
					TurnOver bool `json:"turn_over"`
				}
			}
		}
	}
	if err := json.Unmarshal([]byte(read(stem+".json")), &j); err != nil {
		t.Fatal(err)
	}
	if m := j.Radio.Mount; m == nil || m.NotFollowedS < 14 || m.NotFollowedS > 15 || !(m.LostMode > 1e8) || len(m.Slews) != 1 || m.Slews[0].TurnOver {
		t.Errorf("the JSON says %+v", m)
	}
	without, err := filepath.Glob(filepath.Join(dir, "passes", "fulmar-1-skerry-point-*.html"))
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range without {
		if text, err := os.ReadFile(f); err != nil || strings.Contains(string(text), "The mount") {
			t.Errorf("%s speaks of a mount (%v)", filepath.Base(f), err)
		}
	}
}
