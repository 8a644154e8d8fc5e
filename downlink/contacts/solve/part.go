package solve

import (
	"math"
	"slices"
)

// part is what a node of the tree leaves of a window: contacts that begin and end within
// these times.
type part struct {
	window  int
	b0, b1  ms // begins
	e0, e1  ms // ends
	forced  bool
	several bool // may hold more contacts than one (split)
}

// node is a part of all plans: those with a contact in every forced part and none outside
// of the parts.
type node struct {
	parts  []part
	prices []float64
	bound  float64
	chosen []chosen // what its relaxed problem has chosen; window is the place in parts
	depth  int
}

// lengths returns the least and the greatest length of contacts of a window in whole
// cells.
func (g *grid) lengths(w *window) (least, most ms) {
	return -floor(-w.least, g.cell) * g.cell, floor(w.most, g.cell) * g.cell
}

// root returns the node of all plans.
func (g *grid) root(prices []float64, bound float64) *node {
	n := &node{prices: slices.Clone(prices), bound: bound}
	m := g.d.m
	for i, w := range m.windows {
		from, to := -floor(-w.from, g.cell)*g.cell, floor(w.to, g.cell)*g.cell
		if x, ok := g.shrunk(part{window: i, b0: from, b1: to, e0: from, e1: to, several: m.split}); ok {
			n.parts = append(n.parts, x)
		}
	}
	return n
}

// shrunk returns a part with narrower times, and whether any contact is left in it.
func (g *grid) shrunk(x part) (part, bool) {
	least, most := g.lengths(&g.d.m.windows[x.window])
	if !x.several {
		x.e1 = min(x.e1, x.b1+most)
		x.b0 = max(x.b0, x.e0-most)
	}
	x.b1 = min(x.b1, x.e1-least)
	x.e0 = max(x.e0, x.b0+least)
	return x, x.b0 <= x.b1 && x.e0 <= x.e1 && least <= most
}

// with returns a child: parts are edited one by one, and those that edit leaves empty are
// dropped; a forced part that is dropped makes the child impossible (nil).
func (n *node) with(g *grid, edit func(k int, x part) []part) *node {
	c := &node{prices: n.prices, bound: n.bound, depth: n.depth + 1}
	for k, x := range n.parts {
		kept := false
		for _, y := range edit(k, x) {
			if y, ok := g.shrunk(y); ok {
				c.parts = append(c.parts, y)
				kept = kept || y.forced
			}
		}
		if x.forced && !kept {
			return nil
		}
	}
	return c
}

// evaluate solves the relaxed problem of a node at some prices; false where a forced part
// cannot be taken.
func (g *grid) evaluateNode(n *node, prices []float64) (answer, bool) {
	if len(g.workers) == 0 {
		g.workers = []*worker{{}}
	}
	w := g.workers[0]
	inCluster := make([][]int, len(g.clusters))
	for k, x := range n.parts {
		c := g.clusterOf(x.window)
		inCluster[c] = append(inCluster[c], k)
	}
	a := answer{value: g.d.constant, usage: make([]float64, len(g.d.rows))}
	for c, parts := range inCluster {
		if !g.solveParts(w, &g.clusters[c], n, parts, prices, &a) {
			return a, false
		}
	}
	windows := slices.Clone(a.chosen)
	for k := range a.chosen {
		a.chosen[k].window = n.parts[a.chosen[k].window].window
	}
	for k := range g.d.heldWindows {
		h := &g.d.heldWindows[k]
		a.value += g.d.gain(h, len(g.d.m.windows)+k, prices)
		a.chosen = append(a.chosen, chosen{-1 - k, h.from, h.to})
	}
	g.d.account(&a, prices)
	a.chosen = windows
	return a, true
}

// clusterOf returns the cluster of a window.
func (g *grid) clusterOf(window int) int {
	if g.home == nil {
		g.home = make([]int, len(g.d.m.windows))
		for c := range g.clusters {
			for _, i := range g.clusters[c].windows {
				g.home[i] = c
			}
		}
	}
	return g.home[window]
}

// solveParts solves a chain of parts; forced ones gain a bonus that outweighs all that
// contacts can gain or lose at these prices, however high they are.
func (g *grid) solveParts(w *worker, c *cluster, n *node, parts []int, prices []float64, a *answer) bool {
	base := floor(c.origin, g.cell)
	w.slots = w.slots[:0]
	order := slices.Clone(parts)
	slices.SortStableFunc(order, func(x, y int) int { return int(n.parts[x].b0 - n.parts[y].b0) })
	size := 0
	for _, k := range order {
		size += 2 * (int((n.parts[k].e1-n.parts[k].b0)/g.cell) + 1)
	}
	if len(w.gains) < size {
		w.gains = make([]float64, size)
	}
	at, bonus := 0, 1.0
	for _, k := range order {
		x := &n.parts[k]
		win := &g.d.m.windows[x.window]
		from, to := x.b0/g.cell, x.e1/g.cell
		cells := int(to-from) + 1
		least, most := g.lengths(win)
		s := slot{from: int(from - base), to: int(to - base), least: int(least / g.cell), most: int(most / g.cell),
			setUp: int(win.setUp / g.cell), tearDown: int(win.tearDown / g.cell), fixed: g.d.once(x.window, prices)}
		s.begin, s.end = w.gains[at:at+cells], w.gains[at+cells:at+2*cells]
		at += 2 * cells
		bonus += 2 * (g.d.partGains(win, x, prices, g.cell, s.begin, s.end) + math.Abs(s.fixed)) * float64(1+cells/s.least)
		w.slots = append(w.slots, s)
	}
	forced := 0
	for i, k := range order {
		if n.parts[k].forced {
			w.slots[i].fixed -= bonus
			forced++
		}
	}
	value, picks := w.chain.run(w.slots, c.cells)
	taken := map[int]bool{}
	for k := len(picks) - 1; k >= 0; k-- {
		p := order[picks[k].slot]
		taken[p] = true
		a.chosen = append(a.chosen, chosen{p, (ms(picks[k].s) + base) * g.cell, (ms(picks[k].e) + base) * g.cell})
	}
	for _, k := range order {
		if n.parts[k].forced && !taken[k] {
			return false
		}
	}
	a.value += value - float64(forced)*bonus
	return true
}

// partGains fills in the gains of a part: begins after b1 and ends before e0 are barred. It
// returns by how much gains differ.
func (d *dual) partGains(w *window, x *part, prices []float64, cell ms, begin, end []float64) (span float64) {
	d.cumulative(w, x.window, prices, x.b0/cell, len(begin)-1, cell, begin[:0])
	copy(end, begin)
	span = slices.Max(begin) - slices.Min(begin)
	for i := range begin {
		t := x.b0 + ms(i)*cell
		if t > x.b1 {
			begin[i] = math.Inf(1)
		}
		if t < x.e0 {
			end[i] = math.Inf(-1)
		}
	}
	return span
}
