package reports

import (
	"context"
	"encoding/json"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// withUplink adds an invented uplink to a pass: its margin is 30 dB less a decibel for
// each 100 km.
func withUplink(p *Pass) *Pass {
	u := Uplink{Name: "Tele & command", Antenna: "dish", Mode: "slow", ModeText: "bpsk, none", Frequency: 2065 * unit.Megahertz, DataRate: 4000, RequiredMarginDB: 6,
		Least: Moment{Value: math.NaN()}, Greatest: Moment{Value: math.NaN()}}
	f := p.Profile
	for i, km := range f.RangeKm {
		m := 30 - km/100
		u.ReceivedDBm, u.MarginDB = append(u.ReceivedDBm, m-110), append(u.MarginDB, m)
		u.SendShiftHz = append(u.SendShiftHz, f.RangeRateKmS[i]*6900)
		at := f.Start.Add(time.Duration(f.Seconds[i] * 1e9))
		if !(m >= u.Least.Value) {
			u.Least = Moment{m, at}
		}
		if !(m <= u.Greatest.Value) {
			u.Greatest = Moment{m, at}
		}
	}
	u.Works = []downlink.Interval{{From: p.Pass.AOS.Add(20 * time.Second), To: p.Pass.LOS}}
	u.AOS = downlink.Budget{Time: p.Pass.AOS, Margin: 7.25, Terms: []downlink.Term{{TermInfo: downlink.TermInfo{Name: "transmit line loss", Sign: -1, Unit: "dB"}, Value: 1.25}}}
	u.Culmination, u.LeastMargin = u.AOS, u.AOS
	u.Radiation = &Radiation{
		Radiation: station.Radiation{Fed: unit.LevelDBW(10), EIRP: unit.LevelDBW(46), NearFieldEnd: 23.5, FarFieldFrom: 188, NearFieldMost: 3.72},
		At:        []Density{{1000, 0.003168}}, Caution: "Nobody may stand in the beam; no figure here is called safe.",
	}
	p.Uplinks = []Uplink{u}
	return p
}

// TestUplinkOnThePage: the answer says when commanding works, the charts and the numbers
// are there, and so is the caution; with and without a downlink.
func TestUplinkOnThePage(t *testing.T) {
	for _, bare := range []bool{false, true} {
		s := basicShape()
		s.noRadio = bare
		p := withUplink(fixturePass(s))
		r := fixtureReport(0)
		r.Keys = []Key{{Spacecraft: "Wagtail 1", Station: "Skerry Point", AOS: firstAOS}}
		r.Load = func(context.Context, int) (*Pass, error) { return p, nil }
		files := rendered(t, r, Options{}, stubScript)
		const stem = "passes/wagtail-1-skerry-point-20260310t104231z"
		page := string(files[stem+".html"])
		for _, want := range []string{
			"Commanding, Tele &amp; command", "works for 9 min 40 s", "10:42:51 to 10:52:31", `id="uplink-margin-1"`, `id="uplink-shift-1"`,
			"2065.000 MHz from dish", "power density in the near field, at most", "<td>3.720</td>", "no figure here is called safe", "−1.25",
		} {
			if !strings.Contains(page, want) {
				t.Errorf("bare %v: the page lacks %s", bare, want)
			}
		}
		head, _, _ := strings.Cut(string(files[stem+".csv"]), "\n")
		if want := ",uplink_tele_command_received_power_dbm,uplink_tele_command_margin_db,uplink_tele_command_send_shift_hz"; !strings.HasSuffix(head, want) {
			t.Errorf("bare %v: header %s", bare, head)
		}
		var got struct {
			Uplinks []struct {
				Works     []struct{ From_utc string }
				Radiation struct {
					Most float64 `json:"near_field_most_w_m2"`
				}
			}
			Samples map[string]json.RawMessage
		}
		if err := json.Unmarshal(files[stem+".json"], &got); err != nil {
			t.Fatal(err)
		}
		var margins []float64
		if err := json.Unmarshal(got.Samples["uplink_tele_command_margin_db"], &margins); err != nil {
			t.Fatal(err)
		}
		if len(got.Uplinks) != 1 || got.Uplinks[0].Radiation.Most != 3.72 || len(margins) != len(p.Profile.Seconds) || slices.Max(margins) < 20 {
			t.Errorf("bare %v: JSON holds %+v with %d margins", bare, got.Uplinks, len(margins))
		}
	}
}

// TestUplinkOfWrongLength is refused: a chart would end early.
func TestUplinkOfWrongLength(t *testing.T) {
	p := withUplink(fixturePass(basicShape()))
	p.Uplinks[0].MarginDB = p.Uplinks[0].MarginDB[1:]
	if err := checkPass(p); err == nil || !strings.Contains(err.Error(), "uplink \"Tele & command\"") {
		t.Errorf("got %v", err)
	}
}
