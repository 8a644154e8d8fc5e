package recorder

import (
	"cmp"
	"slices"
)

// making follows what one class makes, through instants that only grow: a year has thousands of
// spans, of which a few at most are on at a time.
type making struct {
	spans   []Made
	byStart []int // places in spans
	next    int   // of byStart: the first that has not begun
	on      []int // places in spans, in their order, so that sums do not depend on the way
}

func newMaking(spans []Made) making {
	m := making{spans: spans, byStart: make([]int, len(spans))}
	for i := range m.byStart {
		m.byStart[i] = i
	}
	slices.SortStableFunc(m.byStart, func(a, b int) int { return cmp.Compare(spans[a].From, spans[b].From) })
	return m
}

// rate returns the bytes a second that are made at t, which is not before that of the last call.
func (m *making) rate(t float64) float64 {
	m.on = slices.DeleteFunc(m.on, func(i int) bool { return !(t < m.spans[i].To) })
	for ; m.next < len(m.byStart) && m.spans[m.byStart[m.next]].From < t; m.next++ {
		if i := m.byStart[m.next]; t < m.spans[i].To {
			at, _ := slices.BinarySearch(m.on, i)
			m.on = slices.Insert(m.on, at, i)
		}
	}
	sum := 0.0
	for _, i := range m.on {
		sum += m.spans[i].BytesPerSecond
	}
	return sum
}
