package rateplan

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

func rowsOf(t testing.TB, names ...[2]string) []modem.Row {
	t.Helper()
	var out []modem.Row
	for _, n := range names {
		r, err := modem.Standard().Find(n[0], n[1])
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, *r)
	}
	return out
}

// The best symbol rate against a dense scan of rates on random tracks: none of the scan
// is better, and Planner.Common brings as much in the mode that was found.
func TestBestRateAgainstAScan(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	rows := rowsOf(t, [2]string{"qpsk", "ccsds-ldpc-1-2"}, [2]string{"qpsk", "ccsds-ldpc-4-5"}, [2]string{"qpsk", "none"})
	for i := range 150 {
		var tracks []Track
		for range 1 + r.IntN(2) {
			track := overhead(12 + r.IntN(20))
			for k := range track.CN0DBHz {
				track.CN0DBHz[k] = 50 + 12*r.Float64()
				if r.IntN(15) == 0 {
					track.CN0DBHz[k] = math.NaN()
				}
			}
			tracks = append(tracks, track)
		}
		relock := time.Duration(r.IntN(3)) * time.Second
		f := Family{Rows: rows, Low: 10e3, High: 1e6, RollOff: 0.35, ImplementationLoss: 1, RequiredMargin: 2}
		if r.IntN(2) == 0 {
			f.Band = 200e3
		}
		mode, bytes, err := f.Best(tracks, 0.5, relock)
		if err != nil {
			t.Fatal(err)
		}
		if !(bytes > 0) {
			t.Fatalf("case %d: nothing comes down", i)
		}
		if mode.SymbolRate < f.Low || mode.SymbolRate > f.High || f.Band > 0 && mode.Bandwidth > f.Band*(1+1e-12) {
			t.Fatalf("case %d: %+v is outside of the family", i, mode)
		}
		common := commonBytes(t, []Mode{mode}, tracks, relock)
		if math.Abs(common-bytes) > 1e-9*bytes {
			t.Fatalf("case %d: %g bytes, the planner finds %g in that mode", i, bytes, common)
		}
		scan, err := f.Modes(400)
		if err != nil {
			t.Fatal(err)
		}
		if other := commonBytes(t, scan, tracks, relock); other > bytes*(1+1e-9) {
			t.Fatalf("case %d: %g bytes, a scan finds %g", i, bytes, other)
		}
	}
}

func commonBytes(t *testing.T, modes []Mode, tracks []Track, relock time.Duration) float64 {
	t.Helper()
	p, err := NewPlanner(modes, Rules{Guard: 0.5, Relock: relock})
	if err != nil {
		t.Fatal(err)
	}
	c, err := p.Common(tracks)
	if err != nil {
		t.Fatal(err)
	}
	return c.Bytes
}

// Of a list, the rate must be one of the list.
func TestBestOfAList(t *testing.T) {
	f := Family{Rows: rowsOf(t, [2]string{"qpsk", "ccsds-ldpc-1-2"}), Rates: []unit.Frequency{1e6, 4e6, 2e6}, RollOff: 0.35}
	track := overhead(721)
	mode, bytes, err := f.Best([]Track{track}, 0, 0)
	if err != nil || !slices.Contains(f.Rates, mode.SymbolRate) {
		t.Fatalf("%+v, %v", mode, err)
	}
	for _, rate := range f.Rates {
		f.Rates = []unit.Frequency{rate}
		if _, other, err := f.Best([]Track{track}, 0, 0); err != nil || other > bytes {
			t.Errorf("%g baud brings %g, the best of the list %g (%v)", float64(rate), other, bytes, err)
		}
	}
}

// Dropping what another mode surpasses changes no plan.
func TestUnsurpassedLosesNothing(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for i := range 400 {
		modes, rules, track := randomCase(r)
		all, err := NewPlanner(modes, rules)
		if err != nil {
			t.Fatal(err)
		}
		few, err := NewPlanner(Unsurpassed(modes), rules)
		if err != nil {
			t.Fatal(err)
		}
		a, errA := all.Plan(track)
		b, errB := few.Plan(track)
		if errA != nil || errB != nil || math.Abs(a.Bytes-b.Bytes) > 1e-12 {
			t.Fatalf("case %d: %g and %g bytes, %v %v", i, a.Bytes, b.Bytes, errA, errB)
		}
	}
}

func TestFamilyRefuses(t *testing.T) {
	good := Family{Rows: rowsOf(t, [2]string{"qpsk", "none"}), Low: 1e3, High: 1e6}
	track := []Track{overhead(10)}
	for want, change := range map[string]func(*Family){
		"no coding to choose from":       func(f *Family) { f.Rows = nil },
		"lowest symbol rate: 0 baud":     func(f *Family) { f.Low = 0 },
		"at least the lowest":            func(f *Family) { f.High = 1 },
		"symbol rate: NaN baud":          func(f *Family) { f.Rates = []unit.Frequency{unit.Frequency(math.NaN())} },
		"roll-off: 2":                    func(f *Family) { f.RollOff = 2 },
		"allotted bandwidth: -1 Hz":      func(f *Family) { f.Band = -1 },
		"implementation loss: -1 dB":     func(f *Family) { f.ImplementationLoss = -1 },
		"the Eb/N0 for a bit error rate": func(f *Family) { f.ErrorRate = 1e-14 },
	} {
		f := good
		change(&f)
		if _, _, err := f.Best(track, 0, 0); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("Best: %v, want %q", err, want)
		}
		if _, err := f.Modes(3); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("Modes: %v, want %q", err, want)
		}
	}
	if _, err := good.Modes(1); err == nil || !strings.Contains(err.Error(), "steps of the symbol rate: 1") {
		t.Errorf("one step: %v", err)
	}
	narrow := good
	narrow.Rates, narrow.Band = []unit.Frequency{5e6, 2e6}, 1e6
	if _, err := narrow.Modes(3); err == nil || !strings.Contains(err.Error(), "no symbol rate of the plan fits into the band of 1 MHz; give lower ones") {
		t.Errorf("all too fast: %v", err)
	}
	if _, _, err := good.Best(nil, -1, 0); err == nil || !strings.Contains(err.Error(), "no passes") || !strings.Contains(err.Error(), "guard: -1 dB") {
		t.Errorf("no passes and a negative guard: %v", err)
	}
}

func BenchmarkBest(b *testing.B) {
	f := Family{Rows: modem.Standard().Rows(), Low: 1e5, High: 1e8, Band: 5e7, RollOff: 0.35}
	tracks := []Track{overhead(721)}
	b.ReportAllocs()
	for b.Loop() {
		if _, _, err := f.Best(tracks, 0.5, 2*time.Second); err != nil {
			b.Fatal(err)
		}
	}
}
