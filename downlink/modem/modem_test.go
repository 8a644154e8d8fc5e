package modem

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func TestCatalogueReads(t *testing.T) {
	entries := Catalogue()
	if len(entries) < 100 || len(Modulations()) < 9 {
		t.Fatalf("%d entries, %d modulations", len(entries), len(Modulations()))
	}
	seen := map[string]bool{}
	for _, e := range entries {
		for _, m := range e.Modulations {
			if _, err := FindModulation(m); err != nil {
				t.Errorf("%s: %v", e.Coding, err)
			}
			key := e.Coding + "/" + m + "/" + formatRate(e.ErrorRate)
			if seen[key] {
				t.Errorf("%s stands twice", key)
			}
			seen[key] = true
		}
		if !slices.Contains([]string{"seen-primary", "seen-secondary", "computed"}, e.Provenance) || e.Source == "" {
			t.Errorf("%s: provenance %q, source %q", e.Coding, e.Provenance, e.Source)
		}
	}
}

// No code can do with less than the capacity of its own rate allows: Eb/N0 of at
// least (2^(2r) - 1)/(2r) a real dimension (Shannon 1948; unconstrained input).
func TestNoCodeBeatsCapacity(t *testing.T) {
	for _, e := range Catalogue() {
		for _, name := range e.Modulations {
			m, err := FindModulation(name)
			if err != nil {
				t.Fatal(err)
			}
			perSymbol := float64(m.BitsPerSymbol) * e.CodeRate
			if m.BitsPerSymbol == 1 {
				perSymbol *= 2 // one real dimension only
			}
			least := 10 * math.Log10((math.Pow(2, perSymbol)-1)/perSymbol)
			if e.Metric == "bit error rate" {
				least -= 0.1 // a few wrong bits allow a little more
			}
			if float64(e.RequiredEbN0) < least {
				t.Errorf("%s with %s: %.2f dB, the capacity needs %.2f dB", e.Coding, name, float64(e.RequiredEbN0), least)
			}
		}
	}
}

// Uncoded BPSK: the bit error rate Q(sqrt(2 Eb/N0)) at each threshold (textbooks), to
// the printed thousandth of a decibel, 0.2 % of the rate at 1e-3 to 0.5 % at 1e-7.
func TestUncodedThresholds(t *testing.T) {
	checked := 0
	for _, e := range Catalogue() {
		if e.Coding != "none" || !slices.Contains(e.Modulations, "bpsk") {
			continue
		}
		checked++
		rate := math.Erfc(math.Sqrt(e.RequiredEbN0.Ratio())) / 2
		if math.Abs(rate/e.ErrorRate-1) > 0.005 {
			t.Errorf("%.3f dB: bit error rate %.4g, want %g", float64(e.RequiredEbN0), rate, e.ErrorRate)
		}
	}
	if checked != 5 {
		t.Errorf("%d rows, want 5", checked)
	}
}

func TestFind(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		rate               float64
		want               unit.DB
		source             string
	}{
		{"qpsk", "none", 0, 9.588, "Q(sqrt(2 Eb/N0)) at 1e-5, the first row"},
		{"bpsk", "none", 1e-6, 10.530, "the same at 1e-6"},
		{"qpsk", "ccsds-conv-1-2+rs-255-223", 0, 2.33, "CCSDS 130.1-G-3 figure 6-7, continued to 1e-5"},
		{"qpsk", "ccsds-ldpc-4-5", 0, 3.66, "simulated, k = 1024, codeword error rate 1e-4"},
		{"8psk", "dvb-s2-3-4", 0, unit.DB(7.91 - 10*math.Log10(2.228124)), "ETSI EN 302 307-1 table 13: 7.91 dB at 2.228124 bit/symbol"},
	} {
		e, err := Find(c.modulation, c.coding, c.rate)
		if err != nil || math.Abs(float64(e.RequiredEbN0-c.want)) > 1e-4 {
			t.Errorf("%s with %s (%s): got %v dB, %v, want %v", c.coding, c.modulation, c.source, e.RequiredEbN0, err, c.want)
		}
	}
}

func TestUnknownNamesListTheNearest(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		rate               float64
		what, near         string
	}{
		{"qspk", "none", 0, `modulation: "qspk"`, "qpsk"},
		{"qpsk", "ccsds-conv-1-3", 0, `coding with qpsk: "ccsds-conv-1-3"`, "ccsds-conv-1-2"},
		{"8psk", "ccsds-conv-1-2", 0, "coding with 8psk", "dvb-s2"},
		{"qpsk", "none", 1e-9, "error rate of none with qpsk", "1e-05"},
	} {
		_, err := Find(c.modulation, c.coding, c.rate)
		var unknown *UnknownError
		if !errors.As(err, &unknown) || !strings.Contains(err.Error(), c.what) || !strings.Contains(strings.Join(unknown.Nearest, " "), c.near) {
			t.Errorf("%s with %s: got %v, want %q with %q among the nearest", c.coding, c.modulation, err, c.what, c.near)
		}
	}
}

