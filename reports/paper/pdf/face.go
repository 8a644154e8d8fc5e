package pdf

import (
	"encoding/binary"
	"errors"
	"fmt"
)

// Face is a TrueType font, as OpenType 1.9 describes its tables. It is not changed after ParseFace
// and may be shared between goroutines.
type Face struct {
	name   string
	glyf   []byte
	loca   []byte
	long   bool // offsets of loca have 32 bits
	hmtx   []byte
	wide   int // glyphs with an advance of their own
	glyphs int
	em     float64 // units of an em
	head   []byte
	hhea   []byte
	maxp   []byte

	plane  [1 << 16]uint16 // glyphs of the basic plane, by rune
	beyond map[rune]uint16 // and of the others
}

var errShort = errors.New("the table ends early")

// ParseFace reads a face with TrueType outlines; name is that of the face in files, of letters
// alone. It fails where a table is missing or ends early.
func ParseFace(name string, ttf []byte) (f *Face, err error) {
	tables, err := tablesOf(ttf)
	if err != nil {
		return nil, fmt.Errorf("face %s: %w", name, err)
	}
	f = &Face{name: name, beyond: map[rune]uint16{}}
	for _, t := range []struct {
		tag   string
		least int
		into  *[]byte
	}{{"head", 54, &f.head}, {"hhea", 36, &f.hhea}, {"maxp", 32, &f.maxp}, {"hmtx", 4, &f.hmtx}, {"loca", 4, &f.loca}, {"glyf", 0, &f.glyf}} {
		if *t.into = tables[t.tag]; len(*t.into) < t.least {
			return nil, fmt.Errorf("face %s: %s: %w", name, t.tag, errShort)
		}
	}
	f.em, f.long = float64(at16(f.head, 18)), at16(f.head, 50) != 0
	f.wide, f.glyphs = int(at16(f.hhea, 34)), int(at16(f.maxp, 4))
	entry := 2
	if f.long {
		entry = 4
	}
	if f.em == 0 || f.wide == 0 || f.wide > f.glyphs || len(f.hmtx) < 4*f.wide || len(f.loca) < entry*(f.glyphs+1) {
		return nil, fmt.Errorf("face %s: its tables do not agree", name)
	}
	if err := f.letters(tables["cmap"]); err != nil {
		return nil, fmt.Errorf("face %s: cmap: %w", name, err)
	}
	return f, nil
}

func at16(b []byte, i int) uint16 { return binary.BigEndian.Uint16(b[i:]) }
func at32(b []byte, i int) uint32 { return binary.BigEndian.Uint32(b[i:]) }

// tablesOf returns the tables by tag.
func tablesOf(ttf []byte) (map[string][]byte, error) {
	if len(ttf) < 12 || at32(ttf, 0) != 0x00010000 {
		return nil, errors.New("no font with TrueType outlines")
	}
	n := int(at16(ttf, 4))
	if len(ttf) < 12+16*n {
		return nil, errShort
	}
	tables := make(map[string][]byte, n)
	for i := range n {
		e := ttf[12+16*i:]
		from, length := uint64(at32(e, 8)), uint64(at32(e, 12))
		if from+length > uint64(len(ttf)) {
			return nil, errShort
		}
		tables[string(e[:4])] = ttf[from : from+length]
	}
	return tables, nil
}

// letters reads which rune has which glyph, from subtables of the formats 4 and 12.
func (f *Face) letters(cmap []byte) error {
	if len(cmap) < 4 || len(cmap) < 4+8*int(at16(cmap, 2)) {
		return errShort
	}
	found := false
	for i := range int(at16(cmap, 2)) {
		system, coding, from := at16(cmap, 4+8*i), at16(cmap, 6+8*i), int(at32(cmap, 8+8*i))
		if system != 3 || coding != 1 && coding != 10 {
			continue
		}
		if from+16 > len(cmap) {
			return errShort
		}
		var err error
		switch s := cmap[from:]; at16(s, 0) {
		case 4:
			err = f.segments(s)
		case 12:
			err = f.groups(s)
		default:
			continue
		}
		if err != nil {
			return err
		}
		found = true
	}
	if !found {
		return errors.New("no subtable of format 4 or 12")
	}
	return nil
}

func (f *Face) set(r rune, glyph uint16) {
	if int(glyph) >= f.glyphs {
		return
	}
	if r < 1<<16 {
		f.plane[r] = glyph
	} else if glyph != 0 {
		f.beyond[r] = glyph
	}
}

// segments reads format 4.
func (f *Face) segments(s []byte) error {
	n := int(at16(s, 6)) / 2
	if len(s) < 16+8*n {
		return errShort
	}
	for i := range n {
		last, first, delta, shift := at16(s, 14+2*i), at16(s, 16+2*n+2*i), at16(s, 16+4*n+2*i), int(at16(s, 16+6*n+2*i))
		for r := int(first); r <= int(last) && r < 0xffff; r++ {
			glyph := uint16(r)
			if shift != 0 {
				k := 16 + 6*n + 2*i + shift + 2*(r-int(first))
				if k+2 > len(s) {
					return errShort
				}
				if glyph = at16(s, k); glyph == 0 {
					continue
				}
			}
			f.set(rune(r), glyph+delta)
		}
	}
	return nil
}

// groups reads format 12.
func (f *Face) groups(s []byte) error {
	n := int(at32(s, 12))
	if n > len(s)/12 || len(s) < 16+12*n {
		return errShort
	}
	for i := range n {
		first, last, glyph := at32(s, 16+12*i), at32(s, 20+12*i), at32(s, 24+12*i)
		if last > 0x10ffff || first > last {
			return errors.New("a group of runes that do not exist")
		}
		for r := first; r <= last && glyph < 1<<16; r++ {
			f.set(rune(r), uint16(glyph))
			glyph++
		}
	}
	return nil
}

// Glyph returns the glyph of a rune; 0, the empty box, where the face has none.
func (f *Face) Glyph(r rune) uint16 {
	if r >= 0 && r < 1<<16 {
		return f.plane[r]
	}
	return f.beyond[r]
}

// advance is how wide a glyph is, for a size of 1.
func (f *Face) advance(glyph uint16) float64 {
	return float64(at16(f.hmtx, 4*min(int(glyph), f.wide-1))) / f.em
}

// outline returns the description of a glyph; empty for a blank or a broken one.
func (f *Face) outline(glyph uint16) []byte {
	i := int(glyph)
	if i >= f.glyphs {
		return nil
	}
	var from, to int
	if f.long {
		from, to = int(at32(f.loca, 4*i)), int(at32(f.loca, 4*i+4))
	} else {
		from, to = 2*int(at16(f.loca, 2*i)), 2*int(at16(f.loca, 2*i+2))
	}
	if from >= to || to > len(f.glyf) || to-from < 10 {
		return nil
	}
	return f.glyf[from:to]
}
