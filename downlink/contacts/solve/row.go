package solve

import (
	"cmp"
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// row is a coupling of antennas that has a price: the use of all contacts is at most its
// capacity. Prices are per unit of use; scale is the use of a usual contact, by which
// steps of the prices are measured.
type row struct {
	capacity float64
	scale    float64
	reward   []step // of a pool instead: what the sum is worth, falling
}

// step is a stretch of a concave worth: so many units at so much each.
type step struct{ each, length float64 }

// piece is a stretch of a window with even rates. Times are instants of the problem; the
// piece begins where the one before ends.
type piece struct {
	to    ms
	gain  float64 // value a millisecond
	pool  int32   // row of the pool that a millisecond feeds, or -1
	feed  float64 // units a millisecond
	use   [2]int32
	count [2]int32
}

// dual is the relaxed problem: windows with pieces, and rows.
type dual struct {
	m           *model
	rows        []row
	pieces      []piece
	fixedUse    [][]int32 // of each window: rows that a contact uses once
	fixedEach   [][]float64
	base        []float64 // of each window: what a contact costs by itself
	perMs       []float64 // of each window: what a millisecond costs by itself
	lists       []use     // of all pieces
	heldWindows []window  // one for each fixed contact, whole
	constant    float64
}

// use is a row and the use of a millisecond.
type use struct {
	row  int32
	each float64
}

// timeRow is a row that is used by time in a span.
type timeRow struct {
	span contacts.Span
	row  int32
	each float64
}

// builder collects the rows.
type builder struct {
	d       *dual
	use     [][]timeRow // of each candidate
	count   [][]timeRow // used only by time that is counted
	once    [][]timeRow // used once by a contact that begins in the span
	windows []window    // all, with those of fixed contacts
	tick    ms          // of which their times are multiples
	pool    []int32     // of each spacecraft: the row of its share, or of its recorder
}

// newDual builds the relaxed problem.
func newDual(m *model) *dual {
	n := len(m.p.Candidates)
	d := &dual{m: m}
	for _, h := range m.held {
		c := &m.p.Candidates[h.Candidate]
		d.heldWindows = append(d.heldWindows, window{candidate: h.Candidate, antenna: c.Antenna, craft: c.Spacecraft, group: m.group(h.Candidate),
			from: h.From, to: h.To, least: h.Length(), most: h.Length(), setUp: c.SetUp, tearDown: c.TearDown})
	}
	b := &builder{d: d, use: make([][]timeRow, n), count: make([][]timeRow, n), once: make([][]timeRow, n)}
	b.windows = append(slices.Clone(m.windows), d.heldWindows...)
	for _, w := range b.windows {
		b.tick = gcd(gcd(gcd(b.tick, w.from), gcd(w.to, w.least)), gcd(w.setUp, w.tearDown))
	}
	b.groups()
	b.crafts()
	b.shared()
	b.limits()
	b.pools()
	b.changes()
	for i := range m.windows {
		b.pieces(&m.windows[i])
	}
	for i := range d.heldWindows {
		b.pieces(&d.heldWindows[i])
	}
	return d
}

func (b *builder) row(capacity, scale float64) int32 {
	b.d.rows = append(b.d.rows, row{capacity: capacity, scale: scale})
	return int32(len(b.d.rows) - 1)
}

// groups: a request gets one contact, and a pass; with split a request is worth no more
// than what it desires.
func (b *builder) groups() {
	m := b.d.m
	members := make([][]int, m.groups)
	for i := range m.p.Candidates {
		if len(m.byCand[i]) > 0 || !m.split {
			members[m.group(i)] = append(members[m.group(i)], i)
		}
	}
	for g, list := range members {
		if len(list) == 0 {
			continue
		}
		if !m.split {
			r := b.row(1, 1)
			for _, i := range list {
				b.once[i] = append(b.once[i], timeRow{whole, r, 1})
			}
		} else if g < len(m.p.Requests) {
			desired := m.p.Requests[g].Desired
			r := b.row(float64(desired), float64(desired))
			for _, i := range list {
				b.count[i] = append(b.count[i], timeRow{whole, r, 1})
			}
		}
	}
}

var whole = contacts.Span{From: math.MinInt64 / 4, To: math.MaxInt64 / 4}

// finest is how long a stretch of time is that has one price at most.
const finest = 20 * contacts.Minute

// concurrent adds rows where more windows of a set overlap than it may serve at once;
// apart tells whether two windows can be taken together by one antenna's chain alone.
func (b *builder) concurrent(list []int, capacity int, to func(candidate int) *[]timeRow) {
	type edge struct {
		at    ms
		delta int
		w     int
	}
	var edges []edge
	for _, i := range list {
		edges = append(edges, edge{b.windows[i].from, 1, i}, edge{b.windows[i].to, -1, i})
	}
	slices.SortFunc(edges, func(a, c edge) int {
		return cmp.Or(cmp.Compare(a.at, c.at), cmp.Compare(a.delta, c.delta), cmp.Compare(a.w, c.w))
	})
	on := map[int]int{} // windows on, by antenna
	var active []int
	for k := 0; k < len(edges); k++ {
		e := edges[k]
		a := b.windows[e.w].antenna
		on[a] += e.delta
		if on[a] == 0 {
			delete(on, a)
		}
		if e.delta > 0 {
			active = append(active, e.w)
		} else {
			active = slices.DeleteFunc(active, func(w int) bool { return w == e.w })
		}
		if k+1 == len(edges) || edges[k+1].at == e.at || len(on) <= capacity {
			continue
		}
		b.stretches(contacts.Span{From: e.at, To: edges[k+1].at}, active, capacity, to)
	}
}

// stretches adds the rows of a time in which the same windows are open.
func (b *builder) stretches(s contacts.Span, active []int, capacity int, to func(candidate int) *[]timeRow) {
	n := (s.Length() + finest - 1) / finest
	cut := func(k ms) ms {
		if k == n {
			return s.To
		}
		return s.From + s.Length()*k/n/b.tick*b.tick
	}
	for k := range n {
		part := contacts.Span{From: cut(k), To: cut(k + 1)}
		if part.Length() <= 0 {
			continue
		}
		r := b.row(float64(part.Length())*float64(capacity), float64(part.Length()))
		seen := []int{}
		for _, w := range active {
			c := b.windows[w].candidate
			if !slices.Contains(seen, c) {
				seen = append(seen, c)
				*to(c) = append(*to(c), timeRow{part, r, 1})
			}
		}
	}
}

// crafts: a spacecraft talks to so many stations at once; data that are the same count
// once.
func (b *builder) crafts() {
	p := b.d.m.p
	lists := make([][]int, len(p.Spacecraft))
	passes := make([][]int, len(p.Spacecraft))
	for i, w := range b.windows {
		lists[w.craft] = append(lists[w.craft], i)
		if p.Candidates[w.candidate].Request < 0 {
			passes[w.craft] = append(passes[w.craft], i)
		}
	}
	for s := range p.Spacecraft {
		b.concurrent(lists[s], max(1, p.Spacecraft[s].AtOnce), func(c int) *[]timeRow { return &b.use[c] })
		if p.Spacecraft[s].SameData {
			b.concurrent(passes[s], 1, func(c int) *[]timeRow { return &b.count[c] })
		}
	}
}

// shared: chains and operators, by the contacts alone.
func (b *builder) shared() {
	p := b.d.m.p
	for _, s := range p.Shared {
		var list []int
		for i, w := range b.windows {
			if slices.Contains(s.Antennas, w.antenna) {
				list = append(list, i)
			}
		}
		b.concurrent(list, s.Capacity, func(c int) *[]timeRow { return &b.use[c] })
	}
}
