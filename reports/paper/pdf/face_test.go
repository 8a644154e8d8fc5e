package pdf

import (
	"math"
	"testing"

	"codeberg.org/go-fonts/dejavu/dejavusanscondensed"
)

func condensed(t testing.TB) *Face {
	t.Helper()
	f, err := ParseFace("DejaVuSansCondensed", dejavusanscondensed.TTF)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// The advances are those that the font's own table gives in units of 1/2048 em, as poppler's and
// Chromium's text of this face measure too: nine tenths of DejaVu Sans 2.37, rounded to a unit.
func TestAdvances(t *testing.T) {
	one := newFont(condensed(t))
	for r, upright := range map[rune]float64{'A': 684, 'i': 278, '0': 636, '−': 838, '°': 500} {
		if got := one.Width(string(r), 1000); math.Abs(got-0.9*upright) > 0.75 {
			t.Errorf("%c is %.2f thousandths wide, want %.2f", r, got, 0.9*upright)
		}
	}
}

func TestLettersThatAFaceLacks(t *testing.T) {
	one := newFont(condensed(t))
	for r, want := range map[rune]bool{'A': true, '✓': true, ' ': true, '\u200b': true, '🛰': false, '漢': false, '\x07': one.Has(0x2407), '\ufffd': true} {
		if got := one.Has(r); got != want {
			t.Errorf("%U: has %t, want %t", r, got, want)
		}
	}
}

func TestBrokenFaces(t *testing.T) {
	for _, n := range []int{0, 11, 40, 1000} {
		if _, err := ParseFace("Small", dejavusanscondensed.TTF[:n]); err == nil {
			t.Errorf("%d bytes make a face", n)
		}
	}
}
