package solve

import (
	"slices"

	"slantwise/downlink/contacts"
)

// nothing is what a tank takes for empty or full: a thousandth of a byte.
const nothing = 1e-3

// batch is data of a class made evenly from made to until (seconds).
type batch struct{ bytes, made, until float64 }

// tank follows a recorder through a stream. Within a stretch of even rates each class
// either runs from what it holds or passes on what is being made.
type tank struct {
	r      *contacts.Recorder
	cuts   []ms
	hold   [][]batch
	level  []float64
	inflow []float64
	out    []float64
	in     []float64
}

func newTank(r *contacts.Recorder, length ms) *tank {
	n := len(r.Classes)
	t := &tank{r: r, cuts: []ms{0, length}, hold: make([][]batch, n), level: make([]float64, n), inflow: make([]float64, n), out: make([]float64, n), in: make([]float64, n)}
	for k, c := range r.Classes {
		if c.OnBoard > 0 {
			t.hold[k], t.level[k] = []batch{{bytes: c.OnBoard}}, c.OnBoard
		}
		for _, d := range c.Made {
			t.cuts = append(t.cuts, min(max(d.From, 0), length), min(max(d.To, 0), length))
		}
	}
	slices.Sort(t.cuts)
	t.cuts = slices.Compact(t.cuts)
	return t
}

// run sends the stream and adds what it brings to the values of its contacts.
func (t *tank) run(stream []stretch, values []float64) {
	next := 0
	for k := 1; k < len(t.cuts); k++ {
		from, to := t.cuts[k-1], t.cuts[k]
		for c := range t.inflow {
			t.inflow[c] = 0
			for _, d := range t.r.Classes[c].Made {
				if d.From <= from && to <= d.To {
					t.inflow[c] += d.BytesPerSecond
				}
			}
		}
		for at := from; at < to; {
			for next < len(stream) && stream[next].to <= at {
				next++
			}
			switch {
			case next == len(stream) || stream[next].from >= to:
				t.flow(at, to, 0)
				at = to
			case stream[next].from > at:
				t.flow(at, stream[next].from, 0)
				at = stream[next].from
			default:
				until := min(stream[next].to, to)
				values[stream[next].owner] += t.flow(at, until, stream[next].rate)
				at = until
			}
		}
	}
}

// flow lets data come and go at even rates and returns what was sent is worth.
func (t *tank) flow(from, to ms, link float64) (worth float64) {
	at, end := from.Seconds(), to.Seconds()
	for end-at > 1e-9 {
		t.share(link)
		d := t.even(end - at)
		for c := range t.hold {
			worth += t.pass(c, at, d)
		}
		at += d
	}
	return worth
}

// share gives the link and the free room to the classes in their order.
func (t *tank) share(link float64) {
	all, leaving := 0.0, 0.0
	for c := range t.hold {
		all += t.level[c]
		if t.level[c] > nothing {
			t.out[c], t.in[c] = link, t.inflow[c]
			leaving += link
			link = 0
			continue
		}
		t.out[c] = min(link, t.inflow[c])
		t.in[c] = t.inflow[c] - t.out[c]
		link -= t.out[c]
	}
	if all < t.r.Capacity-nothing {
		return
	}
	for c := range t.hold {
		t.in[c] = min(t.in[c], leaving)
		leaving -= t.in[c]
	}
}

// even returns how long nothing changes, at most the time given (seconds).
func (t *tank) even(most float64) float64 {
	all, rise := 0.0, 0.0
	for c := range t.hold {
		all += t.level[c]
		rise += t.in[c]
		if t.level[c] > nothing {
			rise -= t.out[c]
			if fall := t.out[c] - t.in[c]; fall > 0 {
				most = min(most, t.level[c]/fall)
			}
		}
	}
	if rise > 0 && all < t.r.Capacity-nothing {
		most = min(most, (t.r.Capacity-all)/rise)
	}
	return max(most, 1e-9)
}

// pass moves data of a class for a time and returns what was sent is worth.
func (t *tank) pass(c int, at, d float64) float64 {
	class := &t.r.Classes[c]
	live := t.level[c] <= nothing
	if in := t.in[c] * d; in > 0 {
		t.hold[c] = append(t.hold[c], batch{in, at, at + d})
		t.level[c] += in
	}
	sent := t.out[c] * d
	if live || sent <= 0 {
		return sent * class.Weight
	}
	sent = min(sent, t.level[c])
	t.level[c] -= sent
	worth, gone := 0.0, 0.0
	for len(t.hold[c]) > 0 && sent-gone > 0 {
		b := &t.hold[c][0]
		part := min(b.bytes, sent-gone)
		share := 1.0
		if b.bytes > 0 {
			share = part / b.bytes
		}
		middle := b.made + (b.until-b.made)*share
		young, old := at+d*(gone+part)/sent-middle, at+d*gone/sent-b.made
		worth += part * class.Weight * kept(class, young, old)
		gone += part
		b.made = middle
		b.bytes -= part
		if b.bytes <= 0 {
			t.hold[c] = t.hold[c][1:]
		}
	}
	if t.level[c] <= nothing {
		t.level[c], t.hold[c] = 0, nil
	}
	return worth
}

// kept returns the mean of the worth that is left over ages from a to b (seconds).
func kept(class *contacts.Class, a, b float64) float64 {
	if class.Fade == 0 {
		return 1
	}
	due, over := class.Due.Seconds(), (class.Due + class.Fade).Seconds()
	a, b = min(a, b), max(a, b)
	at := func(x float64) float64 { return min(1, max(0, (over-x)/(over-due))) }
	if b-a < 1e-9 {
		return at(a)
	}
	// Straight between the two bends: a trapezium a part.
	sum, last := 0.0, a
	for _, x := range []float64{due, over, b} {
		if x = min(max(x, a), b); x > last {
			sum += (at(last) + at(x)) / 2 * (x - last)
			last = x
		}
	}
	return sum / (b - a)
}
