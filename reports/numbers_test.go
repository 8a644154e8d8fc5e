package reports

import (
	"math"
	"math/rand/v2"
	"strconv"
	"testing"
	"time"
)

// strconv is the slow plain version: both may differ by one unit in the last place,
// since scaling rounds once more.
func TestAppendFixed(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 200_000 {
		decimals := r.IntN(7)
		v := (r.Float64() - 0.5) * math.Pow(10, float64(r.IntN(12)-3))
		got := string(appendFixed(nil, v, decimals))
		want := strconv.FormatFloat(v, 'f', decimals, 64)
		if got == want || want == "-"+got {
			continue
		}
		a, errA := strconv.ParseFloat(got, 64)
		b, _ := strconv.ParseFloat(want, 64)
		if errA != nil || math.Abs(a-v) > math.Abs(b-v)+1e-9*math.Abs(v) {
			t.Fatalf("appendFixed(%v, %d) = %s, strconv says %s", v, decimals, got, want)
		}
	}
	for _, c := range []struct {
		v        float64
		decimals int
		want     string
	}{
		{0, 0, "0"}, {-0.0004, 3, "0.000"}, {-0.0005, 3, "-0.001"}, {1e20, 1, "100000000000000000000.0"}, {-12.34, 1, "-12.3"},
		{9.996, 2, "10.00"}, {0.05, 2, "0.05"}, {1234567890123, 0, "1234567890123"},
	} {
		if got := string(appendFixed(nil, c.v, c.decimals)); got != c.want {
			t.Errorf("appendFixed(%v, %d) = %s, want %s", c.v, c.decimals, got, c.want)
		}
	}
}

func TestWordsForNumbers(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{withUnit(812_400_000, byteScales), "812 MB"}, {withUnit(1.2e9, byteScales), "1.20 GB"}, {withUnit(0, byteScales), "0 B"},
		{withUnit(9600, rateScales), "9.60 kbit/s"}, {withUnit(45.6e6, rateScales), "45.6 Mbit/s"}, {withUnit(math.NaN(), rateScales), "–"},
		{withUnit(137.42e6, freqScales), "137 MHz"}, {fixed(-3.14159, 2), "−3.14"}, {fixed(math.Inf(1), 2), "–"},
		{span(41 * time.Second), "41 s"}, {span(548 * time.Second), "9 min 08 s"}, {span(3*time.Hour + 299*time.Second), "3 h 05 min"},
		{span(59*time.Second + 700*time.Millisecond), "1 min 00 s"},
		{age(31 * time.Hour), "31.0 h"}, {age(101 * time.Hour), "4.2 days"}, {age(-20 * time.Minute), "−20 min"},
		{compass(0), "N"}, {compass(359), "N"}, {compass(121), "ESE"}, {compass(-90), "W"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
}

// Summer time in the European Union begins on the last Sunday of March at 01:00 UTC
// (Directive 2000/84/EC).
func TestOffsetsFollowTheZone(t *testing.T) {
	zone, err := time.LoadLocation("Europe/Berlin")
	if err != nil {
		t.Skip("no time zone data here:", err)
	}
	from := time.Date(2026, 3, 29, 0, 30, 0, 0, time.UTC)
	got := offsets(from, from.Add(time.Hour), zone, midnight(from))
	want := []offsetAt{{1800, 3600, "CET"}, {3600, 7200, "CEST"}}
	if len(got) != 2 || got[0] != want[0] || got[1] != want[1] {
		t.Errorf("got %v, want %v", got, want)
	}
	if text := localText(from.Add(22*time.Hour), zone, clockLayout); text != "2026-03-30 00:30:00 CEST" {
		t.Errorf("the local time on the next day is %q", text)
	}
}

func TestClockStepIsRound(t *testing.T) {
	for _, c := range []struct{ length, want float64 }{{8, 1}, {90, 20}, {630, 120}, {7200, 1200}, {259200, 43200}, {30 * 86400, 4 * 86400}} {
		if got := clockStep(c.length); got != c.want {
			t.Errorf("clockStep(%v) = %v, want %v", c.length, got, c.want)
		}
	}
}

func TestPageNames(t *testing.T) {
	at := time.Date(2026, 3, 10, 10, 42, 31, 0, time.UTC)
	keys := []Key{
		{Spacecraft: "Wagtail 1", Station: "Skerry Point", AOS: at},
		{Spacecraft: "WAGTAIL-1", Station: "skerry/point", AOS: at}, // the same once it is safe
		{Spacecraft: "../../etc", Station: "..", AOS: at},
		{Spacecraft: "Ærø Ünit", Station: "日本", AOS: at},
		{Spacecraft: "a very long name that goes on and on, longer than any file name should be allowed to", Station: "S", Link: "X-band to dish", AOS: at},
	}
	want := []string{
		"wagtail-1-skerry-point-20260310t104231z",
		"wagtail-1-skerry-point-20260310t104231z-2",
		"etc-unnamed-20260310t104231z",
		"r-unit-unnamed-20260310t104231z",
		"a-very-long-name-that-goes-on-and-on-longer-than-s-x-band-to-dish-20260310t104231z",
	}
	for i, got := range pageNames(keys) {
		if got != want[i] {
			t.Errorf("%q over %q: got %s, want %s", keys[i].Spacecraft, keys[i].Station, got, want[i])
		}
	}
}

func TestThinnedKeepsWhatTheTextSays(t *testing.T) {
	p := fixturePass(basicShape())
	kept := thinned(p, 40)
	if len(kept) > 45 {
		t.Errorf("%d samples kept, want about 40", len(kept))
	}
	have := map[int]bool{}
	for k, i := range kept {
		have[i] = true
		if k > 0 && kept[k-1] >= i {
			t.Fatalf("the samples do not rise at %d", k)
		}
	}
	for _, e := range events(p) {
		if !have[e.sample] {
			t.Errorf("%s is not among the kept samples", e.name)
		}
	}
	if least := nearestSample(p.Profile, p.Radio.Least.Time); !have[least] {
		t.Error("the least margin is not among the kept samples")
	}
}

func BenchmarkAppendFixed(b *testing.B) {
	b.ReportAllocs()
	dst := make([]byte, 0, 64)
	for b.Loop() {
		dst = appendFixed(dst[:0], -123.4567, 3)
	}
}