func TestResolveRates(t *testing.T) {
	need := unit.DB(4.5)
	for _, c := range []struct {
		name            string
		mode            Mode
		rate, symbols   float64 // derived: symbol rate × bits a symbol × code rate
		required        float64
		bandwidthAt1MHz float64
	}{
		{"from symbols", Mode{Modulation: "qpsk", Coding: "ccsds-ldpc-4-5", SymbolRate: 1e7, RequiredEbN0: &need}, 1.6e7, 1e7, 4.5, 1e6 / 1.35 * 1.6},
		{"from bits", Mode{Modulation: "bpsk", Coding: "none", DataRate: 9600}, 9600, 9600, 9.588, 1e6 / 1.35},
		{"concatenated", Mode{Modulation: "qpsk", Coding: "ccsds-conv-1-2+rs-255-223", DataRate: 2e6}, 2e6, 2e6 / (2 * 223.0 / 510), 2.33, 1e6 / 1.35 * 2 * 223 / 510},
		{"our own code", Mode{Modulation: "qpsk", Coding: "house", CodeRate: 0.5, SymbolRate: 1000, RequiredEbN0: &need}, 1000, 1000, 4.5, 1e6 / 1.35},
	} {
		r, err := c.mode.Resolve()
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		b, ok := r.BandwidthRate(1 * unit.Megahertz)
		for _, v := range [][2]float64{{float64(r.InformationRate), c.rate}, {float64(r.Symbols), c.symbols}, {float64(r.Required), c.required}, {float64(b), c.bandwidthAt1MHz}} {
			if math.Abs(v[0]-v[1]) > 1e-9*v[1] {
				t.Errorf("%s: got %.9g, want %.9g", c.name, v[0], v[1])
			}
		}
		if !ok {
			t.Errorf("%s: no rate for a bandwidth", c.name)
		}
	}
}

func TestResolveRefuses(t *testing.T) {
	need, bad := unit.DB(4), 1.5
	for _, c := range []struct {
		name string
		mode Mode
		want string
	}{
		{"unknown coding", Mode{Modulation: "qpsk", Coding: "house"}, "not in the catalogue"},
		{"unknown coding without its rate", Mode{Modulation: "qpsk", Coding: "house", SymbolRate: 100, RequiredEbN0: &need}, "give its code rate or the data rate"},
		{"both rates", Mode{Modulation: "qpsk", Coding: "none", SymbolRate: 100, DataRate: 100}, "give one"},
		{"rate negative", Mode{Modulation: "qpsk", Coding: "none", DataRate: -1}, "data rate: -1 bit/s"},
		{"rate not a number", Mode{Modulation: "qpsk", Coding: "none", DataRate: unit.BitRate(math.NaN())}, "data rate: NaN"},
		{"roll-off 1.5", Mode{Modulation: "qpsk", Coding: "none", DataRate: 1, RollOff: &bad}, "roll-off: 1.5"},
		{"code rate 2", Mode{Modulation: "qpsk", Coding: "none", DataRate: 1, CodeRate: 2}, "code rate: 2"},
	} {
		if _, err := c.mode.Resolve(); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q in it", c.name, err, c.want)
		}
	}
	known := Mode{Modulation: "qpsk", Coding: "house", DataRate: 100, RequiredEbN0: &need}
	if r, err := known.Resolve(); err != nil || r.CodeRate != 0 {
		t.Errorf("a coding of one's own with data rate and threshold: %v, code rate %g", err, r.CodeRate)
	} else if _, ok := r.BandwidthRate(1e6); ok {
		t.Error("a bandwidth gives a rate without a code rate")
	}
}

func FuzzReadEntries(f *testing.F) {
	f.Add(thresholdsCSV[:600])                                                                                                              // good
	f.Add("coding,modulations,code_rate,required_eb_n0,error_rate,metric,provenance,source\nname,,,,,,,\nx,qpsk,1/0,1,1e-5,b,computed,s\n") // a rate by nothing
	f.Add("coding,modulations\n")                                                                                                           // short header
	f.Fuzz(func(t *testing.T, text string) {
		entries, err := readEntries(text)
		if err != nil {
			return
		}
		for _, e := range entries {
			if !(e.CodeRate > 0 && e.CodeRate <= 1) || !(e.ErrorRate > 0) || math.IsNaN(float64(e.RequiredEbN0)) || math.IsInf(float64(e.RequiredEbN0), 0) {
				t.Fatalf("accepted %+v", e)
			}
		}
	})
}
