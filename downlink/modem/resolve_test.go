package modem

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

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
		for _, v := range [][2]float64{{float64(r.InformationRate), c.rate}, {float64(r.Symbols), c.symbols}, {float64(b), c.bandwidthAt1MHz}} {
			if math.Abs(v[0]-v[1]) > 1e-9*v[1] {
				t.Errorf("%s: got %.9g, want %.9g", c.name, v[0], v[1])
			}
		}
		if !ok {
			t.Errorf("%s: no rate for a bandwidth", c.name)
		}
		within(t, c.name+": required Eb/N0", float64(r.Required), c.required, 5.01e-4) // half of the last printed digit
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

// Pilots of DVB-S2, QPSK: 22 blocks of 36 symbols beside 361 slots of 90 (360 slots of
// data, and one of header; ETSI EN 302 307-1 section 5.5): the rate falls by
// 32490/33282, and Eb/N0 rises by as much.
func TestResolvePilots(t *testing.T) {
	mode := Mode{Modulation: "qpsk", Coding: "dvb-s2-1-2", SymbolRate: 5e6}
	plain, err := mode.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	mode.Pilots = true
	with, err := mode.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	share := 32490.0 / 33282
	within(t, "information rate", float64(with.InformationRate/plain.InformationRate), share, 1e-12)
	within(t, "net rate", float64(with.NetRate/plain.NetRate), share, 1e-12)
	within(t, "required Eb/N0", float64(with.Required-plain.Required), -10*math.Log10(share), 1e-9)
	within(t, "net rate without pilots", float64(plain.NetRate), 5e6*0.988858, 5e6*5.01e-7) // table 13
	mode.Coding = "ccsds-ldpc-1-2"
	if _, err := mode.Resolve(); err == nil || !strings.Contains(err.Error(), "has no pilots") {
		t.Errorf("pilots in CCSDS: %v", err)
	}
}

// The mode's net rate: a CCSDS 131.0-B frame of 5 × 223 octets, 48 bits of them the
// primary header, sent as 5 × 255 octets with 32 bits of marker, all twice.
func TestResolveNetRate(t *testing.T) {
	r, err := Mode{Modulation: "qpsk", Coding: "ccsds-conv-1-2+rs-255-223", SymbolRate: 1e6}.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	within(t, "net rate", float64(r.NetRate), 1e6*(8920-48)/10232, 1e-6)
	within(t, "information rate", float64(r.InformationRate), 1e6*223.0/255, 1e-6)
}

func TestResolveInAnotherCatalogue(t *testing.T) {
	own, err := Standard().With(Row{
		Modulation: Modulation{Name: "qpsk", BitsPerSymbol: 2, What: "quaternary phase-shift keying"},
		Coding:     Coding{Name: "house", RateText: "1/2", Rate: 0.5},
		Thresholds: []Threshold{{EbN0: 3, ErrorRate: 1e-5, Metric: BitErrors, Provenance: "user", Source: "measured"}},
	})
	if err != nil {
		t.Fatal(err)
	}
	r, err := Mode{Modulation: "qpsk", Coding: "house", SymbolRate: 1e6, Catalogue: own}.Resolve()
	if err != nil || r.Required != 3 || r.InformationRate != 1e6 || r.RequiredSource != "measured" {
		t.Errorf("%+v, %v", r, err)
	}
	if _, err := (Mode{Modulation: "qpsk", Coding: "house", SymbolRate: 1e6}).Resolve(); err == nil {
		t.Error("the standard catalogue has the user's coding")
	}
}
