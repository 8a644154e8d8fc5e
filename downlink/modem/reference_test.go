package modem

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"slantwise/orbit/unit"
)

// table is a file of testdata/modem, its columns by name.
type table struct {
	columns map[string]int
	rows    [][]string
}

func readReference(t testing.TB, name string) table {
	t.Helper()
	f, err := os.Open(filepath.Join("..", "..", "testdata", "modem", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	out := table{columns: map[string]int{}, rows: rows[1:]}
	for i, c := range rows[0] {
		out.columns[c] = i
	}
	return out
}

func (b table) text(t testing.TB, row []string, column string) string {
	t.Helper()
	i, ok := b.columns[column]
	if !ok {
		t.Fatalf("no column %q", column)
	}
	return row[i]
}

func (b table) number(t testing.TB, row []string, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(b.text(t, row, column), 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func find(t testing.TB, modulation, coding string) *Row {
	t.Helper()
	r, err := Standard().Find(modulation, coding)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// within reports a value that is further from the wanted one than allowed.
func within(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.5g, want %.5g, difference %.3g over %.3g", what, got, want, got-want, tolerance)
	}
}

// The formulas against points computed apart from the program (ber_theory.csv, to half
// of their last digit).
func TestTheoryPoints(t *testing.T) {
	b := readReference(t, "ber_theory.csv")
	names := map[string]string{
		"BPSK_QPSK_OQPSK_coherent": "qpsk", "MSK_coherent_matched_filter": "msk", "BPSK_differentially_encoded_coherent": "debpsk",
		"DBPSK_differential_detection": "dbpsk", "DQPSK_differential_detection": "dqpsk", "2FSK_coherent_orthogonal": "2fsk-coherent",
		"2FSK_noncoherent_orthogonal": "2fsk", "8PSK_gray_exact": "8psk", "16PSK_gray_nearest_neighbour": "16psk", "16QAM_gray_exact": "16qam",
	}
	checked := 0
	for _, row := range b.rows {
		name, ok := names[b.text(t, row, "modulation")]
		if !ok {
			continue // GMSK by a remembered coefficient, and formulas that are not used
		}
		r := find(t, name, "none")
		for i, column := range []string{"1e-3", "1e-4", "1e-5", "1e-6", "1e-7"} {
			got, err := r.At(BitErrors, math.Pow(10, -3-float64(i)))
			if err != nil {
				t.Fatal(err)
			}
			within(t, name+" at "+column, float64(got.EbN0), b.number(t, row, "ebn0_db_at_ber_"+column), 5.01e-4)
			checked++
		}
	}
	if checked != 50 {
		t.Errorf("%d points, want 50", checked)
	}
}

// Error rates at given Eb/N0 (ber_bpsk_curve.csv, seven digits).
func TestTheoryCurves(t *testing.T) {
	b := readReference(t, "ber_bpsk_curve.csv")
	for _, row := range b.rows {
		db := b.number(t, row, "ebn0_db")
		g := unit.DB(db).Ratio()
		for column, name := range map[string]string{"ber_bpsk_qpsk": "bpsk", "ber_dbpsk": "dbpsk", "ber_2fsk_noncoherent": "2fsk"} {
			rate, _ := theory(name)
			want := b.number(t, row, column)
			within(t, name+" at "+b.text(t, row, "ebn0_db")+" dB", rate(g), want, 6e-7*want)
		}
	}
}

// The formulas against error rates counted in published simulations. The allowance is
// four standard deviations of the count and a twentieth of the rate: the counted blocks
// end with the last error, and the rates have three digits.
func TestTheoryAgainstSimulations(t *testing.T) {
	b := readReference(t, "uncoded_simulated_curves_published.csv")
	names := map[string]string{"BPSK": "bpsk", "8PSK Gray": "8psk", "16PSK Gray": "16psk", "16QAM Gray": "16qam"}
	checked := 0
	for _, row := range b.rows {
		name, ok := names[b.text(t, row, "modulation")]
		want := b.number(t, row, "ber")
		if !ok || want > 1e-3 {
			continue // the nearest neighbours are not all there is above 1e-3
		}
		rate, _ := theory(name)
		allowed := want * (0.05 + 4/math.Sqrt(b.number(t, row, "bit_errors_counted")))
		within(t, name+" at "+b.text(t, row, "ebn0_db")+" dB", rate(unit.DB(b.number(t, row, "ebn0_db")).Ratio()), want, allowed)
		checked++
	}
	if checked < 16 {
		t.Errorf("%d points, want 16 or more", checked)
	}
}

// The simulated curves are met at their own points.
func TestSimulatedCurvesAtTheirPoints(t *testing.T) {
	b := readReference(t, "uncoded_simulated_curves_published.csv")
	names := map[string]string{"16APSK (ring layout not stated in the trace)": "16apsk", "GMSK BT=0.3 pulse length 3 symbols (GSM) trellis detection": "gmsk"}
	for _, row := range b.rows {
		if name, ok := names[b.text(t, row, "modulation")]; ok {
			want := b.number(t, row, "ber")
			got, err := find(t, name, "none").ErrorRate(unit.DB(b.number(t, row, "ebn0_db")))
			if err != nil {
				t.Errorf("%s: %v", name, err)
			}
			within(t, name, got, want, 1e-9*want)
		}
	}
}
