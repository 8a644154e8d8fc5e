package unit

import (
	"errors"
	"math"
	"testing"
)

func TestConstants(t *testing.T) {
	for _, c := range []struct {
		source    string
		got, want float64
		tol       float64
	}{
		{"k in dB: SI Brochure 9th ed. 2019, exact value; 10 log10 derived to 4 decimals", float64(BoltzmannDB), -228.5992, 5e-5},
		{"1 GHz wavelength: c of the SI Brochure, derived", Gigahertz.Wavelength().Metres(), 0.299792458, 1e-15},
		{"1 W is 30 dBm: definition, Rec. ITU-R V.574", LevelDBW(0).DBm(), 30, 0},
		{"a right angle: definition", (90 * Degree).Radians(), math.Pi / 2, 1e-15},
		{"an arcsecond: definition", float64(Arcsecond), math.Pi / 180 / 3600, 1e-20},
	} {
		if d := math.Abs(c.got - c.want); d > c.tol {
			t.Errorf("%s: got %.10g, want %.10g, difference %g over %g", c.source, c.got, c.want, d, c.tol)
		}
	}
}

func TestLevelTakesRatios(t *testing.T) {
	// Roddy, Satellite Communications, example 12.1: 6 W into 48.2 dBi is 56 dBW (printed to 1 dB, recomputed 55.9815).
	p, err := LevelWatts(6)
	if err != nil {
		t.Fatal(err)
	}
	if got := p.Plus(48.2).DBW(); math.Abs(got-55.9815) > 5e-5 {
		t.Errorf("6 W and 48.2 dB: got %.5f dBW, want 55.9815", got)
	}
	if got := p.Plus(48.2).Over(p); math.Abs(float64(got)-48.2) > 1e-12 {
		t.Errorf("the level is %.3f dB over the input, want 48.2", float64(got))
	}
}

func TestNoPowerHasNoLevel(t *testing.T) {
	for _, w := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		var re *RangeError
		if _, err := LevelWatts(w); !errors.As(err, &re) {
			t.Errorf("LevelWatts(%v): got %v, want a *RangeError", w, err)
		}
		if _, err := RatioDB(w); !errors.As(err, &re) {
			t.Errorf("RatioDB(%v): got %v, want a *RangeError", w, err)
		}
	}
}

func TestWrapped(t *testing.T) {
	for _, c := range []struct{ in, want Angle }{
		{0, 0}, {-90 * Degree, 270 * Degree}, {720 * Degree, 0}, {359 * Degree, 359 * Degree}, {-1e-18, 0},
	} {
		if got := c.in.Wrapped(); math.Abs(float64(got-c.want)) > 1e-12 {
			t.Errorf("Wrapped(%v deg): got %v deg, want %v deg", c.in.Degrees(), got.Degrees(), c.want.Degrees())
		}
	}
}
