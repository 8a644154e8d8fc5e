package pdf

import (
	"fmt"

	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// Face is a TrueType font. It is not changed after ParseFace and may be shared between goroutines.
type Face struct {
	name string
	ttf  []byte
	part []byte // of the common letters
	font *sfnt.Font
	em   fixed.Int26_6 // a size at which an advance is in units of the font
}

// ParseFace reads a face with TrueType outlines; name is that of the face in files, of letters
// alone. It fails where the file is none.
func ParseFace(name string, ttf []byte) (*Face, error) {
	f, err := sfnt.Parse(ttf)
	if err != nil {
		return nil, fmt.Errorf("face %s: %w", name, err)
	}
	return &Face{name: name, ttf: ttf, part: cutCommon(ttf), font: f, em: fixed.Int26_6(f.UnitsPerEm()) << 6}, nil
}

// glyph returns the glyph of a rune; 0, the empty box, where the face has none.
func (f *Face) glyph(buffer *sfnt.Buffer, r rune) sfnt.GlyphIndex {
	i, err := f.font.GlyphIndex(buffer, r)
	if err != nil {
		return 0
	}
	return i
}

// advance is how wide a glyph is, for a size of 1.
func (f *Face) advance(buffer *sfnt.Buffer, glyph sfnt.GlyphIndex) float64 {
	a, err := f.font.GlyphAdvance(buffer, glyph, f.em, font.HintingNone)
	if err != nil {
		return 0
	}
	return float64(a) / float64(f.em)
}
