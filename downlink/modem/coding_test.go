package modem

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

var blockCode = regexp.MustCompile(`^(turbo|LDPC AR4JA) k=(\d+) rate (\S+)$`)

// codingOf returns the row that a line of ccsds_coding_thresholds.csv is about.
func codingOf(code string) string {
	dashed := func(rate string) string { return strings.ReplaceAll(rate, "/", "-") }
	if m := blockCode.FindStringSubmatch(code); m != nil {
		family, plain := "ccsds-turbo-", "1784"
		if m[1] != "turbo" {
			family, plain = "ccsds-ldpc-", "1024"
		}
		if m[2] == plain {
			return family + dashed(m[3])
		}
		return family + dashed(m[3]) + "-k" + m[2]
	}
	switch {
	case code == "uncoded BPSK/QPSK":
		return "none"
	case strings.HasPrefix(code, "convolutional K=7 (171,133) rate "):
		return "ccsds-conv-" + dashed(strings.Fields(code)[4])
	case strings.HasPrefix(code, "RS (255,223)"):
		return "ccsds-rs-255-223"
	case strings.HasPrefix(code, "RS (255,239)"):
		return "ccsds-rs-255-239"
	case code == "concatenated K=7 r=1/2 + RS (255,223) I=5":
		return "ccsds-conv-1-2+rs-255-223"
	case strings.HasPrefix(code, "LDPC C2"):
		return "ccsds-ldpc-7-8"
	case strings.HasPrefix(code, "LDPC short"):
		return "ccsds-ldpc-128-64"
	}
	return ""
}

// Every threshold of the table that was seen or computed, at the table's own tolerance:
// formulas, curves and threshold rows alike.
func TestCodingThresholds(t *testing.T) {
	b := readReference(t, "ccsds_coding_thresholds.csv")
	checked := 0
	for _, row := range b.rows {
		code, metric := b.text(t, row, "code"), b.text(t, row, "metric")
		if p := b.text(t, row, "provenance"); p == "memory" || metric == "BER gap" {
			continue
		}
		name := codingOf(code)
		if name == "" {
			t.Errorf("%s has no row", code)
			continue
		}
		modulation := "qpsk"
		if name == "ccsds-ldpc-128-64" {
			modulation = "bpsk"
		}
		target, err := strconv.ParseFloat(b.text(t, row, "target"), 64)
		if err != nil {
			t.Fatal(err)
		}
		metrics := map[string]Metric{"BER": BitErrors, "FER": FrameErrors, "codeword error rate": CodewordErrors}
		got, err := find(t, modulation, name).At(metrics[metric], target)
		if err != nil {
			t.Errorf("%s: %v", code, err)
			continue
		}
		within(t, code+" "+got.String(), float64(got.EbN0), b.number(t, row, "required_ebn0_db"), b.number(t, row, "suggested_tolerance_db"))
		checked++
	}
	if checked < 88 {
		t.Errorf("%d thresholds, want 88 or more", checked)
	}
}

// Where a row has both, its thresholds lie on its curve to the tolerance that the
// reference gives thresholds read between points, 0.05 dB.
func TestThresholdsLieOnTheirCurves(t *testing.T) {
	checked := 0
	for _, r := range Standard().Rows() {
		for _, n := range r.Thresholds {
			for _, c := range r.Curves {
				if c.Metric == n.Metric && c.holds(n.ErrorRate) {
					got, err := c.EbN0(n.ErrorRate)
					if err != nil {
						t.Fatal(err)
					}
					within(t, r.Name()+" "+n.String(), float64(got), float64(n.EbN0), 0.05)
					checked++
				}
			}
		}
	}
	if checked < 50 {
		t.Errorf("%d thresholds on a curve, want 50 or more", checked)
	}
}

// Reed-Solomon: the formulas against the counts of published simulations, four standard
// deviations of the count and a twentieth of the rate.
func TestReedSolomonAgainstSimulations(t *testing.T) {
	b := readReference(t, "coding_simulated_curves_published.csv")
	checked := 0
	for _, row := range b.rows {
		code := b.text(t, row, "code")
		if !strings.HasPrefix(code, "RS") {
			continue
		}
		rs := reedSolomon{255, 16}
		if strings.Contains(code, "239") {
			rs.t = 8
		}
		g := unit.DB(b.number(t, row, "ebn0_db")).Ratio()
		allowed := 0.05 + 4/math.Sqrt(b.number(t, row, "frame_errors_counted"))
		want := b.number(t, row, "fer")
		within(t, code+" codewords", rs.codewordErrorRate(g), want, allowed*want)
		want = b.number(t, row, "ber")
		within(t, code+" bits", rs.bitErrorRate(g), want, allowed*want)
		checked++
	}
	if checked != 22 {
		t.Errorf("%d points, want 22", checked)
	}
}

// The two published figures for the turbo code of 1784 bits at rate 1/3: 1e-4 at 0.80
// dB in one, 8.1e-5 at 0.80 dB in the other. The bit error rate comes from the second.
func TestTurboBitErrors(t *testing.T) {
	need, err := find(t, "bpsk", "ccsds-turbo-1-3").At(BitErrors, 5.01e-6)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "5.01e-6", float64(need.EbN0), 0.80, 1e-9)
}

// The 28 rows of ETSI EN 302 307-1 table 13: efficiency to half of its last digit, Es/N0
// as printed.
func TestDVBS2(t *testing.T) {
	b := readReference(t, "dvbs2_modcods.csv")
	if len(b.rows) != 28 {
		t.Fatalf("%d rows", len(b.rows))
	}
	for _, row := range b.rows {
		dvbRow(t, b, row, "dvb-s2-", 1e-7, PacketErrors)
		r := find(t, strings.ToLower(b.text(t, row, "modulation")), "dvb-s2-"+strings.ReplaceAll(b.text(t, row, "code_rate"), "/", "-"))
		within(t, r.Name()+" Eb/N0", float64(r.Thresholds[0].EbN0), b.number(t, row, "ebn0_from_table_db"), 5.01e-3)
	}
}

// The entries of ETSI EN 302 307-2 that were found.
func TestDVBS2X(t *testing.T) {
	b := readReference(t, "dvbs2x_modcods_partial.csv")
	if len(b.rows) != 31 {
		t.Fatalf("%d rows", len(b.rows))
	}
	for _, row := range b.rows {
		dvbRow(t, b, row, "dvb-s2x-", 1e-5, FrameErrors)
	}
}

func dvbRow(t *testing.T, b table, row []string, prefix string, rate float64, metric Metric) {
	t.Helper()
	r := find(t, strings.ToLower(b.text(t, row, "modulation")), prefix+strings.ReplaceAll(b.text(t, row, "code_rate"), "/", "-"))
	n := r.Thresholds[0]
	if n.ErrorRate != rate || n.Metric != metric || n.Provenance != "seen-secondary" || r.Coding.RateText != b.text(t, row, "code_rate") {
		t.Errorf("%s: %+v", r.Name(), n)
	}
	within(t, r.Name()+" Es/N0", float64(r.EsN0(n.EbN0)), b.number(t, row, "ideal_esn0_db"), 1e-9)
	within(t, r.Name()+" efficiency", r.SpectralEfficiency(), b.number(t, row, "spectral_efficiency_bit_per_symbol"), 5.01e-7)
}
