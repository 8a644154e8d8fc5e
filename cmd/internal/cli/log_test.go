package cli

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"
)

// TestLogFitFindsWhatWasPutIn fits an invented log, whose differences are known.
func TestLogFitFindsWhatWasPutIn(t *testing.T) {
	t.Chdir(t.TempDir())
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--full", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	got := fitOf(t, append([]string{"r.csv"}, who...)...)
	got.holds(t, map[string]float64{"offset": rehearsalLevelDB, "transmitter offset": rehearsalOffsetHz, "time offset of the elements": rehearsalLate.Seconds(), "added noise temperature": rehearsalAddedK})
	if o := got.offer("oscillator"); o == nil || !strings.Contains(o.Value, "{measured: [{at_utc: ") || o.BytesAfter != nil {
		t.Errorf("oscillator: %+v", o)
	}
	for _, key := range []string{"extra_losses", "noise.receiver_chain, low-noise amplifier, noise_temperature_k", "2 keys"} {
		o := got.offer(key)
		if o == nil || o.BytesAfter == nil || !(*o.BytesAfter < *o.BytesBefore) || !(*o.MarginAfter < *o.MarginBefore-0.5) {
			t.Errorf("%s: %+v, want fewer bytes and less margin", key, o)
		}
	}
	// The margin falls by what was put in as loss.
	if o := got.offer("extra_losses"); o != nil && math.Abs(*o.MarginAfter-*o.MarginBefore-rehearsalLevelDB) > 0.15 {
		t.Errorf("margin %g, then %g: not %g dB", *o.MarginBefore, *o.MarginAfter, rehearsalLevelDB)
	}
}

// logFit is the answer of log fit in JSON.
type logFit struct {
	Fits []struct {
		Quantity, Parameter, Spacecraft string
		Value                           float64
		PlusMinus                       float64 `json:"plus_minus"`
	}
	Offers []logOffer
	Notes  []string
}

type logOffer struct {
	Key, Value   string
	MarginBefore *float64 `json:"margin_before_db"`
	MarginAfter  *float64 `json:"margin_after_db"`
	BytesBefore  *float64 `json:"bytes_before"`
	BytesAfter   *float64 `json:"bytes_after"`
}

func fitOf(t *testing.T, args ...string) *logFit {
	t.Helper()
	code, out, errOut := invoke(t, append([]string{"log", "fit", "--format", "json"}, args...)...)
	if code != ExitAnswer {
		t.Fatal(errOut)
	}
	got := &logFit{}
	if err := json.Unmarshal([]byte(out), got); err != nil {
		t.Fatal(err)
	}
	return got
}

func (f *logFit) offer(key string) *logOffer {
	for i := range f.Offers {
		if f.Offers[i].Key == key {
			return &f.Offers[i]
		}
	}
	return nil
}

// holds asks that the first parameter of each name holds what was put in.
func (f *logFit) holds(t *testing.T, want map[string]float64) {
	t.Helper()
	for _, p := range f.Fits {
		if w, ok := want[p.Parameter]; ok && math.Abs(p.Value-w) > p.PlusMinus {
			t.Errorf("%s: %g ± %g, and %g was put in", p.Parameter, p.Value, p.PlusMinus, w)
		}
		delete(want, p.Parameter)
	}
	if len(want) > 0 {
		t.Errorf("%v is not in %+v", want, f.Fits)
	}
}

