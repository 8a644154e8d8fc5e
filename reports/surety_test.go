package reports

import (
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// surePass is the plain fixture with an orbit's error that is worst at culmination.
func surePass() *Pass {
	p := fixturePass(basicShape())
	f := p.Profile
	for range f.Seconds {
		f.OrbitAlongDeg, f.OrbitTotalDeg = append(f.OrbitAlongDeg, 0.11), append(f.OrbitTotalDeg, 0.12)
		f.DopplerSpreadHz, f.SureErrorDeg = append(f.DopplerSpreadHz, 321), append(f.SureErrorDeg, 0.31)
	}
	f.HalfBeamDeg = 0.35
	p.Surety = &Surety{
		AOS: 0.187, LOS: math.NaN(), MaxElevation: 0.037 * unit.Degree, Existence: 0.8413, MayVanish: true, Basis: "as the test says",
		Direction: [3]unit.Angle{0.02 * unit.Degree, 0.13 * unit.Degree, 0.03 * unit.Degree}, Doppler: [3]unit.Frequency{24, 423, 26},
		Led: true, Unsure: []downlink.Interval{{From: p.Pass.Culmination.Add(-17 * time.Second), To: p.Pass.Culmination.Add(17 * time.Second)}},
		NarrowFrom: time.Date(2026, 3, 12, 4, 5, 6, 0, time.UTC),
	}
	return p
}

// The page, its files and the index tell how sure a pass is; a pass without it tells nothing.
func TestSuretyIsTold(t *testing.T) {
	p := surePass()
	r := &Report{
		Title: "sure", From: firstAOS.Add(-time.Hour), To: firstAOS.Add(time.Hour),
		Keys: []Key{{Spacecraft: p.Spacecraft, Station: p.Site.Name, AOS: p.Pass.AOS}},
		Load: func(context.Context, int) (*Pass, error) { return p, nil },
	}
	var files map[string][]byte
	read := func(suffix string) string {
		t.Helper()
		for name, text := range files {
			if strings.HasPrefix(name, "passes/") && strings.HasSuffix(name, suffix) {
				return string(text)
			}
		}
		t.Fatalf("no file %s", suffix)
		return ""
	}
	files = rendered(t, r, Options{}, stubScript)
	page, index := read(".html"), string(files["index.html"])
	for _, want := range []string{
		"By the orbit’s error AOS ±0.19 s, highest ±0.037° (one standard deviation).",
		"The pass grazes the horizon:</b> it takes place with a probability of 84 %",
		"The beam is too narrow to be sure of</b>", "For a pass overhead it is too narrow from", "2026-03-12 04:05:06 UTC",
		"Pointing by the orbit&#39;s error", "Doppler, plus-minus", "Here the position is uncertain as the test says.",
	} {
		if !strings.Contains(page, want) {
			t.Errorf("no %q on the page", want)
		}
	}
	for _, want := range []string{"<small>AOS ±0.19 s</small>", "takes place with 84 %", "beam unsure for 34 s"} {
		if !strings.Contains(index, want) {
			t.Errorf("no %q in the index", want)
		}
	}
	if head := read(".csv"); !strings.Contains(head, ",orbit_pointing_along_deg,orbit_pointing_deg,doppler_spread_hz,pointing_error_95_deg\n") {
		t.Error("the CSV lacks the columns")
	}
	var head struct {
		PlusMinus struct {
			AOSs   *float64            `json:"aos_plus_minus_s"`
			LOSs   *float64            `json:"los_plus_minus_s"`
			Sure   float64             `json:"existence_probability"`
			Unsure []map[string]string `json:"beam_too_narrow"`
		} `json:"plus_minus"`
	}
	if err := json.Unmarshal([]byte(read(".json")), &head); err != nil {
		t.Fatal(err)
	}
	if m := head.PlusMinus; m.AOSs == nil || *m.AOSs != 0.187 || m.LOSs != nil || m.Sure != 0.8413 || len(m.Unsure) != 1 {
		t.Errorf("JSON tells %+v", m)
	}
	p = fixturePass(basicShape())
	files = rendered(t, r, Options{}, stubScript)
	if page := read(".html"); strings.Contains(page, "orbit’s error") || strings.Contains(page, "plus-minus") {
		t.Error("a pass whose position is taken as exact tells of its error")
	}
}
