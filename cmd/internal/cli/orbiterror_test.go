package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
)

// uncertainDemo makes the demo state how uncertain its positions are: along the track
// alone, so that closed forms hold.
func uncertainDemo(t *testing.T, alongKm string) {
	t.Helper()
	t.Setenv("SLANTWISE_POSITION_UNCERTAINTY_ALONG_KM", alongKm)
	t.Setenv("SLANTWISE_POSITION_UNCERTAINTY_ACROSS_KM", "0")
	t.Setenv("SLANTWISE_POSITION_UNCERTAINTY_RADIAL_KM", "0")
}

type surenessOut struct {
	Uncertainty *string `json:"position_uncertainty"`
	NarrowFrom  *string `json:"beam_too_narrow_from_utc"`
	Pass        *struct {
		AOS  *float64 `json:"aos_plus_minus_s"`
		LOS  *float64 `json:"los_plus_minus_s"`
		Sure *float64 `json:"existence_probability"`
	} `json:"pass"`
	Samples []struct {
		ElevationDeg float64 `json:"elevation_deg"`
		RangeKm      float64 `json:"range_km"`
		Received     float64 `json:"received_power_dbm"`
		Terms        []struct {
			Name  string  `json:"name"`
			Sign  float64 `json:"sign"`
			Value float64 `json:"value"`
		} `json:"terms"`
		Along   *float64 `json:"orbit_pointing_along_deg"`
		Doppler *float64 `json:"doppler_spread_hz"`
		Kept    *float64 `json:"pointing_error_95_deg"`
	} `json:"samples"`
}

func (o *surenessOut) term(i int, name string) (v float64, ok bool) {
	for _, x := range o.Samples[i].Terms {
		if x.Name == name {
			return x.Value, true
		}
	}
	return math.NaN(), false
}

func askSureness(t *testing.T, args ...string) surenessOut {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "json")...)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	var r surenessOut
	if err := json.Unmarshal([]byte(out), &r); err != nil {
		t.Fatal(err)
	}
	return r
}

// Stated, the position's uncertainty is a term of its own that takes the received power down by
// as much; not stated, nothing of it is in the budget.
func TestBudgetOfAnUncertainOrbit(t *testing.T) {
	plain := askSureness(t, budget()...)
	if _, has := plain.term(0, "orbit pointing loss"); has || plain.Uncertainty != nil || plain.Samples[0].Along != nil || plain.Pass.AOS != nil {
		t.Errorf("a scenario that states nothing tells of an uncertain orbit: %+v", plain)
	}
	uncertainDemo(t, "3")
	r := askSureness(t, budget()...)
	if r.Uncertainty == nil || !strings.Contains(*r.Uncertainty, "along 3 km, across 0 km, radially 0 km") {
		t.Errorf("the uncertainty reads %v", r.Uncertainty)
	}
	if r.NarrowFrom == nil || *r.NarrowFrom != "2026-09-15T00:00:00.000Z" { // too narrow all the time
		t.Errorf("too narrow from %v", r.NarrowFrom)
	}
	for i, s := range r.Samples {
		loss, _ := r.term(i, "orbit pointing loss")
		if !(loss > 0) || math.Abs(plain.Samples[i].Received-loss-s.Received) > 2e-9 {
			t.Errorf("sample %d: %.9f dBm less %.9f dB is not %.9f dBm", i, plain.Samples[i].Received, loss, s.Received)
		}
		// At most the whole of 3 km at a right angle to the sight.
		if most := math.Atan(3/s.RangeKm) * 180 / math.Pi; !(*s.Along > 0.1*most && *s.Along <= most) || !(*s.Kept > *s.Along) {
			t.Errorf("sample %d: ±%g deg along the track, ±%g deg kept; 3 km at %g km are %g deg", i, *s.Along, *s.Kept, s.RangeKm, most)
		}
	}
	// 3 km along the track at 7.6 km/s are 0.39 s. AOS and LOS shift by that, and by what the
	// Earth turns in it.
	if a, l := *r.Pass.AOS, *r.Pass.LOS; math.Abs(a-0.395) > 0.03 || math.Abs(l-0.395) > 0.03 || *r.Pass.Sure != 1 {
		t.Errorf("AOS ±%g s, LOS ±%g s, existence %v", a, l, r.Pass.Sure)
	}
	stated := askSureness(t, append(budget(), "--range-km", "1200", "--elevation-deg", "20")...)
	if _, has := stated.term(0, "orbit pointing loss"); has || stated.Uncertainty != nil {
		t.Error("a stated geometry has an orbit's error")
	}
}

// The CSV has four more columns where the scenario states the uncertainty.
func TestBudgetCSVOfAnUncertainOrbit(t *testing.T) {
	uncertainDemo(t, "3")
	code, out, errOut := invoke(t, budget("--step", "60s", "--format", "csv")...)
	head, _, _ := strings.Cut(out, "\n")
	if code != ExitAnswer || !strings.HasSuffix(head, ",path_missing,orbit_pointing_along_deg,orbit_pointing_deg,doppler_spread_hz,pointing_error_95_deg") || !strings.Contains(head, "orbit_pointing_loss_db") {
		t.Errorf("code %d, stderr %s, columns %s", code, errOut, head)
	}
}

func TestBudgetTableOfAnUncertainOrbit(t *testing.T) {
	uncertainDemo(t, "1.2")
	_, out, _ := invoke(t, budget()...)
	for _, want := range []string{
		"by the orbit's error, one standard deviation, AOS ±0.16 s, LOS ±0.16 s",
		"a pass overhead stays in the beam (probability 0.95) to 30 days after the window",
		"the antenna follows the prediction: the orbit's error is one of pointing",
		"position uncertainty: pointing_probability left out",
	} {
		if !strings.Contains(out, want) {
			t.Errorf("no %q in\n%s", want, out)
		}
	}
}
