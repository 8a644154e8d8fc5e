package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
)

// TestLogFitFindsWhatWasPutIn fits an invented log, whose differences are known.
func TestLogFitFindsWhatWasPutIn(t *testing.T) {
	t.Chdir(t.TempDir())
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	code, out, errOut := invoke(t, append([]string{"log", "fit", "r.csv", "--format", "json"}, who...)...)
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
	want := map[string]float64{"offset": rehearsalLevelDB, "transmitter offset": rehearsalOffsetHz, "time offset of the elements": rehearsalLate.Seconds()}
	for _, p := range got.Fits {
		if w, ok := want[p.Parameter]; ok && math.Abs(p.Value-w) > p.PlusMinus {
			t.Errorf("%s: %g ± %g, and %g was put in", p.Parameter, p.Value, p.PlusMinus, w)
		}
		delete(want, p.Parameter)
	}
	if len(want) > 0 || !strings.Contains(out, "oscillator: {measured: [{at_utc: ") {
		t.Errorf("%v is not in\n%s", want, out)
	}
}
