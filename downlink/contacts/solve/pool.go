package solve

import (
	"cmp"
	"slices"

	"slantwise/downlink/contacts"
)

// pools gives every spacecraft with a share or a recorder a row whose sum is worth less
// the greater it is. Fed is value (share) or bytes (recorder).
func (b *builder) pools() {
	p := b.d.m.p
	b.pool = make([]int32, len(p.Spacecraft))
	for s := range p.Spacecraft {
		craft := &p.Spacecraft[s]
		b.pool[s] = -1
		share := craft.Share
		if p.Weights.Share == 0 {
			share = 0
		}
		switch {
		case craft.Recorder != nil:
			b.pool[s] = b.recorder(s, share)
		case share > 0:
			b.pool[s] = b.row(0, share)
			b.d.rows[b.pool[s]].reward = []step{{p.Weights.Share, share}}
		}
	}
}

// recorder adds the pool of a recorder: at most what each class holds and makes comes
// down, the dearest first; and rows for what can have come down by an instant, since
// nothing is sent before it is made.
func (b *builder) recorder(s int, share float64) int32 {
	p := b.d.m.p
	r := p.Spacecraft[s].Recorder
	available := func(until ms) []step {
		var out []step
		for _, c := range r.Classes {
			sum := c.OnBoard
			for _, d := range c.Made {
				sum += max(0, (min(d.To, until)-max(d.From, 0)).Seconds()) * d.BytesPerSecond
			}
			out = append(out, step{c.Weight, sum})
		}
		slices.SortStableFunc(out, func(a, b step) int { return cmp.Compare(b.each, a.each) })
		return out
	}
	all := available(p.Length)
	total := sum(all)
	pool := b.row(0, max(total, 1))
	b.d.rows[pool].reward = shared(all, share, p.Weights.Share)
	// Rows by time: what is sent before an instant was made before it, and what is sent
	// within a span was on board, which Capacity bounds, or made in it.
	const parts = 14
	row := func(span contacts.Span, capacity float64) {
		r := b.row(capacity, max(total, 1))
		for i := range p.Candidates {
			if p.Candidates[i].Spacecraft == s && p.Candidates[i].Request < 0 && p.Candidates[i].Window.Overlap(span) > 0 {
				b.count[i] = append(b.count[i], timeRow{span, r, bytesUsed})
			}
		}
	}
	tick := max(1, b.tick)
	part := func(k int) ms { return p.Length * ms(k) / parts / tick * tick }
	before := sum(available(0))
	for k := 1; k <= parts; k++ {
		until := part(k)
		now := sum(available(until))
		row(contacts.Span{From: part(k - 1), To: until}, min(r.Capacity, before)+now-before)
		if k < parts {
			row(contacts.Span{From: whole.From, To: until}, now)
		}
		before = now
	}
	return pool
}

// bytesUsed marks a row that is used by the bytes of a piece.
const bytesUsed = -1

func sum(steps []step) float64 {
	total := 0.0
	for _, x := range steps {
		total += x.length
	}
	return total
}

// shared adds to a falling worth the weight of a share: the first of the value counts
// 1 + weight times.
func shared(all []step, share, weight float64) []step {
	var out []step
	for _, x := range all {
		value := x.each * x.length
		if x.each <= 0 || share <= 0 {
			out = append(out, x)
			continue
		}
		if value <= share {
			out = append(out, step{x.each * (1 + weight), x.length})
			share -= value
			continue
		}
		part := share / x.each
		out = append(out, step{x.each * (1 + weight), part}, step{x.each, x.length - part})
		share = 0
	}
	return out
}

// changes charges a contact in a window that has none in force.
func (b *builder) changes() {
	m, d := b.d.m, b.d
	each := m.p.Weights.Change
	has := make([]bool, len(m.p.Candidates))
	for _, c := range m.before() {
		has[c.Candidate] = true
	}
	charged := each > 0 && len(m.p.InForce) > 0
	price := m.p.Weights.Price
	for _, w := range b.windows {
		a := &m.p.Antennas[w.antenna]
		once, byTime := price*a.PerContact, price*a.PerMinute/60000
		if charged && !has[w.candidate] {
			once += each
		}
		if charged && has[w.candidate] && !m.split {
			once -= each // it had been dropped otherwise, which the constant charges
		}
		d.base, d.perMs = append(d.base, once), append(d.perMs, byTime)
	}
	if charged && !m.split {
		for _, h := range has {
			if h {
				d.constant -= each
			}
		}
	}
}

// pieces cuts a window where a rate or the rows change.
func (b *builder) pieces(w *window) {
	d, p := b.d, b.d.m.p
	c := &p.Candidates[w.candidate]
	cuts := []ms{w.from, w.to}
	cut := func(t ms) {
		if w.from < t && t < w.to {
			cuts = append(cuts, t)
		}
	}
	if c.Request < 0 {
		for _, l := range c.Links {
			for _, v := range l.Volume {
				cut(v.At)
			}
		}
	}
	for _, list := range [][]timeRow{b.use[w.candidate], b.count[w.candidate]} {
		for _, t := range list {
			cut(t.span.From)
			cut(t.span.To)
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	w.first = len(d.pieces)
	for k := 1; k < len(cuts); k++ {
		d.pieces = append(d.pieces, b.piece(w, contacts.Span{From: cuts[k-1], To: cuts[k]}))
	}
	w.end = len(d.pieces)
	b.once1(w)
}

// piece returns a stretch of a window.
func (b *builder) piece(w *window, s contacts.Span) piece {
	d, p := b.d, b.d.m.p
	c := &p.Candidates[w.candidate]
	x := piece{to: s.To, pool: -1}
	bytes := 0.0
	if c.Request >= 0 {
		x.gain = c.PerSecond / 1000
	} else {
		length := float64(s.Length())
		for i := range c.Links {
			rate := c.Links[i].Bytes(s) / length
			bytes += rate
			x.gain += rate * c.Links[i].PerByte
		}
	}
	if pool := b.pool[w.craft]; pool >= 0 {
		recorded := p.Spacecraft[w.craft].Recorder != nil
		switch {
		case c.Request < 0 && recorded:
			x.gain, x.pool, x.feed = 0, pool, bytes
		case recorded: // a share on top of a recorder counts requests at its full weight
			if p.Spacecraft[w.craft].Share > 0 {
				x.gain *= 1 + p.Weights.Share
			}
		default:
			x.pool, x.feed = pool, x.gain
		}
	}
	list := func(rows []timeRow) [2]int32 {
		from := int32(len(d.lists))
		for _, t := range rows {
			if t.span.From <= s.From && s.To <= t.span.To {
				each := t.each
				if each == bytesUsed {
					each = bytes
				}
				d.lists = append(d.lists, use{t.row, each})
			}
		}
		return [2]int32{from, int32(len(d.lists))}
	}
	x.use = list(b.use[w.candidate])
	x.count = list(b.count[w.candidate])
	return x
}

// once1 lists the rows that a contact in a window uses once. Where begins of the window
// lie in and outside of a span the row is left out, which loosens the bound.
func (b *builder) once1(w *window) {
	var rows []int32
	var each []float64
	begins := contacts.Span{From: w.from, To: w.to - w.least + 1}
	for _, t := range b.once[w.candidate] {
		if t.span.Holds(begins) && t.each != 0 {
			rows, each = append(rows, t.row), append(each, t.each)
		}
	}
	b.d.fixedUse, b.d.fixedEach = append(b.d.fixedUse, rows), append(b.d.fixedEach, each)
}
