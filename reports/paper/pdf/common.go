package pdf

import "codeberg.org/go-pdf/fpdf"

// common are the runes of almost every paper, in pairs of first and last: Latin, Greek, Cyrillic, and
// the signs of tables and charts. A file takes these letters from a part of the face that is cut out
// once, since fpdf reads the face anew for every file; the whole face is read for other letters alone.
var common = [...][2]rune{
	{' ', 0x17f}, {0x370, 0x3ff}, {0x400, 0x45f}, {0x2009, 0x200a}, {0x2010, 0x2044}, {0x2070, 0x2094}, {0x2190, 0x2199},
	{0x2202, 0x2265}, {0x25a0, 0x25d5}, {0x2605, 0x2609}, {0x26a0, 0x26a0}, {0x2713, 0x2718}, {0xfffd, 0xfffd},
}

func isCommon(r rune) bool {
	if r < 0x180 {
		return r >= ' '
	}
	for _, c := range common[1:] {
		if r <= c[1] {
			return r >= c[0]
		}
	}
	return false
}

// cutCommon returns the part of a face that has the common runes.
func cutCommon(ttf []byte) []byte {
	var list []rune
	for _, c := range common {
		for r := c[0]; r <= c[1]; r++ {
			list = append(list, r)
		}
	}
	return fpdf.UTF8CutFont(ttf, string(list))
}

// piece is a part of a text that comes from one part of a face.
type piece struct {
	text  string
	whole bool // from the whole face
}

// pieces splits a text where it changes between the common letters and others.
func (f *Font) pieces(text string) []piece {
	var list []piece
	from, was := 0, false
	for i, r := range text {
		whole := !isCommon(r) && f.face.glyph(&f.buffer, r) != 0
		if i > 0 && whole != was {
			list = append(list, piece{text[from:i], was})
			from = i
		}
		was = whole
	}
	return append(list, piece{text[from:], was})
}
