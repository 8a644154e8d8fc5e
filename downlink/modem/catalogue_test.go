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
	rows := Standard().Rows()
	if len(rows) < 130 || len(Standard().Modulations()) < 20 {
		t.Fatalf("%d rows, %d modulations", len(rows), len(Standard().Modulations()))
	}
	seen := map[string]bool{}
	known := []string{"seen-primary", "seen-secondary", "computed"}
	for _, r := range rows {
		if seen[r.Name()] {
			t.Errorf("%s stands twice", r.Name())
		}
		seen[r.Name()] = true
		for _, n := range r.Thresholds {
			if !slices.Contains(known, n.Provenance) || n.Source == "" {
				t.Errorf("%s: provenance %q, source %q", r.Name(), n.Provenance, n.Source)
			}
		}
		for _, c := range r.Curves {
			if !slices.Contains(known, c.Provenance) || c.Source == "" {
				t.Errorf("%s: curve with provenance %q, source %q", r.Name(), c.Provenance, c.Source)
			}
		}
		if f := r.Coding.Frame; f.Source == "" || !slices.Contains(append(known, "memory"), f.Provenance) {
			t.Errorf("%s: frame with provenance %q, source %q", r.Name(), f.Provenance, f.Source)
		}
		if net, gross := r.NetEfficiency(false), r.SpectralEfficiency(); !(net > 0 && net <= gross) {
			t.Errorf("%s: net %g bit/symbol of %g", r.Name(), net, gross)
		}
	}
}

// No code does with less than Shannon's bound; audio tones on a frequency modulation are
// the worst of the table, near 22 dB over it.
func TestNoCodeBeatsShannon(t *testing.T) {
	for _, r := range Standard().Rows() {
		for _, n := range r.Thresholds {
			if gap := float64(r.ShannonGap(n.EbN0)); !(gap > 0 && gap < 23) {
				t.Errorf("%s: %.2f dB over Shannon's bound", r.Name(), gap)
			}
		}
	}
}

// Shannon's bound at some efficiencies: derived from (2^η - 1)/η.
func TestShannonBound(t *testing.T) {
	for _, c := range []struct {
		name, modulation, coding string
		want                     float64
	}{
		{"1 bit a symbol: 0 dB", "qpsk", "ccsds-ldpc-1-2", 0},
		{"2 bits: 10 log 1.5", "qpsk", "none", 1.7609},
		{"half a bit: 10 log(0.41421/0.5)", "bpsk", "ccsds-conv-1-2", -0.8175},
		{"half a bit a hertz of two tones", "2fsk", "none", -0.8175},
	} {
		within(t, c.name, float64(find(t, c.modulation, c.coding).ShannonEbN0()), c.want, 5e-5)
	}
}

func TestFind(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		metric             Metric
		rate               float64
		want, tolerance    float64
		source             string
	}{
		{"qpsk", "none", "", 0, 9.588, 5.01e-4, "Q(sqrt(2 Eb/N0)) at 1e-5, the first"},
		{"bpsk", "none", "", 1e-6, 10.530, 5.01e-4, "the same at 1e-6"},
		{"qpsk", "ccsds-conv-1-2+rs-255-223", "", 0, 2.33, 1e-9, "CCSDS 130.1-G-3 figure 6-7, continued to 1e-5"},
		{"qpsk", "ccsds-conv-1-2+rs-255-223", "", 8e-4, 2.1, 1e-9, "the figure at 2.1 dB"},
		{"qpsk", "ccsds-ldpc-4-5", "", 0, 3.66, 1e-9, "simulated, k = 1024, codeword error rate 1e-4"},
		{"qpsk", "ccsds-ldpc-4-5", CodewordErrors, 1.606e-3, 3.40, 1e-9, "the last point of the simulation"},
		{"qpsk", "ccsds-rs-255-223", FrameErrors, 1e-6, 6.864, 0.03, "bounded distance, five codewords"},
		{"8psk", "dvb-s2-3-4", "", 0, 7.91 - 10*math.Log10(2.228124), 1e-6, "ETSI EN 302 307-1 table 13"},
	} {
		r, err := Standard().Find(c.modulation, c.coding)
		if err != nil {
			t.Fatal(err)
		}
		n, err := r.At(c.metric, c.rate)
		if err != nil {
			t.Errorf("%s (%s): %v", r.Name(), c.source, err)
		}
		within(t, r.Name()+", "+c.source, float64(n.EbN0), c.want, c.tolerance)
	}
}

