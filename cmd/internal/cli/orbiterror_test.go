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

// passes tells the plus-minus in the CSV by a flag alone, in the JSON and the table where the
// scenario states it, and takes the default rule where it is asked for and not stated.
func TestPassesPlusMinus(t *testing.T) {
	ask := []string{"passes", "--spacecraft", "Wagtail 1", "--station", "Skerry Point"}
	const more = ",aos_plus_minus_s,los_plus_minus_s,max_elevation_plus_minus_deg,existence_probability"
	_, plain, _ := invoke(t, append(ask, "--format", "csv")...)
	_, asked, told := invoke(t, append(ask, "--format", "csv", "--plus-minus")...)
	before, after := strings.Split(plain, "\n"), strings.Split(asked, "\n")
	if len(before) != len(after) || after[0] != before[0]+more || !strings.Contains(told, "common practice") {
		t.Fatalf("columns %s; told %s", after[0], told)
	}
	for i := 1; i < len(after)-1; i++ {
		if !strings.HasPrefix(after[i], before[i]+",0.") {
			t.Errorf("row %d: %s", i, after[i])
		}
	}
	if _, out, _ := invoke(t, append(ask, "--format", "json")...); strings.Contains(out, "plus_minus") {
		t.Error("the JSON tells of what the scenario does not state")
	}
	uncertainDemo(t, "3")
	_, stated, _ := invoke(t, append(ask, "--format", "csv")...)
	if stated != plain {
		t.Error("the CSV changes without its flag")
	}
	var list struct {
		Passes []struct {
			AOS  float64 `json:"aos_plus_minus_s"`
			LOS  float64 `json:"los_plus_minus_s"`
			Sure float64 `json:"existence_probability"`
		} `json:"passes"`
	}
	_, out, _ := invoke(t, append(ask, "--format", "json")...)
	if err := json.Unmarshal([]byte(out), &list); err != nil {
		t.Fatal(err)
	}
	for i, p := range list.Passes {
		if math.Abs(p.AOS-0.395) > 0.1 || math.Abs(p.LOS-0.395) > 0.1 || p.Sure < 0.99 {
			t.Errorf("pass %d: ±%g s, ±%g s, takes place with %g; 3 km at 7.6 km/s are 0.395 s", i, p.AOS, p.LOS, p.Sure)
		}
	}
	if _, table, _ := invoke(t, ask...); !strings.Contains(table, "takes place %") {
		t.Errorf("no plus-minus in the table\n%s", table)
	}
}

// A low pass of an orbit whose plane is known to 500 km alone may not take place, and
// budget says so.
func TestGrazingPassIsTold(t *testing.T) {
	uncertainDemo(t, "0")
	t.Setenv("SLANTWISE_POSITION_UNCERTAINTY_ACROSS_KM", "500")
	_, out, _ := invoke(t, budget("--pass", "2026-09-15T16:58:00Z")...)
	if !strings.Contains(out, "the pass grazes the horizon") || !strings.Contains(out, "takes place with a probability of 0.") {
		t.Errorf("nothing of a grazing pass in\n%s", out)
	}
}

// pointing and budget tell the same of one instant.
func TestPointingPlusMinus(t *testing.T) {
	uncertainDemo(t, "3")
	ask := []string{"pointing", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--from", "2026-09-15T00:55:00Z", "--to", "2026-09-15T00:55:00Z"}
	_, out, _ := invoke(t, append(ask, "--format", "json")...)
	var p struct {
		Rows []struct {
			Along   float64 `json:"pointing_along_plus_minus_deg"`
			Total   float64 `json:"pointing_plus_minus_deg"`
			Doppler float64 `json:"doppler_plus_minus_hz"`
		} `json:"rows"`
	}
	if err := json.Unmarshal([]byte(out), &p); err != nil {
		t.Fatal(err)
	}
	b := askSureness(t, budget("--at", "2026-09-15T00:55:00Z")...)
	if r := p.Rows[0]; math.Abs(r.Along-*b.Samples[0].Along) > 1e-6 || math.Abs(r.Doppler-*b.Samples[0].Doppler) > 1e-2 || r.Total < r.Along {
		t.Errorf("pointing has ±%g deg and ±%g Hz, budget ±%g deg and ±%g Hz", r.Along, r.Doppler, *b.Samples[0].Along, *b.Samples[0].Doppler)
	}
	_, csv, _ := invoke(t, append(ask, "--format", "csv")...)
	if strings.Contains(csv, "plus_minus") {
		t.Error("the CSV has the columns without their flag")
	}
	_, csv, _ = invoke(t, append(ask, "--format", "csv", "--plus-minus")...)
	if head, _, _ := strings.Cut(csv, "\n"); !strings.HasSuffix(head, ",sunlit,pointing_along_plus_minus_deg,pointing_plus_minus_deg,doppler_plus_minus_hz") {
		t.Errorf("columns %s", head)
	}
}