// TestLogFitOfTheLogbook fits passes of the logbook together, and the skyline with them.
func TestLogFitOfTheLogbook(t *testing.T) {
	t.Chdir(t.TempDir())
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	for _, call := range [][]string{{"rehearse", "--full", "--into", "one.csv"}, {"rehearse", "--full", "--passes", "5", "--pass", "2026-09-15T01:30:00Z", "--into", "more.csv"}, {"add", "one.csv"}, {"add", "more.csv"}} {
		if code, _, errOut := invoke(t, append(append([]string{"log"}, call...), who...)...); code != ExitAnswer {
			t.Fatalf("%v: %s", call, errOut)
		}
	}
	got := fitOf(t, "--entry", "1,2")
	got.holds(t, map[string]float64{"offset": rehearsalLevelDB, "transmitter offset": rehearsalOffsetHz, "added noise temperature": rehearsalAddedK, "skyline over the known one at 0 deg": rehearsalHorizonDeg})
	if o := got.offer("horizon_mask"); o == nil || o.BytesAfter == nil || !(*o.BytesAfter < *o.BytesBefore) || !strings.HasSuffix(o.Value, "horizon_mask_kind: apparent") {
		t.Errorf("a higher skyline: %+v, want fewer bytes", o)
	}
	if all := fitOf(t, "--entry", "all"); len(all.Fits) != len(got.Fits) || all.Fits[0] != got.Fits[0] {
		t.Errorf("all: %+v, want what 1 and 2 give", all.Fits)
	}
	code, out, errOut := invoke(t, "log", "fit", "--entry", "1", "--format", "csv", "--offers")
	if code != ExitAnswer || !strings.HasPrefix(out, "place,key,value,had,margin_before_db,") {
		t.Errorf("exit code %d, %s\n%s", code, errOut, out)
	}
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"--entry", "7"}, `no pass "7"`}, {[]string{"--entry", "1", "one.csv"}, "one FILE"}, {nil, "one FILE"},
		{[]string{"--entry", "1", "--station", "Cairn Field"}, "leave --spacecraft and --station out"}, {[]string{"--entry", "1", "--mask-points", "2.5"}, "whole number"},
	} {
		if code, _, errOut := invoke(t, append([]string{"log", "fit"}, c.args...)...); code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: exit code %d, %s, want %q in it", c.args, code, errOut, c.want)
		}
	}
}

// TestLogTableByTheScenario reads a table whose columns the scenario names.
func TestLogTableByTheScenario(t *testing.T) {
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS("../scenario/demo")); err != nil {
		t.Fatal(err)
	}
	t.Chdir(dir)
	text, err := os.ReadFile("slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text = append(text, `
measurements:
  - name: modem
    separator: ";"
    time_column: When
    columns: [{column: Ratio, holds: cn0_dbhz, add: 1}, {column: Tone, holds: frequency_khz}]
`...)
	who := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"}
	if code, _, errOut := invoke(t, append([]string{"log", "rehearse", "--into", "r.csv"}, who...)...); code != ExitAnswer {
		t.Fatal(errOut)
	}
	made, err := os.ReadFile("r.csv")
	if err != nil {
		t.Fatal(err)
	}
	other := strings.NewReplacer(",", ";", "utc,cn0_dbhz,frequency_hz", "When;Ratio;Tone").Replace(string(made))
	for name, data := range map[string][]byte{"slantwise.yaml": text, "m.csv": []byte(other)} {
		if err := os.WriteFile(name, data, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	code, _, errOut := invoke(t, append([]string{"log", "fit", "m.csv"}, who...)...)
	if code != ExitInput || !strings.Contains(errOut, "frequency_hz") { // Tone holds Hz, not kHz: out of range or far off
		t.Errorf("a table in another unit: exit code %d, %s", code, errOut)
	}
	if err := os.WriteFile("slantwise.yaml", []byte(strings.Replace(string(text), "frequency_khz", "frequency_hz", 1)), 0o600); err != nil {
		t.Fatal(err)
	}
	code, out, errOut := invoke(t, append([]string{"log", "fit", "m.csv", "--format", "csv"}, who...)...)
	if code != ExitAnswer || !strings.Contains(errOut, "m.csv is read as modem") || !strings.Contains(out, "cn0_dbhz,offset,-0.5") {
		t.Errorf("exit code %d, %s\n%s", code, errOut, out)
	}
	if code, _, errOut = invoke(t, append([]string{"log", "fit", "m.csv", "--table", "moden"}, who...)...); code != ExitInput || !strings.Contains(errOut, "modem") {
		t.Errorf("an unknown table: exit code %d, %s", code, errOut)
	}
}
