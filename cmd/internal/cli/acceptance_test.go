package cli

import (
	"math"
	"strings"
	"testing"
)

// TestAcceptance holds the demo's measurement to a computation by hand: 15.5 dB of Sun at
// 280 SFU and 8180 MHz, 10 log10(8π k (10^1.55 - 1)/(λ² S)) = 25.026 dB/K, and 0.8590 dB for
// the extent (x = ln 2 (0.533/0.69345)² = 0.4095, x/(1-exp -x) = 1.2187) on top.
func TestAcceptance(t *testing.T) {
	args := []string{"acceptance", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--elevation-deg", "40",
		"--y-db", "15.4", "--y-db", "15.6", "--y-db", "15.5", "--flux-sfu", "280", "--flux-uncertainty-percent", "5", "--attenuation-db", "0"}
	value := func(rows []map[string]string, item string) float64 {
		t.Helper()
		for _, r := range rows {
			if r["item"] == item {
				return numbersOf(t, []map[string]string{r}, "value")[0]
			}
		}
		t.Fatalf("no row %q", item)
		return 0
	}
	rows := records(t, args...)
	lambda := 299792458.0 / 8180e6
	want := 10*math.Log10(8*math.Pi*1.380649e-23*(math.Pow(10, 1.55)-1)/(lambda*lambda*280e-22)) + 10*math.Log10(1.2187)
	if got := value(rows, "measured G/T"); math.Abs(got-want) > 1e-3 {
		t.Errorf("measured G/T %g, by hand %g dB/K", got, want)
	}
	promised, measured := value(rows, "bytes of the window with the promised G/T"), value(rows, "bytes with the measured G/T")
	low, high := value(rows, "bytes with the measured less the expanded uncertainty"), value(rows, "bytes with the measured plus the expanded uncertainty")
	if !(low <= measured && measured <= high && measured < promised && low > 0) {
		t.Errorf("bytes: promised %g, measured %g, from %g to %g", promised, measured, low, high)
	}
	// A promise that is what was measured is kept with one half, and brings the measured bytes.
	rows = records(t, append(args, "--promised-g-over-t-db-k", "25.8852")...)
	if p := value(rows, "probability that the promise is kept"); math.Abs(p-50) > 1 {
		t.Errorf("kept with %g %%", p)
	}
	for _, c := range []struct{ drop, want string }{
		{"--y-db", "--y-db: left out"}, {"--flux-sfu", "--flux-sfu: give the flux"}, {"--flux-uncertainty-percent", "--flux-uncertainty-percent"}, {"--elevation-deg", "--elevation-deg"},
	} {
		var less []string
		for i := 0; i < len(args); i++ {
			if args[i] == c.drop {
				i++
				continue
			}
			less = append(less, args[i])
		}
		if code, _, errOut := invoke(t, less...); code != 2 || !strings.Contains(errOut, c.want) {
			t.Errorf("without %s: exit %d, %s", c.drop, code, errOut)
		}
	}
}
