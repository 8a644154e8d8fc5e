package recorder

import "slices"

// parcel is data made evenly over a time, waiting to be sent.
type parcel struct {
	madeFrom, madeTo float64 // seconds
	bytes            float64
}

// split takes the oldest n bytes off, 0 < n < bytes.
func (p *parcel) split(n float64) parcel {
	at := p.madeFrom + (p.madeTo-p.madeFrom)*n/p.bytes
	head := parcel{p.madeFrom, at, n}
	p.madeFrom, p.bytes = at, p.bytes-n
	return head
}

// joins tells whether q goes on where p ends, at the same rate.
func (p *parcel) joins(q parcel) bool {
	if p.madeTo != q.madeFrom {
		return false
	}
	a, b := p.bytes*(q.madeTo-q.madeFrom), q.bytes*(p.madeTo-p.madeFrom)
	return a-b <= 1e-9*a && b-a <= 1e-9*a
}

// queue is the unsent data of one class, oldest first.
type queue struct {
	parcels []parcel
	head    int // the first that is left
	bytes   float64
}

// add appends data that were made just now.
func (q *queue) add(p parcel) {
	if !(p.bytes > 0) {
		return
	}
	q.bytes += p.bytes
	if n := len(q.parcels); n > q.head && q.parcels[n-1].joins(p) {
		q.parcels[n-1].madeTo = p.madeTo
		q.parcels[n-1].bytes += p.bytes
		return
	}
	q.parcels = append(q.parcels, p)
}

// putBack inserts data that failed where their age belongs.
func (q *queue) putBack(p parcel) {
	q.bytes += p.bytes
	live := q.parcels[q.head:]
	i, _ := slices.BinarySearchFunc(live, p, func(a, b parcel) int {
		if a.madeFrom < b.madeFrom {
			return -1
		}
		return 1
	})
	switch {
	case i > 0 && live[i-1].joins(p):
		live[i-1].madeTo = p.madeTo
		live[i-1].bytes += p.bytes
	case i == 0 && q.head > 0:
		q.head--
		q.parcels[q.head] = p
	default:
		q.parcels = slices.Insert(q.parcels, q.head+i, p)
	}
}

// take removes the oldest n bytes, or all where there are less, and gives them out
// parcel by parcel.
func (q *queue) take(n float64, out func(parcel)) {
	for n > 0 && q.head < len(q.parcels) {
		p := &q.parcels[q.head]
		if p.bytes > n {
			q.bytes -= n
			out(p.split(n))
			return
		}
		n -= p.bytes
		q.bytes -= p.bytes
		out(*p)
		q.head++
	}
	if q.head == len(q.parcels) {
		q.parcels, q.head, q.bytes = q.parcels[:0], 0, 0 // what rounding left is gone
	}
}
