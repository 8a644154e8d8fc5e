package record

import (
	"encoding/binary"
	"math"
)

// The Layout of a database file and of its log: SQLite, Database File Format
// (sqlite.org/fileformat2.html), sections 1.2 to 1.6, 2.1 and 4.1.

// pager gives the pages of a file, those of its log in place of what they replace.
type pager struct {
	data  []byte
	size  int            // of a page, bytes
	usual int            // of it used
	ahead map[int][]byte // by number from 1
	last  int            // greatest number in ahead
}

const (
	fileMagic    = "SQLite format 3\x00"
	defaultPage  = 4096
	leafOfTable  = 0x0d
	headOfFile   = 100
	headOfLeaf   = 8
	headOfLog    = 32
	headOfFrame  = 24
	mostColumns  = 64
	varintLength = 9
	mostPayload  = 1 << 24 // of a row, bytes; a remark is the longest text
)

func newPager(data, ahead []byte) *pager {
	p := &pager{data: data, size: defaultPage, usual: defaultPage}
	if len(data) >= headOfFile && string(data[:len(fileMagic)]) == fileMagic {
		if n := pageSize(int(binary.BigEndian.Uint16(data[16:]))); n > 0 {
			p.size = n
			p.usual = n - int(data[20])
		}
	}
	p.readAhead(ahead)
	if p.usual < 480 { // the least that the format allows
		p.usual = p.size
	}
	return p
}

// pageSize returns the size of a page as the head of a file or log states it, 0 for none.
func pageSize(n int) int {
	if n == 1 {
		return 65536
	}
	if n >= 512 && n <= 65536 && n&(n-1) == 0 {
		return n
	}
	return 0
}

// readAhead takes the frames of a log up to its last commit, as long as their sums are right.
func (p *pager) readAhead(log []byte) {
	if len(log) < headOfLog {
		return
	}
	magic := binary.BigEndian.Uint32(log)
	if magic != 0x377f0682 && magic != 0x377f0683 {
		return
	}
	var order binary.ByteOrder = binary.LittleEndian
	if magic&1 == 1 {
		order = binary.BigEndian
	}
	size := pageSize(int(binary.BigEndian.Uint32(log[8:])))
	sum := logSum(order, [2]uint32{}, log[:24])
	if size == 0 || sum != pairAt(log[24:]) {
		return
	}
	open := map[int][]byte{}
	p.ahead = map[int][]byte{}
	for rest := log[headOfLog:]; len(rest) >= headOfFrame+size; rest = rest[headOfFrame+size:] {
		head, page := rest[:headOfFrame], rest[headOfFrame:headOfFrame+size]
		sum = logSum(order, logSum(order, sum, head[:8]), page)
		if pairAt(head[8:]) != pairAt(log[16:]) || pairAt(head[16:]) != sum {
			break
		}
		open[int(binary.BigEndian.Uint32(head))] = page
		if binary.BigEndian.Uint32(head[4:]) == 0 {
			continue
		}
		p.size = size // a commit
		for n, page := range open {
			p.ahead[n], p.last = page, max(p.last, n)
		}
		clear(open)
	}
}

func pairAt(b []byte) [2]uint32 {
	return [2]uint32{binary.BigEndian.Uint32(b), binary.BigEndian.Uint32(b[4:])}
}

// logSum goes on with the checksum of a log over b, whose length is a multiple of 8.
func logSum(order binary.ByteOrder, s [2]uint32, b []byte) [2]uint32 {
	for ; len(b) >= 8; b = b[8:] {
		s[0] += order.Uint32(b) + s[1]
		s[1] += order.Uint32(b[4:]) + s[0]
	}
	return s
}

// count is how many pages there are, a cut one at the end with them.
func (p *pager) count() int {
	return max((len(p.data)+p.size-1)/p.size, min(p.last, maxSalvage/p.size))
}

// page returns page n from 1, cut where the file is; nil where there is none.
func (p *pager) page(n int) []byte {
	if b := p.ahead[n]; b != nil {
		return b
	}
	from := (n - 1) * p.size
	if n < 1 || from >= len(p.data) {
		return nil
	}
	return p.data[from:min(from+p.size, len(p.data))]
}

// cell is a row: its number, and its values as nil, int64, float64, string or []byte.
type cell struct {
	rowid  int64
	values []any
}

