package solve

import (
	"runtime"
	"sync"
	"sync/atomic"
)

// group of windows of one antenna that may touch each other: a chain of its own.
type cluster struct {
	windows []int
	origin  ms // of cell 0
	cells   int
	size    int // gains that the slots hold
}

// grid is the relaxed problem on cells of one length.
type grid struct {
	d        *dual
	cell     ms
	exact    bool // all times are multiples of the cell
	clusters []cluster
	workers  []*worker // kept for their memory
	home     []int     // cluster of each window, once asked for
}

// unit returns the greatest length of which all times are multiples that decide a chain.
func (d *dual) unit() ms {
	u := ms(0)
	for _, w := range d.m.windows {
		for _, t := range []ms{w.from, w.to, w.least, w.most, w.setUp, w.tearDown} {
			u = gcd(u, t)
		}
	}
	for _, x := range d.pieces {
		u = gcd(u, x.to)
	}
	return max(u, 1)
}

func gcd(a, b ms) ms {
	for b != 0 {
		a, b = b, a%b
	}
	if a < 0 {
		return -a
	}
	return a
}

// newGrid cuts the windows into clusters. The cell is no longer than the shortest
// contact, so that every contact has a cell at least.
func newGrid(d *dual, cell ms, exact bool) *grid {
	g := &grid{d: d, cell: cell, exact: exact}
	for _, w := range d.m.windows {
		g.cell = min(g.cell, w.least)
	}
	ws := d.m.windows
	for i := 0; i < len(ws); {
		c := cluster{origin: floor(ws[i].from, g.cell)*g.cell - g.up(ws[i].setUp)}
		end := ws[i].to
		size := 0
		j := i
		for ; j < len(ws) && ws[j].antenna == ws[i].antenna; j++ {
			w := &ws[j]
			if j > i && w.from-w.setUp >= end {
				break
			}
			end = max(end, w.to+w.tearDown+2*g.cell)
			c.origin = min(c.origin, floor(w.from, g.cell)*g.cell-g.up(w.setUp))
			c.windows = append(c.windows, j)
			size += int(floor(w.to, g.cell)-floor(w.from, g.cell)) + 1
		}
		c.cells = int((end-c.origin)/g.cell) + 2
		c.size = size
		g.clusters = append(g.clusters, c)
		i = j
	}
	return g
}

// size returns the number of cells that an evaluation works off.
func (g *grid) size() int {
	n := 0
	for i := range g.clusters {
		n += g.clusters[i].size
	}
	return n
}

func (g *grid) up(t ms) ms { return (t + g.cell - 1) / g.cell * g.cell }

// floor returns the cell of an instant.
func floor(t, cell ms) ms {
	q := t / cell
	if t%cell < 0 {
		q--
	}
	return q
}

// chosen is a contact of the relaxed problem. On a grid that is not exact its times are
// those of the cells.
type chosen struct {
	window   int // -1-k: fixed contact k
	from, to ms
}

// answer is the value of the relaxed problem at some prices.
type answer struct {
	value  float64
	chosen []chosen
	usage  []float64 // of each row
}

// worker holds what one goroutine needs.
type worker struct {
	chain chain
	slots []slot
	gains []float64
}

// evaluate solves all chains at the prices. The result is the same for every number of
// workers: chains are solved apart and added up in their order.
func (g *grid) evaluate(prices []float64, workers int) answer {
	type part struct {
		value  float64
		chosen []chosen
	}
	parts := make([]part, len(g.clusters))
	workers = max(1, min(workers, len(g.clusters), runtime.GOMAXPROCS(0)))
	for len(g.workers) < workers {
		g.workers = append(g.workers, &worker{})
	}
	var next atomic.Int64
	work := func(w *worker) {
		for i := int(next.Add(1)) - 1; i < len(g.clusters); i = int(next.Add(1)) - 1 {
			parts[i].value, parts[i].chosen = g.solve(w, &g.clusters[i], prices)
		}
	}
	var wait sync.WaitGroup
	for k := 1; k < workers; k++ {
		wait.Go(func() { work(g.workers[k]) })
	}
	work(g.workers[0])
	wait.Wait()
	a := answer{value: g.d.constant, usage: make([]float64, len(g.d.rows))}
	for _, p := range parts {
		a.value += p.value
		a.chosen = append(a.chosen, p.chosen...)
	}
	for k := range g.d.heldWindows {
		w := &g.d.heldWindows[k]
		a.value += g.d.gain(w, len(g.d.m.windows)+k, prices)
		a.chosen = append(a.chosen, chosen{-1 - k, w.from, w.to})
	}
	g.d.account(&a, prices)
	return a
}

// solve solves a chain.
func (g *grid) solve(w *worker, c *cluster, prices []float64) (float64, []chosen) {
	factor := 2
	if g.exact {
		factor = 1
	}
	if len(w.gains) < factor*c.size {
		w.gains = make([]float64, factor*c.size)
	}
	for len(w.slots) < len(c.windows) {
		w.slots = append(w.slots, slot{})
	}
	slots := w.slots[:len(c.windows)]
	at := 0
	base := floor(c.origin, g.cell)
	for k, i := range c.windows {
		win := &g.d.m.windows[i]
		from, to := floor(win.from, g.cell), floor(win.to, g.cell)
		n := int(to-from) + 1
		s := &slots[k]
		s.from, s.to = int(from-base), int(to-base)
		s.least, s.setUp, s.tearDown = int(win.least/g.cell), int(win.setUp/g.cell), int(win.tearDown/g.cell)
		s.most = int((win.most + g.cell - 1) / g.cell)
		s.fixed = g.d.once(i, prices)
		s.begin = w.gains[at : at+n]
		s.end = s.begin
		at += n
		if g.exact {
			g.d.exactGains(win, i, prices, g.cell, s.begin)
		} else {
			s.end = w.gains[at : at+n]
			at += n
			g.d.roundedGains(win, i, prices, g.cell, s.begin, s.end)
		}
	}
	value, picks := w.chain.run(slots, c.cells)
	out := make([]chosen, 0, len(picks))
	for k := len(picks) - 1; k >= 0; k-- {
		x := picks[k]
		out = append(out, chosen{c.windows[x.slot], ms(x.s)*g.cell + base*g.cell, ms(x.e)*g.cell + base*g.cell})
	}
	return value, out
}

// once returns what a contact in a window costs by itself.
func (d *dual) once(i int, prices []float64) float64 {
	cost := d.base[i]
	for k, r := range d.fixedUse[i] {
		cost += prices[r] * d.fixedEach[i][k]
	}
	return cost
}

// slope returns the gain of a millisecond of a piece, and whether it is counted.
func (d *dual) slope(x *piece, perMs float64, prices []float64) (gain float64, counted bool) {
	gain = x.gain
	if x.pool >= 0 {
		gain += prices[x.pool] * x.feed
	}
	for _, u := range d.lists[x.count[0]:x.count[1]] {
		gain -= prices[u.row] * u.each
	}
	counted = gain > 0
	gain = max(gain, 0) - perMs
	for _, u := range d.lists[x.use[0]:x.use[1]] {
		gain -= prices[u.row] * u.each
	}
	return gain, counted
}
