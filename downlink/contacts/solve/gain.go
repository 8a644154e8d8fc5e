package solve

import (
	"slices"

	"slantwise/downlink/contacts"
)

// cumulative appends the gain from cell from of a window to it and the n cells after.
func (d *dual) cumulative(w *window, i int, prices []float64, from ms, n int, cell ms, out []float64) []float64 {
	out = append(out, 0)
	sum, at, next, done := 0.0, from*cell, (from+1)*cell, 0
	for x := w.first; x < w.end && done < n; x++ {
		q := &d.pieces[x]
		if q.to <= at {
			continue
		}
		slope, _ := d.slope(q, d.perMs[i], prices)
		for at < q.to && done < n {
			to := min(next, q.to)
			sum += slope * float64(to-at)
			if at = to; at == next {
				out = append(out, sum)
				next += cell
				done++
			}
		}
	}
	return out
}

// exactGains fills in the gain from the begin of the window to each cell.
func (d *dual) exactGains(w *window, i int, prices []float64, cell ms, out []float64) {
	sum, at := 0.0, w.from
	k := 0
	out[0] = 0
	for x := w.first; x < w.end; x++ {
		slope, _ := d.slope(&d.pieces[x], d.perMs[i], prices)
		each := slope * float64(cell)
		for ; at < d.pieces[x].to; at += cell {
			sum += each
			k++
			out[k] = sum
		}
	}
}

// roundedGains fills in, for each cell, the least gain so far within it (for begins) and
// the greatest (for ends).
func (d *dual) roundedGains(w *window, i int, prices []float64, cell ms, begin, end []float64) {
	sum, at := 0.0, w.from
	next := (floor(w.from, cell) + 1) * cell
	k := 0
	begin[0], end[0] = 0, 0
	for x := w.first; x < w.end; x++ {
		slope, _ := d.slope(&d.pieces[x], d.perMs[i], prices)
		for at < d.pieces[x].to {
			to := min(next, d.pieces[x].to)
			sum += slope * float64(to-at)
			at = to
			begin[k], end[k] = min(begin[k], sum), max(end[k], sum)
			if at == next {
				next += cell
				if k++; k < len(begin) {
					begin[k], end[k] = sum, sum
				}
			}
		}
	}
}

// gain returns what a whole window gains as one contact.
func (d *dual) gain(w *window, i int, prices []float64) float64 {
	sum, at := -d.once(i, prices), w.from
	for x := w.first; x < w.end; x++ {
		slope, _ := d.slope(&d.pieces[x], d.perMs[i], prices)
		sum += slope * float64(d.pieces[x].to-at)
		at = d.pieces[x].to
	}
	return sum
}

// account adds the use of the rows and what capacities and pools are worth.
func (d *dual) account(a *answer, prices []float64) {
	for _, c := range a.chosen {
		i := c.window
		w := &d.heldWindows
		if i >= 0 {
			w = &d.m.windows
		} else {
			i = -1 - i
		}
		win := &(*w)[i]
		if c.window < 0 {
			i += len(d.m.windows)
		}
		for k, r := range d.fixedUse[i] {
			a.usage[r] += d.fixedEach[i][k]
		}
		d.accountPieces(a, win, i, contacts.Span{From: c.from, To: c.to}, prices)
	}
	for r := range d.rows {
		if reward := d.rows[r].reward; reward != nil {
			for _, s := range reward {
				a.value += max(0, s.each-prices[r]) * s.length
			}
			continue
		}
		a.value += prices[r] * d.rows[r].capacity
	}
}

func (d *dual) accountPieces(a *answer, w *window, i int, s contacts.Span, prices []float64) {
	first, _ := slices.BinarySearchFunc(d.pieces[w.first:w.end], s.From, func(x piece, t ms) int {
		if x.to <= t {
			return -1
		}
		return 1
	})
	at := max(s.From, w.from) // a rounded begin may lie before the window
	for x := w.first + first; x < w.end && at < s.To; x++ {
		q := &d.pieces[x]
		t := float64(min(q.to, s.To) - at)
		at = q.to
		_, counted := d.slope(q, d.perMs[i], prices)
		for _, u := range d.lists[q.use[0]:q.use[1]] {
			a.usage[u.row] += u.each * t
		}
		if !counted {
			continue
		}
		for _, u := range d.lists[q.count[0]:q.count[1]] {
			a.usage[u.row] += u.each * t
		}
		if q.pool >= 0 {
			a.usage[q.pool] += q.feed * t
		}
	}
}

// slack returns capacity minus use: a subgradient of the bound. Of a pool it is use minus
// the length of the steps worth more than its price.
func (d *dual) slack(r int, usage, price float64) float64 {
	if d.rows[r].reward == nil {
		return d.rows[r].capacity - usage
	}
	full := 0.0
	for _, s := range d.rows[r].reward {
		if s.each > price {
			full += s.length
		}
	}
	return usage - full
}
