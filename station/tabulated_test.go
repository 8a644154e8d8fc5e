package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func mustElevation(t *testing.T, rows ...[2]float64) *Tabulated {
	t.Helper()
	q, err := TabulateElevation(rows)
	if err != nil {
		t.Fatal(err)
	}
	return q
}

func TestTabulatedElevation(t *testing.T) {
	q := mustElevation(t, [2]float64{5, 110}, [2]float64{10, 75}, [2]float64{30, 45}, [2]float64{90, 30})
	for _, c := range []struct{ el, want float64 }{ // linear between the nodes: definition
		{5, 110}, {7.5, 92.5}, {10, 75}, {20, 60}, {60, 37.5}, {90, 30},
		{3, 110}, {-5, 110}, // held below the table
	} {
		if got := q.Value(unit.Angle(c.el) * unit.Degree); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("at %g deg: got %g, want %g", c.el, got, c.want)
		}
	}
	if low, high := q.Span(); low != 5*unit.Degree || high != 90*unit.Degree || q.IsConstant() {
		t.Errorf("span %v to %v, constant %v", low.Degrees(), high.Degrees(), q.IsConstant())
	}
}

func TestTabulatedGrid(t *testing.T) {
	q, err := TabulateGrid([][3]float64{{10, 8000, 20}, {90, 8000, 24}, {90, 8400, 26}, {10, 8400, 21}})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ el, mhz, want float64 }{ // bilinear: definition
		{10, 8000, 20}, {90, 8400, 26}, {50, 8000, 22}, {50, 8200, 22.75}, {10, 8100, 20.25},
	} {
		at := q.AtFrequency(unit.Frequency(c.mhz) * unit.Megahertz)
		if got := at.Value(unit.Angle(c.el) * unit.Degree); math.Abs(got-c.want) > 1e-9 {
			t.Errorf("at %g deg and %g MHz: got %g, want %g", c.el, c.mhz, got, c.want)
		}
	}
	for mhz, want := range map[float64]bool{7999: false, 8000: true, 8400: true, 8401: false} {
		if got := q.HoldsFrequency(unit.Frequency(mhz) * unit.Megahertz); got != want {
			t.Errorf("holds %g MHz: %v, want %v", mhz, got, want)
		}
	}
	if !Constant(3).HoldsFrequency(1) || Constant(3).Value(1) != 3 {
		t.Error("a single figure does not hold everywhere")
	}
}

func TestBadTables(t *testing.T) {
	for _, c := range []struct {
		name string
		rows [][3]float64
		want string
	}{
		{"empty", nil, "no rows"},
		{"not a number", [][3]float64{{10, 0, math.NaN()}}, "row 1"},
		{"elevation 91", [][3]float64{{91, 0, 1}}, "-90 to 90 deg"},
		{"twice", [][3]float64{{10, 0, 1}, {10, 0, 2}}, "stands twice"},
		{"hole", [][3]float64{{10, 8000, 1}, {20, 8000, 2}, {10, 8400, 3}}, "no row for elevation 20 deg with frequency 8400 MHz"},
	} {
		if _, err := TabulateGrid(c.rows); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q in it", c.name, err, c.want)
		}
	}
	if _, err := TabulateElevation([][2]float64{{10, 1}, {5, 2}}); err == nil || !strings.Contains(err.Error(), "row 2: elevation 5 deg does not rise over 10 deg") {
		t.Errorf("unsorted: got %v", err)
	}
}