// leaf returns the rows of page n where that is a leaf of a table; those that make no sense are
// left out.
func (p *pager) leaf(n int) []cell {
	page := p.page(n)
	head := 0
	if n == 1 {
		head = headOfFile
	}
	if len(page) < head+headOfLeaf || page[head] != leafOfTable {
		return nil
	}
	var out []cell
	for i := range int(binary.BigEndian.Uint16(page[head+3:])) {
		at := head + headOfLeaf + 2*i
		if at+2 > len(page) {
			break
		}
		if c, ok := p.cell(page, int(binary.BigEndian.Uint16(page[at:]))); ok {
			out = append(out, c)
		}
	}
	return out
}

// cell reads the row at a place of a page.
func (p *pager) cell(page []byte, at int) (cell, bool) {
	if at >= len(page) {
		return cell{}, false
	}
	b := page[at:]
	long, n := varint(b)
	if n == 0 || long < 1 || long > min(mostPayload, int64(len(p.data)+len(p.ahead)*p.size)) {
		return cell{}, false
	}
	b = b[n:]
	rowid, n := varint(b)
	if n == 0 {
		return cell{}, false
	}
	payload, ok := p.payload(b[n:], int(long))
	if !ok {
		return cell{}, false
	}
	values, ok := record(payload)
	return cell{rowid, values}, ok
}

// payload gathers the bytes of a row, which go on on other pages where they are many.
func (p *pager) payload(b []byte, long int) ([]byte, bool) {
	u := p.usual
	here := long
	if most := u - 35; long > most {
		least := (u-12)*32/255 - 23
		if here = least + (long-least)%(u-4); here > most {
			here = least
		}
	}
	if here < 0 || here > len(b) {
		return nil, false
	}
	if here == long {
		return b[:long], true
	}
	if here+4 > len(b) {
		return nil, false
	}
	out := append([]byte(nil), b[:here]...)
	next := int(binary.BigEndian.Uint32(b[here:]))
	for len(out) < long { // each page adds some, so that a ring ends too
		page := p.page(next)
		if len(page) < 5 {
			return nil, false
		}
		out = append(out, page[4:min(4+long-len(out), len(page), u)]...)
		next = int(binary.BigEndian.Uint32(page))
	}
	return out, true
}

// record reads the values of a row.
func record(b []byte) ([]any, bool) {
	head, n := varint(b)
	if n == 0 || head < int64(n) || head > int64(len(b)) {
		return nil, false
	}
	kinds, body := b[n:head], b[head:]
	var out []any
	for len(kinds) > 0 {
		kind, n := varint(kinds)
		if n == 0 || len(out) == mostColumns {
			return nil, false
		}
		kinds = kinds[n:]
		v, used, ok := column(kind, body)
		if !ok {
			return nil, false
		}
		out, body = append(out, v), body[used:]
	}
	return out, true
}

// column reads a value of a kind (section 2.1) and how many bytes it has.
func column(kind int64, b []byte) (v any, used int, ok bool) {
	long := 0
	switch {
	case kind < 0 || kind == 10 || kind == 11:
		return nil, 0, false
	case kind <= 4:
		long = int(kind)
	case kind <= 9:
		long = [...]int{6, 8, 8, 0, 0}[kind-5]
	case kind > 2*maxSalvage:
		return nil, 0, false
	default:
		long = int(kind-12) / 2
	}
	if long > len(b) {
		return nil, 0, false
	}
	b = b[:long]
	switch {
	case kind == 0:
		return nil, 0, true
	case kind == 7:
		return math.Float64frombits(binary.BigEndian.Uint64(b)), long, true
	case kind >= 8 && kind <= 9:
		return kind - 8, 0, true
	case kind < 7:
		n := int64(int8(b[0]))
		for _, x := range b[1:] {
			n = n<<8 | int64(x)
		}
		return n, long, true
	case kind%2 == 1:
		return string(b), long, true
	}
	return append([]byte(nil), b...), long, true
}

// varint reads a number of 1 to 9 bytes; n is 0 where it is cut.
func varint(b []byte) (v int64, n int) {
	var u uint64
	for i, x := range b {
		if i == varintLength-1 {
			return int64(u<<8 | uint64(x)), varintLength
		}
		u = u<<7 | uint64(x&0x7f)
		if x < 0x80 {
			return int64(u), i + 1
		}
	}
	return 0, 0
}
