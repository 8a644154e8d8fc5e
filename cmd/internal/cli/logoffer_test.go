package cli

import (
	"math"
	"os"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/measured"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestOffersCloseTheLoop writes what a fit offers into the scenario and fits again: nothing
// is left, and the margin and the bytes are those that were promised.
func TestOffersCloseTheLoop(t *testing.T) {
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS("../scenario/demo")); err != nil {
		t.Fatal(err)
	}
	t.Chdir(dir)
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--full", "--passes", "6", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	first := fitOf(t, append([]string{"r.csv"}, who...)...)
	text, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	replace := func(old, with string) {
		t.Helper()
		if !strings.Contains(string(text), old) {
			t.Fatalf("%q is not in the demo", old)
		}
		text = []byte(strings.Replace(string(text), old, with, 1))
	}
	offered := func(key string) string {
		t.Helper()
		o := first.offer(key)
		if o == nil {
			t.Fatalf("%s is not offered: %+v", key, first.Offers)
		}
		return o.Value
	}
	replace("extra_losses: [{name: spacecraft pointing, loss_db: 0.5}]", "extra_losses: "+offered("extra_losses")+"\n        oscillator: "+offered("oscillator"))
	replace("- name: Wagtail 1\n", "- name: Wagtail 1\n    time_offset_s: "+offered("time_offset_s")+"\n")
	replace("noise_temperature_k: 55", "noise_temperature_k: "+offered("noise.receiver_chain, low-noise amplifier, noise_temperature_k"))
	mask, _, _ := strings.Cut(offered("horizon_mask"), ", horizon_mask_kind")
	replace("horizon_mask_file: skyline.csv", "horizon_mask: "+mask)
	replace("horizon_mask_kind: geometric", "horizon_mask_kind: apparent")
	if err := os.WriteFile("slantwise.yaml", text, 0o600); err != nil {
		t.Fatal(err)
	}
	again := fitOf(t, append([]string{"r.csv"}, who...)...)
	again.holds(t, map[string]float64{"offset": 0, "added noise temperature": 0, "transmitter offset": 0, "time offset of the elements": 0, "skyline over the known one at 0 deg": 0})
	for _, o := range again.Offers {
		if o.Key != "oscillator" && o.Key != "horizon_mask" {
			t.Errorf("after all was taken, %s: %s is offered", o.Key, o.Value)
		}
	}
	all, mended := first.offer("3 keys"), again.offer("horizon_mask")
	if all == nil || mended == nil {
		t.Fatalf("%+v\n%+v", first.Offers, again.Offers)
	}
	if math.Abs(*all.MarginAfter-*mended.MarginBefore) > 0.02 || math.Abs(*all.BytesAfter / *mended.BytesBefore - 1) > 2e-3 {
		t.Errorf("promised %.2f dB and %.0f B, then %.2f dB and %.0f B", *all.MarginAfter, *all.BytesAfter, *mended.MarginBefore, *mended.BytesBefore)
	}
}

