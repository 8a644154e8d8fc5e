package pdf

import (
	"encoding/binary"
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
	f := condensed(t)
	for r, upright := range map[rune]float64{'A': 684, 'i': 278, '0': 636, '−': 838, '°': 500} {
		if got := 1000 * f.advance(f.Glyph(r)); math.Abs(got-0.9*upright) > 0.75 {
			t.Errorf("%c is %.2f thousandths wide, want %.2f", r, got, 0.9*upright)
		}
	}
	if g := f.Glyph('🛰'); g != 0 {
		t.Errorf("a glyph %d for a letter that the face has not", g)
	}
}

// small is a face of an empty box, a blank and a letter of two boxes, with runes in both formats.
func small() []byte {
	words := func(list ...uint16) (b []byte) {
		for _, v := range list {
			b = binary.BigEndian.AppendUint16(b, v)
		}
		return b
	}
	box := append(words(1, 0, 0, 500, 700, 3, 2, 0xb001), 1, 1, 1, 1)
	box = append(box, words(0, 500, 0, 65036, 0, 0, 700, 0)...) // its words need not be a fine drawing
	double := words(0xffff, 0, 0, 900, 700, moreParts|wordArguments, 0, 0, 0, hasInstructions|wordArguments, 0, 400, 0, 1)
	double = append(double, 0xb0, 1)
	for len(box)%4 != 0 {
		box = append(box, 0)
	}
	for len(double)%4 != 0 {
		double = append(double, 0)
	}
	head, hhea, maxp := make([]byte, 54), make([]byte, 36), make([]byte, 32)
	binary.BigEndian.PutUint16(head[18:], 1000)
	binary.BigEndian.PutUint16(hhea[34:], 2)
	binary.BigEndian.PutUint16(maxp[4:], 3)
	loca := words(0, uint16(len(box)/2), uint16(len(box)/2), uint16((len(box)+len(double))/2))
	four := words(4, 32, 0, 4, 0, 0, 0, 'B', 0xffff, 0, 'A', 0xffff, 65472, 1, 0, 0)
	twelve := append(words(12, 0, 0, 28, 0, 0, 0, 1), words(1, 0xf600, 1, 0xf600, 0, 2)...)
	cmap := append(words(0, 2, 3, 1, 0, 20, 3, 10, 0, uint16(20+len(four))), append(four, twelve...)...)
	return assemble([]table{{"cmap", cmap}, {"glyf", append(append([]byte{}, box...), double...)}, {"head", head}, {"hhea", hhea},
		{"hmtx", words(600, 0, 300, 0, 20)}, {"loca", loca}, {"maxp", maxp}})
}

func TestSmallFace(t *testing.T) {
	f, err := ParseFace("Small", small())
	if err != nil {
		t.Fatal(err)
	}
	for r, want := range map[rune]uint16{'A': 1, 'B': 2, 'C': 0, 0x1f600: 2, 0x1f601: 0, -1: 0, 0x7fffffff: 0} {
		if got := f.Glyph(r); got != want {
			t.Errorf("glyph of %U is %d, want %d", r, got, want)
		}
	}
	if w := f.advance(2); w != 0.3 {
		t.Errorf("the last glyph is %g wide: it takes the last advance, 0.3", w)
	}
	cut, err := tablesOf(f.subset([]uint16{0, 2, 0}))
	if err != nil {
		t.Fatal(err)
	}
	if n := at16(cut["maxp"], 4); n != 3 {
		t.Errorf("%d glyphs in the subset: the parts of the letter stand in it already", n)
	}
	if first, last := at32(cut["loca"], 4), at32(cut["loca"], 8); at16(cut["glyf"], int(first)+10)&hasInstructions != 0 || last-first != 28 {
		t.Errorf("the letter lies at %d to %d, its instructions with it", first, last)
	}
	if sum := checkSum(f.subset([]uint16{0, 2})); sum != 0xb1b0afba {
		t.Errorf("the font program sums to %#x", sum)
	}
}

func TestBrokenFaces(t *testing.T) {
	good := small()
	for _, n := range []int{0, 11, 40, 130, len(good) - 40} {
		if _, err := ParseFace("Small", good[:n]); err == nil {
			t.Errorf("%d bytes of %d make a face", n, len(good))
		}
	}
}

// FuzzFace cuts a subset from whatever is taken for a face.
func FuzzFace(f *testing.F) {
	f.Add(small())
	f.Add(small()[:200])
	f.Fuzz(func(t *testing.T, ttf []byte) {
		face, err := ParseFace("Any", ttf)
		if err != nil {
			return
		}
		list := []uint16{0}
		for g := range min(face.glyphs, 40) {
			list = append(list, uint16(g))
		}
		tables, err := tablesOf(face.subset(list))
		if err != nil {
			t.Fatal(err)
		}
		if n := int(at16(tables["maxp"], 4)); n < len(list) || len(tables["loca"]) != 4*(n+1) || len(tables["hmtx"]) != 4*n {
			t.Errorf("%d glyphs asked for, %d there, %d bytes of places", len(list), n, len(tables["loca"]))
		}
	})
}
