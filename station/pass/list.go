package pass

import (
	"iter"
	"math"
	"math/bits"
)

// Found is a pass with the indices of its spacecraft and site in the job.
type Found struct {
	Spacecraft, Site int
	Pass
}

// List holds the passes of a job compactly, some 80 bytes each, ordered by AOS, then
// spacecraft, then site, whatever the number of workers. It is immutable.
type List struct {
	records [][]record // by spacecraft
	order   []place
}

// place is where a record lies, with the key that it is sorted by.
type place struct {
	since uint64 // AOS in ms since the earliest one
	craft uint32
	index uint32
}

// newList orders the records, which come by spacecraft, then by site.
func newList(records [][]record) *List {
	n, first, last := 0, int64(math.MaxInt64), int64(math.MinInt64)
	for _, rs := range records {
		n += len(rs)
		for i := range rs {
			first, last = min(first, rs[i].aos), max(last, rs[i].aos)
		}
	}
	order := make([]place, 0, n)
	for craft, rs := range records {
		for i := range rs {
			order = append(order, place{since: uint64(rs[i].aos - first), craft: uint32(craft), index: uint32(i)})
		}
	}
	if n > 1 {
		order = sortPlaces(order, bits.Len64(uint64(last-first)))
	}
	return &List{records: records, order: order}
}

// digit is how many bits of the key a turn of sortPlaces takes.
const digit = 11

// sortPlaces sorts by since, a number of keyBits bits, and keeps the order of equals:
// by counting, digit by digit from the least, which for millions of passes takes a
// tenth of the time of comparing. It uses order as working space.
func sortPlaces(order []place, keyBits int) []place {
	other := make([]place, len(order))
	var starts [1 << digit]int
	for shift := 0; shift < keyBits; shift += digit {
		clear(starts[:])
		for i := range order {
			starts[order[i].since>>shift&(1<<digit-1)]++
		}
		sum := 0
		for d, count := range starts {
			starts[d] = sum
			sum += count
		}
		for i := range order {
			d := order[i].since >> shift & (1<<digit - 1)
			other[starts[d]] = order[i]
			starts[d]++
		}
		order, other = other, order
	}
	return order
}

// Len returns the number of passes.
func (l *List) Len() int { return len(l.order) }

// At returns pass i, [0, Len()).
func (l *List) At(i int) Found {
	p := l.order[i]
	return l.records[p.craft][p.index].found()
}

// All yields the passes in order.
func (l *List) All() iter.Seq[Found] {
	return func(yield func(Found) bool) {
		for i := range l.order {
			if !yield(l.At(i)) {
				return
			}
		}
	}
}
