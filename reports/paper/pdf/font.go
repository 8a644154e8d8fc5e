package pdf

import (
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/image/font/sfnt"
	"golang.org/x/text/unicode/bidi"
)

// Font is a face in one file.
type Font struct {
	face   *Face
	buffer sfnt.Buffer
	widths map[rune]float64 // for a size of 1
	quick  [256]float64     // of the first runes, less the map's time
	whole  bool             // the file has the whole face too
}

func newFont(f *Face) *Font { return &Font{face: f, widths: map[rune]float64{}} }

// Width returns how wide a text is at a size, in points.
func (f *Font) Width(text string, size float64) float64 {
	sum := 0.0
	for _, r := range text {
		if r = Visible(r); r >= 0 {
			sum += f.width(r)
		}
	}
	return sum * size
}

func (f *Font) width(r rune) float64 {
	if r < 256 && f.quick[r] != 0 {
		return f.quick[r]
	}
	w, ok := f.widths[r]
	if !ok {
		w = f.face.advance(&f.buffer, f.face.glyph(&f.buffer, r))
		f.widths[r] = w
		if r < 256 {
			f.quick[r] = w
		}
	}
	return w
}

// substitute stands for what a file cannot hold: runes beyond the basic plane, which fpdf does not write.
const substitute = utf8.RuneError

// Letter returns how wide a letter is at a size, in points; 0 for one without a shape.
func (f *Font) Letter(r rune, size float64) float64 {
	if r = Visible(r); r < 0 {
		return 0
	}
	return f.width(r) * size
}

// Has tells whether the face has a letter for a rune, or the rune needs none.
func (f *Font) Has(r rune) bool {
	v := Visible(r)
	return v < 0 || v == ' ' || (v != substitute || r == substitute) && f.face.glyph(&f.buffer, v) != 0
}

// Visible returns the rune that stands for r on paper: a space for white space, the picture of a
// control character (Unicode 15, block 2400), and -1 for what has no shape of its own: marks of
// direction, joiners, variation selectors. For what lies beyond the basic plane stands U+FFFD.
func Visible(r rune) rune {
	switch {
	case r >= ' ' && r < 0x7f:
		return r
	case r == '\t' || r == '\n' || r == '\r' || r == 0x2028 || r == 0x2029:
		return ' '
	case r < ' ':
		return 0x2400 + r
	case r == 0x7f:
		return 0x2421
	case r < 0xa0:
		return 0x2426 // the substitute's picture
	case r >= 0xfe00 && r <= 0xfe0f, r >= 0xe0100 && r <= 0xe01ef, r != 0xad && unicode.Is(unicode.Cf, r):
		return -1
	case r == 0xad:
		return -1 // a soft hyphen
	case r > 0xffff:
		return substitute
	}
	return r
}

// shown returns the runes of a text that have a shape, in the order in which they are drawn from left
// to right.
func shown(text string) string {
	for i := range len(text) {
		if text[i] < ' ' || text[i] > '~' {
			return ordered(strings.Map(Visible, text))
		}
	}
	return text
}

// ordered returns a text in the order in which it is drawn from left to right: Unicode Standard
// Annex 9 for a line that runs to the right. Letters are not joined.
func ordered(text string) string {
	plain := true
	for i := 0; i < len(text) && plain; i++ {
		plain = text[i] < 0xd6 // what is written to the left begins at U+0590
	}
	if plain {
		return text
	}
	var p bidi.Paragraph
	if n, err := p.SetString(text, bidi.DefaultDirection(bidi.LeftToRight)); err != nil || n < len(text) {
		return text
	}
	order, err := p.Order()
	if err != nil {
		return text
	}
	var out []rune
	for i := range order.NumRuns() {
		run := order.Run(i)
		part := []rune(run.String())
		if run.Direction() == bidi.RightToLeft {
			slices.Reverse(part)
			for k, r := range part {
				part[k] = mirrored(r)
			}
		}
		out = append(out, part...)
	}
	return string(out)
}

// mirrored turns a bracket round.
func mirrored(r rune) rune {
	const pairs = "()[]{}<>«»‹›"
	list := []rune(pairs)
	if i := slices.Index(list, r); i >= 0 {
		return list[i^1]
	}
	return r
}
