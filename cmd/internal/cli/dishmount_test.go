package cli

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"
)

const dishMount = `        mount:
          type: elevation_over_azimuth
          azimuth_rate_deg_s: 6
          elevation_rate_deg_s: 3
          rates_by_diameter: [[1, 8, 4], [6, 0.8, 0.8]]
`

type mountAnswer struct {
	Answer string
	Mounts *struct {
		Limit           *float64 `json:"limit_diameter_m"`
		Lost            float64  `json:"lost_bytes_per_day"`
		NotFollowed     float64  `json:"not_followed_s_per_day"`
		LostThen        *float64 `json:"lost_bytes_per_day_at_the_least"`
		NotFollowedThen *float64 `json:"not_followed_s_per_day_at_the_least"`
	}
	Assumptions []budgetNoteJSON
}

// With a mount the answer says what it takes with the dish and with the least one, and
// from which diameter on more than a larger dish brings; without one, once, that it is not counted.
func TestDishTellsOfTheMount(t *testing.T) {
	file := dishScenario(t, dishBlock+"    bytes_per_day: 1.0e9\n    availability_percent: 90\n")
	ask := func() (a mountAnswer) {
		t.Helper()
		code, out, errOut := invoke(t, "dish", "--scenario", file, "--format", "json")
		if code != 0 {
			t.Fatal(errOut)
		}
		if err := json.Unmarshal([]byte(out), &a); err != nil {
			t.Fatal(err)
		}
		return a
	}
	told := func(a mountAnswer, what string) (n int) {
		for _, x := range a.Assumptions {
			if strings.Contains(x.Text, what) {
				n++
			}
		}
		return n
	}
	if a := ask(); a.Mounts != nil || told(a, "no mount is stated at Skerry Point") != 1 || strings.Contains(a.Answer, "slewing") {
		t.Errorf("without a mount: %+v", a)
	}
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	const before = "        feed_loss_db: 0.4\n"
	changed := strings.Replace(string(text), before, dishMount+before, 1)
	if err := os.WriteFile(file, []byte(changed), 0o600); err != nil {
		t.Fatal(err)
	}
	a := ask()
	m := a.Mounts
	if m == nil || m.Limit == nil || m.LostThen == nil || m.NotFollowedThen == nil {
		t.Fatalf("with a mount: %+v", a)
	}
	if !(*m.Limit > 2 && *m.Limit < 6 && m.Lost > 0 && m.NotFollowed > 1 && *m.NotFollowedThen < m.NotFollowed) || told(a, "no mount is stated") != 0 {
		t.Errorf("with a mount: %+v, the least loses %g bytes and %g s a day", *m, *m.LostThen, *m.NotFollowedThen)
	}
	if !strings.Contains(a.Answer, "slewing and the keyhole take more than a larger dish brings") {
		t.Error(a.Answer)
	}
	// The trade's numbers are the answer's: what is lost grows to the end of the range.
	code, out, errOut := invoke(t, "dish", "--scenario", file, "--show", "trade", "--format", "json")
	if code != 0 {
		t.Fatal(errOut)
	}
	var trade struct {
		Trade []struct {
			NotFollowed float64 `json:"not_followed_s_per_day"`
		}
	}
	if err := json.Unmarshal([]byte(out), &trade); err != nil {
		t.Fatal(err)
	}
	for i := 1; i < len(trade.Trade); i++ {
		if v := trade.Trade[i].NotFollowed; v < trade.Trade[i-1].NotFollowed-0.1 || math.IsNaN(v) {
			t.Errorf("row %d: %g s a day are not followed, before %g", i, v, trade.Trade[i-1].NotFollowed)
		}
	}
}