func TestUnknownNamesListTheNearest(t *testing.T) {
	for _, c := range []struct{ modulation, coding, what, near string }{
		{"qspk", "none", `modulation: "qspk"`, "qpsk"},
		{"qpsk", "ccsds-conv-1-3", `coding with qpsk: "ccsds-conv-1-3"`, "ccsds-conv-1-2"},
		{"8psk", "ccsds-conv-1-2", "coding with 8psk", "dvb-s2"},
	} {
		_, err := Standard().Find(c.modulation, c.coding)
		var unknown *UnknownError
		if !errors.As(err, &unknown) || !strings.Contains(err.Error(), c.what) || !strings.Contains(strings.Join(unknown.Nearest, " "), c.near) {
			t.Errorf("%s with %s: got %v, want %q with %q among the nearest", c.coding, c.modulation, err, c.what, c.near)
		}
	}
}

// An error rate that is not known, too low, of another metric or out of range is an
// error; nothing is continued.
func TestErrorRatesBeyondTheCurves(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		metric             Metric
		rate               float64
		want               string
	}{
		{"qpsk", "none", "", 1e-13, "qpsk none: the Eb/N0 for a bit error rate of 1e-13 is not known"},
		{"qpsk", "none", FrameErrors, 1e-5, "frame error rate"},
		{"qpsk", "ccsds-conv-3-4", "", 1e-3, "bit error rate 1e-12 to 0.0001"},
		{"16apsk", "none", "", 1e-8, "not continued beyond their ends"},
		{"qpsk", "dvb-s2-1-2", "", 1e-5, "known are 1e-07 packet error rate"},
		{"qpsk", "ccsds-ldpc-1-2", "", 1e-7, "known are 1e-04 codeword error rate"},
	} {
		_, err := find(t, c.modulation, c.coding).At(c.metric, c.rate)
		var unknown *RateError
		if !errors.As(err, &unknown) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s %s at %g: %v, want %q", c.modulation, c.coding, c.rate, err, c.want)
		}
	}
	for _, rate := range []float64{-1, 1, math.NaN(), math.Inf(1)} {
		_, err := find(t, "qpsk", "none").At("", rate)
		var out *unit.RangeError
		if !errors.As(err, &out) {
			t.Errorf("error rate %g: %v", rate, err)
		}
	}
	if _, err := find(t, "qpsk", "dvb-s2-1-2").ErrorRate(3); err == nil {
		t.Error("an error rate without a curve")
	}
	if _, err := find(t, "16apsk", "none").ErrorRate(20); err == nil {
		t.Error("an error rate beyond the last point")
	}
}

// Every curve falls, and EbN0 and ErrorRate undo one another.
func TestCurvesFallAndInvert(t *testing.T) {
	for _, r := range Standard().Rows() {
		for i := range r.Curves {
			c := &r.Curves[i]
			last := math.Inf(1)
			for _, part := range []float64{0, 0.01, 0.3, 0.5, 0.77, 1} {
				rate := math.Exp(math.Log(c.Low) + part*(math.Log(c.High)-math.Log(c.Low)))
				rate = min(max(rate, c.Low), c.High) // rounding at the ends
				db, err := c.EbN0(rate)
				if err != nil {
					t.Fatalf("%s: %v", r.Name(), err)
				}
				if float64(db) > last {
					t.Errorf("%s, %s: %g at %g dB, more than at a lower error rate", r.Name(), c.Metric, rate, float64(db))
				}
				last = float64(db)
				if part == 0 || part == 1 {
					continue // an end may be missed by the last bit
				}
				back, err := c.ErrorRate(db)
				if err != nil {
					t.Fatalf("%s: %v", r.Name(), err)
				}
				within(t, r.Name()+" back", math.Log(back), math.Log(rate), 1e-8)
			}
		}
	}
}

func TestWithRefuses(t *testing.T) {
	good := *find(t, "qpsk", "ccsds-ldpc-1-2")
	other := good
	other.Coding.Name = "house"
	other.Modulation.BitsPerSymbol = 3
	nothing := good
	nothing.Coding.Name = "house"
	nothing.Thresholds = nil
	silent := good
	silent.Coding.Name = "house"
	silent.Thresholds = []Threshold{{EbN0: 3, ErrorRate: 1e-5, Metric: BitErrors}}
	endless := silent
	endless.Thresholds = []Threshold{{EbN0: unit.DB(math.NaN()), ErrorRate: 1e-5, Metric: BitErrors, Source: "bench"}}
	wide := good
	wide.Coding.Name, wide.Modulation.Width = "house", math.Inf(1)
	for want, r := range map[string]Row{"with its source": silent, "NaN dB": endless, "+Inf Hz/baud": wide, "in the catalogue already": good, "with 2 bits a symbol": other, "no threshold is known": nothing} {
		if _, err := Standard().With(r); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %q", err, want)
		}
	}
}

func BenchmarkAssemble(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		if _, err := assemble(modulationsCSV, codingsCSV, thresholdsCSV, curvesCSV, spectraCSV); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkAt(b *testing.B) {
	for _, coding := range []string{"none", "ccsds-conv-7-8", "ccsds-rs-255-223", "ccsds-turbo-1-2"} {
		b.Run(coding, func(b *testing.B) {
			r := find(b, "qpsk", coding)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := r.At("", 2.2e-5); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
