package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
)

// TestTeamWeek: the invented tables of the team's week come back as they were made: 400 Hz high,
// half a second late, 25 K warm; each stands on the page of its pass, and Wednesday's is 0.9 dB lower
// than Monday's.
func TestTeamWeek(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "--team-week", "."); code != ExitAnswer {
		t.Fatal(errOut)
	}
	for _, day := range []string{"monday", "tuesday", "wednesday"} {
		if code, _, errOut := invoke(t, "log", "add", day+".csv", "--scenario", "week.yaml", "--taken-bytes", "4e5"); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	code, out, errOut := invoke(t, "log", "fit", "--entry", "all", "--scenario", "week.yaml", "--format", "json")
	if code != ExitAnswer {
		t.Fatal(errOut)
	}
	var got struct {
		Fits []struct {
			Parameter string
			Value     float64
			PlusMinus float64 `json:"plus_minus"`
		}
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil {
		t.Fatal(err)
	}
	want := map[string]float64{"transmitter offset": rehearsalOffsetHz, "time offset of the elements": rehearsalLate.Seconds(), "added noise temperature": rehearsalAddedK}
	for _, p := range got.Fits {
		if w, ok := want[p.Parameter]; ok && math.Abs(p.Value-w) > p.PlusMinus {
			t.Errorf("%s: %g ± %g, and %g was put in", p.Parameter, p.Value, p.PlusMinus, w)
		}
		delete(want, p.Parameter)
	}
	if len(want) > 0 {
		t.Errorf("%v is not in\n%s", want, out)
	}
	passes := records(t, "log", "show")
	if d := float(t, passes[2], "level_bias_db") - float(t, passes[0], "level_bias_db"); math.Abs(d+0.9) > 0.1 {
		t.Errorf("Wednesday is %.2f dB off Monday", d)
	}
	if trend := records(t, "log", "show", "--trend"); float(t, trend[0], "per_day") > -0.3 || trend[0]["taken_bytes"] != "1200000" {
		t.Errorf("%v", trend[0])
	}
	if code, _, errOut := invoke(t, "report", "--scenario", "week.yaml", "--into", "pages"); code != ExitAnswer || len(measuredPages(t, "pages")) != 3 {
		t.Errorf("code %d, %d pages with measurements, %s", code, len(measuredPages(t, "pages")), errOut)
	}
	if code, _, errOut := invoke(t, "new", "--team-week", "--launch-day", "x"); code != ExitInput || !strings.Contains(errOut, "give one of them") {
		t.Errorf("code %d, %s", code, errOut)
	}
}
