package modem

import (
	"errors"
	"math"
	"testing"

	"slantwise/orbit/unit"
)

// Net rates worked out from the frames of the standards: user bits over all symbols of a
// frame.
func TestNetEfficiency(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		pilots             bool
		want               float64
		source             string
	}{
		{"qpsk", "ccsds-rs-255-223", false, 2.0 * (5*223*8 - 48) / (5*255*8 + 32), "CCSDS 131.0-B, depth 5, 32-bit marker; 132.0-B primary header of 6 octets"},
		{"bpsk", "ccsds-conv-7-8", false, (8920.0 - 48) / (8952 * 8 / 7.0), "marker convolved too"},
		{"bpsk", "ccsds-turbo-1-6-k8920", false, (8920.0 - 48) / (6*8924 + 192), "CCSDS 131.0-B: 4 tail bits, marker of 192 bits"},
		{"qpsk", "ccsds-ldpc-4-5-k16384", false, 2 * (16384.0 - 48) / (20480 + 64), "CCSDS 131.0-B: marker of 64 bits"},
		{"qpsk", "ccsds-ldpc-7-8", false, 2 * (7136.0 - 48) / (8160 + 32), "CCSDS 131.0-B: marker of 32 bits"},
		{"32apsk", "dvb-s2-9-10", false, 4.453027, "ETSI EN 302 307-1 table 13"},
		{"32apsk", "dvb-s2-9-10", true, 4.453027 * 145 * 90 / (145*90 + 8*36), "144 slots hold 8 pilot blocks, none after the last"},
		{"8psk", "dvb-s2-3-5", true, 1.779991 * 241 * 90 / (241*90 + 14*36), "240 slots hold 14 pilot blocks"},
		{"gfsk", "ax25", false, 2048.0 / (2192 + 51), "256 octets of data; 18 of header and checksum; two flags and 35 stuffed bits, common practice"},
	} {
		r := find(t, c.modulation, c.coding)
		within(t, r.Name()+": "+c.source, r.NetEfficiency(c.pilots), c.want, 5e-7)
	}
}

// Rate to symbols and back, for every row.
func TestNetRateAndBack(t *testing.T) {
	for _, r := range Standard().Rows() {
		for _, pilots := range []bool{false, true} {
			net, err := r.NetRate(123456.7, pilots)
			if err != nil {
				t.Fatal(err)
			}
			back, err := r.SymbolRate(net, pilots)
			if err != nil {
				t.Fatal(err)
			}
			within(t, r.Name(), back.Hertz(), 123456.7, 1e-6)
		}
	}
}

// Widths: (1 + roll-off) symbol rates of shaped pulses, Carson's 2 (deviation + half the
// symbol rate) else: two tones of index 1 at 9600 baud deviate by 4.8 kHz, 19.2 kHz in
// all; audio tones up to 2.2 kHz on 3 kHz, 10.4 kHz.
func TestOccupiedBandwidth(t *testing.T) {
	for _, c := range []struct {
		modulation    string
		baud, rollOff float64
		want          float64
	}{
		{"qpsk", 1e6, 0.35, 1.35e6}, {"256apsk", 1e6, 0, 1e6}, {"2fsk", 9600, 0.35, 19200}, {"gfsk", 9600, 0, 14400}, {"afsk", 1200, 0, 10400}, {"4fsk", 4800, 1, 19200},
	} {
		m, err := FindModulation(c.modulation)
		if err != nil {
			t.Fatal(err)
		}
		got, err := m.OccupiedBandwidth(unit.Frequency(c.baud), c.rollOff)
		if err != nil {
			t.Fatal(err)
		}
		within(t, c.modulation, got.Hertz(), c.want, 1e-6)
		for band, want := range map[float64]bool{c.want + 1: true, c.want - 1: false} {
			if fits, err := m.Fits(unit.Frequency(c.baud), c.rollOff, unit.Frequency(band)); err != nil || fits != want {
				t.Errorf("%s in %g Hz: %t, %v", c.modulation, band, fits, err)
			}
		}
	}
}

func TestRatesRefuse(t *testing.T) {
	r := find(t, "qpsk", "none")
	var out *unit.RangeError
	for _, v := range []float64{0, -1, math.NaN(), math.Inf(1), 1e16} {
		_, errNet := r.NetRate(unit.Frequency(v), false)
		_, errBack := r.SymbolRate(unit.BitRate(v), false)
		_, errWidth := r.Modulation.OccupiedBandwidth(unit.Frequency(v), 0.2)
		_, errFits := r.Modulation.Fits(1, 0.2, unit.Frequency(v))
		for what, err := range map[string]error{"net rate": errNet, "symbol rate": errBack, "width": errWidth, "fits": errFits} {
			if !errors.As(err, &out) {
				t.Errorf("%s of %g: %v", what, v, err)
			}
		}
	}
	for _, v := range []float64{-0.1, 1.1, math.NaN()} {
		if _, err := r.Modulation.OccupiedBandwidth(1, v); !errors.As(err, &out) {
			t.Errorf("roll-off %g: %v", v, err)
		}
	}
	for _, points := range [][]Point{{{1, 0.1}}, {{1, 0.1}, {1, 0.01}}, {{1, 0.1}, {2, 0.1}}, {{1, 0}, {2, 0.1}}, {{unit.DB(math.NaN()), 0.1}, {2, 0.01}}} {
		if _, err := NewCurve(BitErrors, points, "computed", "none"); err == nil {
			t.Errorf("%v makes a curve", points)
		}
	}
}
