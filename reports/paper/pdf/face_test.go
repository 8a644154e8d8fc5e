package pdf

import (
	"math"
	"strings"
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

// TestPartsOfTheFace: common letters come from the part that is cut out, others from the whole face,
// what no part has from the first; nothing is lost.
func TestPartsOfTheFace(t *testing.T) {
	_, fonts := New(Info{}, condensed(t))
	for text, want := range map[string]string{
		"Łódź 3.5° −": "Łódź 3.5° −", "a חוף b": "a |חוף| b", "क漢": "क漢", "✓ ⚠ ◐ ●": "✓ ⚠ ◐ ●", "⋮x": "|⋮|x", "": "",
	} {
		got := ""
		for i, p := range fonts[0].pieces(text) {
			if p.whole != (i%2 == 1) && text != "⋮x" {
				t.Errorf("%q: piece %d, %q, is from the wrong part", text, i, p.text)
			}
			if p.whole {
				p.text = "|" + p.text + "|"
			}
			got += p.text
		}
		if got != want {
			t.Errorf("%q came in pieces as %q, want %q", text, got, want)
		}
	}
	for _, r := range []rune{' ', 'A', 0x17f, 0x370, 0x45f, 0x2713, 0xfffd} {
		if !isCommon(r) {
			t.Errorf("%U is not common", r)
		}
	}
	for _, r := range []rune{0, 0x1f, 0x180, 0x36f, 0x460, 0x2712, 0xfffe, 0x1f600} {
		if isCommon(r) {
			t.Errorf("%U is common", r)
		}
	}
}

// TestFontsOfAFile: a file has the whole face only where a letter of it is used.
func TestFontsOfAFile(t *testing.T) {
	for text, want := range map[string]int{"plain − ✓": 1, "station חוף": 2} {
		if got := len(strings.Split(strings.TrimSpace(poppler(t, sample(t, text), "pdffonts")), "\n")) - 2; got != want {
			t.Errorf("%q: %d fonts, want %d", text, got, want)
		}
	}
}
