package pdf

import (
	"fmt"
	"hash/fnv"
	"math"
	"unicode/utf16"
)

// write writes a font as its objects: the composite font, the letters' widths, how the font as a
// whole looks, its program, and which text each number stands for (9.7, 9.8, 9.9, 9.10.3).
func (f *Font) write(w *writer, n int) {
	glyphs := make([]uint16, len(f.runes))
	for i, r := range f.runes[1:] {
		glyphs[i+1] = f.face.Glyph(r)
	}
	program := f.face.subset(glyphs)
	name := f.tag(program) + "+" + f.face.name
	w.object(n)
	w.printf("<</Type/Font/Subtype/Type0/BaseFont/%s/Encoding/Identity-H/DescendantFonts[%d 0 R]/ToUnicode %d 0 R>>", name, n+1, n+4)
	w.end()
	w.object(n + 1)
	w.printf("<</Type/Font/Subtype/CIDFontType2/BaseFont/%s/CIDSystemInfo<</Registry(Adobe)/Ordering(Identity)/Supplement 0>>/CIDToGIDMap/Identity/FontDescriptor %d 0 R/W[0[", name, n+2)
	for _, g := range glyphs {
		w.out = append(whole(w.out, int64(math.Round(1000*f.face.advance(g)))), ' ')
	}
	w.printf("]]>>")
	w.end()
	unit := func(v uint16) int { return int(math.Round(1000 * float64(int16(v)) / f.face.em)) }
	h := f.face.head
	w.object(n + 2)
	w.printf("<</Type/FontDescriptor/FontName/%s/Flags 4/FontBBox[%d %d %d %d]/ItalicAngle 0/Ascent %d/Descent %d/CapHeight %d/StemV 80/FontFile2 %d 0 R>>",
		name, unit(at16(h, 36)), unit(at16(h, 38)), unit(at16(h, 40)), unit(at16(h, 42)), unit(at16(f.face.hhea, 4)), unit(at16(f.face.hhea, 6)), unit(at16(f.face.hhea, 4)), n+3)
	w.end()
	w.stream(n+3, fmt.Sprintf("/Length1 %d", len(program)), program)
	w.stream(n+4, "", f.texts())
}

// tag is six letters that tell subsets of a face apart (9.6.4), by their content.
func (f *Font) tag(program []byte) string {
	h := fnv.New64a()
	h.Write(program) // never fails
	v := h.Sum64()
	var out [6]byte
	for i := range out {
		out[i] = byte('A' + v%26)
		v /= 26
	}
	return string(out[:])
}

// mostInBlock is how many lines a block of such a table may have.
const mostInBlock = 100

// texts is the table of the text that each number stands for.
func (f *Font) texts() []byte {
	b := []byte("/CIDInit/ProcSet findresource begin 12 dict begin begincmap/CIDSystemInfo<</Registry(Adobe)/Ordering(UCS)/Supplement 0>>def/CMapName/Adobe-Identity-UCS def/CMapType 2 def 1 begincodespacerange<0000><FFFF>endcodespacerange\n")
	for i := 0; i < len(f.runes); i += mostInBlock {
		part := f.runes[i:min(i+mostInBlock, len(f.runes))]
		b = fmt.Appendf(b, "%d beginbfchar\n", len(part))
		for k, r := range part {
			b = append(appendHex(append(b, '<'), uint16(i+k)), '>', '<')
			for _, v := range utf16.Encode([]rune{r}) {
				b = appendHex(b, v)
			}
			b = append(b, '>', '\n')
		}
		b = append(b, "endbfchar\n"...)
	}
	return append(b, "endcmap CMapName currentdict/CMap defineresource pop end end"...)
}