// TestNoiseOffers moves the one figure that each kind of antenna states its noise by.
func TestNoiseOffers(t *testing.T) {
	k, nf, elevated := unit.Temperature(60), unit.DB(1), 12*unit.Degree
	table, err := station.TabulateElevation([][2]float64{{5, 200}, {90, 100}})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		what       string
		antenna    station.Antenna
		added      float64
		key, value string // empty: nothing is offered
		holds      func(a *station.Antenna) bool
	}{
		{"noise temperature", station.Antenna{Noise: &station.Noise{Chain: []station.Stage{{Name: "first", NoiseTemperature: &k}}}}, 25, "noise.receiver_chain, first, noise_temperature_k", "85",
			func(a *station.Antenna) bool { return *a.Noise.Chain[0].NoiseTemperature == 85 }},
		// 1 dB is 290 K (10^0.1 - 1) = 75.1 K
		{"noise figure", station.Antenna{Noise: &station.Noise{Chain: []station.Stage{{Name: "first", NoiseFigure: &nf}}}}, 25, "noise.receiver_chain, first, noise_temperature_k", "100",
			func(a *station.Antenna) bool {
				return a.Noise.Chain[0].NoiseFigure == nil && math.Abs(a.Noise.Chain[0].NoiseTemperature.Kelvins()-100.09) < 0.01
			}},
		{"system noise", station.Antenna{Noise: &station.Noise{SystemTemperature: station.Constant(150)}}, -20, "noise.system_temperature_k", "130",
			func(a *station.Antenna) bool { return a.Noise.SystemTemperature.Value(elevated) == 130 }},
		// the samples' noise of 100 K doubled: 3.01 dB less
		{"measured G/T", station.Antenna{GOverT: station.Constant(20)}, 100, "g_over_t_db_k", "16.99", func(a *station.Antenna) bool { return math.Abs(a.GOverT.Value(elevated)-16.9897) < 1e-4 }},
		{"less than nothing", station.Antenna{Noise: &station.Noise{Chain: []station.Stage{{Name: "first", NoiseTemperature: &k}}}}, -70, "", "", nil},
		{"a table", station.Antenna{Noise: &station.Noise{SystemTemperature: table}}, 25, "", "", nil},
		{"a table of G/T", station.Antenna{GOverT: table}, 25, "", "", nil},
	} {
		f := newGroupFit(&overLog{chosenLink: &chosenLink{antenna: &c.antenna}, points: []measured.Point{{NoiseK: 100}}})
		o, ok := f.noiseOffer("here", c.added)
		if ok != (c.key != "") || ok && (o.key != c.key || o.value != c.value) {
			t.Errorf("%s: %v, %s: %s", c.what, ok, o.key, o.value)
			continue
		}
		if !ok {
			continue
		}
		to := offered{antenna: c.antenna}
		before := c.antenna
		if o.apply(&to); !c.holds(&to.antenna) {
			t.Errorf("%s: the antenna that comes of it is another", c.what)
		}
		if n := before.Noise; n != nil && len(n.Chain) > 0 && c.holds(&before) {
			t.Errorf("%s: the scenario's antenna was changed", c.what)
		}
	}
}

// TestLevelOffers moves what is sent.
func TestLevelOffers(t *testing.T) {
	eirp := unit.LevelDBW(7)
	for _, c := range []struct {
		tx         downlink.Transmitter
		db         float64
		key, value string
	}{
		{downlink.Transmitter{EIRP: &eirp}, -1.5, "eirp_dbw", "5.50"},
		{downlink.Transmitter{Power: unit.LevelDBW(3)}, 1.25, "power_dbw", "4.25"},
		{downlink.Transmitter{ExtraLosses: []downlink.Loss{{Name: "feed, old", Loss: 0.5}}}, -2, "extra_losses", "[{name: \"feed, old\", loss_db: 0.5}, {name: as measured, loss_db: 2.00}]"},
	} {
		f := newGroupFit(&overLog{chosenLink: &chosenLink{transmitter: &c.tx}})
		if o := f.levelOffer("here", c.db); o.key != c.key || o.value != c.value {
			t.Errorf("%g dB: %s: %s, want %s: %s", c.db, o.key, o.value, c.key, c.value)
		}
	}
}

// TestOscillatorOffers states a drift where a log of hours tells one.
func TestOscillatorOffers(t *testing.T) {
	at := time.Date(2026, 9, 15, 12, 0, 0, 0, time.UTC)
	tx := &downlink.Transmitter{Oscillator: &downlink.Oscillator{Offset: 100, Drift: 2.0 / 86400, Epoch: at}}
	for _, c := range []struct {
		drift measured.Parameter
		want  string
	}{
		{measured.Parameter{Unit: "Hz/s", Value: 0.3, Span: 0.1}, "{measured: [{at_utc: 2026-09-15T12:00:00.000Z, offset_hz: 150.0}]}"},
		{measured.Parameter{Unit: measured.HertzPerDay, Value: 3, Span: 4}, "{measured: [{at_utc: 2026-09-15T12:00:00.000Z, offset_hz: 150.0}]}"},
		{measured.Parameter{Unit: measured.HertzPerDay, Value: -7.5, Span: 4}, "{offset_hz: 150.0, drift_hz_per_day: -5.50, at_utc: 2026-09-15T12:00:00.000Z}"},
	} {
		f := newGroupFit(&overLog{chosenLink: &chosenLink{transmitter: tx}})
		f.frequency = &measured.Fit{Middle: at, Parameters: []measured.Parameter{{Value: 50}, {}, c.drift}}
		if o := f.oscillatorOffer("here"); o.value != c.want || o.had != "100.0 Hz then" {
			t.Errorf("%+v: %s, as it is %s; want %s", c.drift, o.value, o.had, c.want)
		}
	}
}
