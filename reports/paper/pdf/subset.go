package pdf

import "encoding/binary"

// Flags of the parts of a composite glyph: OpenType 1.9, table glyf.
const (
	wordArguments   = 0x0001
	oneScale        = 0x0008
	moreParts       = 0x0020
	twoScales       = 0x0040
	twoByTwo        = 0x0080
	hasInstructions = 0x0100
)

// subset returns a font program of the glyphs in their order, the first being the empty box, without
// hinting. Parts of composite glyphs come after them.
func (f *Face) subset(glyphs []uint16) []byte {
	list := append([]uint16(nil), glyphs...)
	place := make(map[uint16]uint16, len(list))
	for i := len(list) - 1; i >= 0; i-- {
		place[list[i]] = uint16(i)
	}
	var glyf []byte
	loca := make([]byte, 4, 4*len(list)+64)
	for i := 0; i < len(list); i++ { // grows while it goes
		glyf = f.appendOutline(glyf, f.outline(list[i]), func(part uint16) uint16 {
			at, ok := place[part]
			if !ok {
				at = uint16(len(list))
				place[part] = at
				list = append(list, part)
			}
			return at
		})
		for len(glyf)%4 != 0 {
			glyf = append(glyf, 0)
		}
		loca = binary.BigEndian.AppendUint32(loca, uint32(len(glyf)))
	}
	hmtx := make([]byte, 0, 4*len(list))
	for _, g := range list {
		hmtx = binary.BigEndian.AppendUint16(hmtx, at16(f.hmtx, 4*min(int(g), f.wide-1)))
		hmtx = binary.BigEndian.AppendUint16(hmtx, f.bearing(int(g)))
	}
	head, hhea, maxp := append([]byte(nil), f.head...), append([]byte(nil), f.hhea...), append([]byte(nil), f.maxp...)
	binary.BigEndian.PutUint32(head[8:], 0)
	binary.BigEndian.PutUint16(head[50:], 1) // long offsets
	binary.BigEndian.PutUint16(hhea[34:], uint16(len(list)))
	binary.BigEndian.PutUint16(maxp[4:], uint16(len(list)))
	binary.BigEndian.PutUint16(maxp[26:], 0) // no instructions
	return assemble([]table{{"glyf", glyf}, {"head", head}, {"hhea", hhea}, {"hmtx", hmtx}, {"loca", loca}, {"maxp", maxp}})
}

// bearing is the left side bearing of a glyph, in units.
func (f *Face) bearing(g int) uint16 {
	at := 4*g + 2
	if g >= f.wide {
		at = 4*f.wide + 2*(g-f.wide)
	}
	if at+2 > len(f.hmtx) {
		return 0
	}
	return at16(f.hmtx, at)
}

// appendOutline appends a glyph without its instructions; part gives the parts of a composite one
// their new numbers.
func (f *Face) appendOutline(dst, g []byte, part func(uint16) uint16) []byte {
	if len(g) < 10 {
		return dst
	}
	contours := int(int16(at16(g, 0)))
	if contours >= 0 {
		at := 10 + 2*contours
		if at+2 > len(g) || at+2+int(at16(g, at)) > len(g) {
			return dst
		}
		dst = append(append(dst, g[:at]...), 0, 0)
		return append(dst, g[at+2+int(at16(g, at)):]...)
	}
	start := len(dst)
	dst = append(dst, g[:10]...)
	for at := 10; at+4 <= len(g); {
		flags := at16(g, at)
		size := 6
		if flags&wordArguments != 0 {
			size += 2
		}
		switch {
		case flags&oneScale != 0:
			size += 2
		case flags&twoScales != 0:
			size += 4
		case flags&twoByTwo != 0:
			size += 8
		}
		if at+size > len(g) {
			return dst[:start]
		}
		dst = binary.BigEndian.AppendUint16(dst, flags&^hasInstructions)
		dst = binary.BigEndian.AppendUint16(dst, part(at16(g, at+2)))
		dst = append(dst, g[at+4:at+size]...)
		if at += size; flags&moreParts == 0 {
			return dst
		}
	}
	return dst[:start]
}

type table struct {
	tag  string
	data []byte
}

// assemble writes tables, given by tag in order, with their directory and check sums.
func assemble(tables []table) []byte {
	n := len(tables)
	power, exponent := 1, 0
	for 2*power <= n {
		power, exponent = 2*power, exponent+1
	}
	out := binary.BigEndian.AppendUint32(nil, 0x00010000)
	for _, v := range []int{n, 16 * power, exponent, 16 * (n - power)} {
		out = binary.BigEndian.AppendUint16(out, uint16(v))
	}
	at, head := 12+16*n, 0
	for _, t := range tables {
		if t.tag == "head" {
			head = at
		}
		out = append(out, t.tag...)
		for _, v := range []uint32{checkSum(t.data), uint32(at), uint32(len(t.data))} {
			out = binary.BigEndian.AppendUint32(out, v)
		}
		at += (len(t.data) + 3) &^ 3
	}
	for _, t := range tables {
		out = append(out, t.data...)
		for len(out)%4 != 0 {
			out = append(out, 0)
		}
	}
	binary.BigEndian.PutUint32(out[head+8:], 0xb1b0afba-checkSum(out))
	return out
}

func checkSum(b []byte) (sum uint32) {
	for ; len(b) >= 4; b = b[4:] {
		sum += at32(b, 0)
	}
	if len(b) > 0 {
		var last [4]byte
		copy(last[:], b)
		sum += at32(last[:], 0)
	}
	return sum
}
