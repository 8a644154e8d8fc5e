package solve

import (
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// tree divides all plans into parts until the bound of each is no better than the best
// plan: branch and bound. It works on the grid of the steps, so that nothing lies between
// its cells, or on the grid of the problem's times where some best plan is known to keep
// to it.
type tree struct {
	g     *grid
	open  []*node // the one with the greatest bound is worked on
	done  float64 // greatest bound of nodes that are settled
	nodes int
	full  bool // too many nodes: what is open stays open
}

// Sizes of problems that are divided, and of the tree.
const (
	treeCells = 3_000_000
	treeNodes = 20_000
	nodeSteps = 25
)

// newTree returns the tree of a problem, or nil where it is too large.
func newTree(d *dual, prices []float64, bound float64) *tree {
	cell := d.m.step
	if u := d.unit(); d.m.keepsToTimes() && u%cell == 0 {
		cell = u
	}
	total := ms(0)
	for _, w := range d.m.windows {
		total += (w.to - w.from) / cell
		if w.least < cell {
			return nil
		}
	}
	if total > treeCells {
		return nil
	}
	g := newGrid(d, cell, true)
	return &tree{g: g, open: []*node{g.root(prices, bound)}, done: math.Inf(-1)}
}

// keepsToTimes tells whether some best plan begins and ends contacts only at sums of the
// problem's own times: where nothing but the order on antennas and spacecraft ties
// contacts, times are the solution of a network flow's dual, which is whole. A limit by
// days is not of that kind: a contact may begin just before midnight.
func (m *model) keepsToTimes() bool {
	if m.split || len(m.p.InForce) > 0 {
		return false
	}
	for k := range m.p.Limits {
		l := &m.p.Limits[k]
		if l.Time != nil || l.Price != nil || l.Rolling > 0 || len(l.Spans) > 0 {
			return false
		}
	}
	return !slices.ContainsFunc(m.p.Spacecraft, func(s contacts.Spacecraft) bool {
		return s.Recorder != nil || s.Share > 0 || s.SameData || s.HandOver != contacts.HandOver{} || s.Command != nil
	})
}

// bound returns the bound that the tree proves.
func (t *tree) bound() float64 {
	b := t.done
	for _, n := range t.open {
		b = max(b, n.bound)
	}
	return b
}

// run works on a number of nodes; it stops early when the tree is finished.
func (t *tree) run(s *search, nodes int, stop func() bool) {
	for k := 0; k < nodes && len(t.open) > 0 && !t.full && !stop(); k++ {
		best := 0
		for i, n := range t.open {
			if n.bound > t.open[best].bound || n.bound == t.open[best].bound && n.depth > t.open[best].depth {
				best = i
			}
		}
		n := t.open[best]
		t.open = slices.Delete(t.open, best, best+1)
		t.work(s, n)
		t.full = t.nodes > treeNodes || len(t.open) > treeNodes/4
	}
}

// limit is the bound from which on a node is worth nothing.
func limit(s *search) float64 { return s.bestValue + tolerance/2*math.Abs(s.bestValue) }

// work bounds a node and divides it.
func (t *tree) work(s *search, n *node) {
	t.nodes++
	if n.bound <= limit(s) {
		t.done = max(t.done, n.bound)
		return
	}
	if !t.lower(s, n) {
		return // no plan is in it
	}
	t.offer(s, n)
	if n.bound <= limit(s) {
		t.done = max(t.done, n.bound)
		return
	}
	children, leaf := t.divide(n)
	if leaf {
		return // offer has tried its only plan
	}
	for _, c := range children {
		if c != nil {
			t.open = append(t.open, c)
		}
	}
}

// lower looks for prices with a lower bound; false where a forced part cannot be taken.
func (t *tree) lower(s *search, n *node) bool {
	a := newAscent(t.g)
	a.prices = slices.Clone(n.prices)
	bestChosen := []chosen(nil)
	for range nodeSteps {
		answer, ok := t.g.evaluateNode(n, a.prices)
		if !ok {
			return false
		}
		a.last = answer
		if answer.value < n.bound || bestChosen == nil {
			bestChosen = answer.chosen
		}
		if answer.value < n.bound {
			n.bound = answer.value
			n.prices = slices.Clone(a.prices)
			a.worse = 0
		} else if a.worse++; a.worse > 5 {
			a.length, a.worse = a.length/2, 0
		}
		if n.bound <= limit(s) {
			break
		}
		a.move(s.bestValue)
	}
	n.chosen = bestChosen
	return true
}

// offer makes a plan of what a node has chosen, as far as it fits, and leaves the board
// as it was.
func (t *tree) offer(s *search, n *node) {
	log := len(s.b.log)
	s.empty()
	s.guideBy(full)
	list := make([]contacts.Contact, 0, len(n.chosen))
	for _, c := range n.chosen {
		list = append(list, t.g.d.m.contact(n, c))
	}
	t.g.d.m.p.Sort(list) // uplinks before what they load
	for _, x := range list {
		if s.b.fits(x) {
			s.b.add(x)
		}
	}
	s.b.settle()
	s.keep()
	s.copy()
	s.greedy()
	s.b.settle()
	s.keep()
	s.copy()
	s.b.undo(log)
}
