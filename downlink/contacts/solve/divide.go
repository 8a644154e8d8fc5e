package solve

import "slantwise/downlink/contacts"

// divide returns children of a node that hold all of its plans between them. A leaf has
// one plan, which needs no children.
func (t *tree) divide(n *node) (children []*node, leaf bool) {
	m := t.g.d.m
	for i, a := range n.chosen {
		for _, b := range n.chosen[i+1:] {
			wa, wb := &m.windows[n.parts[a.window].window], &m.windows[n.parts[b.window].window]
			if wa.craft == wb.craft && m.p.Spacecraft[wa.craft].AtOnce < 2 && a.from < b.to && b.from < a.to {
				at := max(a.from, b.from) + (min(a.to, b.to)-max(a.from, b.from))/2/t.g.cell*t.g.cell
				for _, c := range []chosen{a, b} {
					if x := &n.parts[c.window]; !core(x) || !x.forced {
						return t.cover(n, c, at), false
					}
				}
				return t.narrow(n, a, b), false
			}
			if !m.split && wa.group == wb.group {
				c := a
				if n.parts[c.window].forced {
					c = b
				}
				return t.take(n, c), false
			}
		}
	}
	for _, c := range n.chosen {
		if !n.parts[c.window].forced {
			return t.take(n, c), false
		}
	}
	for _, c := range n.chosen {
		if x := &n.parts[c.window]; x.b0 < x.b1 || x.e0 < x.e1 {
			return t.narrow(n, c), false
		}
	}
	for k := range n.parts {
		if x := &n.parts[k]; !x.forced {
			least, _ := t.g.lengths(&m.windows[x.window])
			return t.take(n, chosen{k, x.b0, x.b0 + least}), false
		}
	}
	return nil, true
}

// core tells whether all contacts of a part share some time, so that there is one at most.
func core(x *part) bool { return x.b1 < x.e0 }

// take divides by whether a part is used: where its contacts share some time it is forced
// or dropped, else by whether a contact covers the middle of the one chosen.
func (t *tree) take(n *node, c chosen) []*node {
	x := &n.parts[c.window]
	if x.several || !core(x) {
		at := c.from + (c.to-c.from)/2/t.g.cell*t.g.cell
		return t.cover(n, c, at)
	}
	group := t.g.d.m.windows[x.window].group
	out := n.with(t.g, func(k int, y part) []part {
		if k == c.window {
			return nil
		}
		return []part{y}
	})
	in := n.with(t.g, func(k int, y part) []part {
		if k == c.window {
			y.forced = true
		} else if !t.g.d.m.split && t.g.d.m.windows[y.window].group == group {
			return nil
		}
		return []part{y}
	})
	return []*node{in, out}
}

// cover divides by whether the part of a contact has one that runs through an instant, or
// through the cell that begins with it where the contact begins there.
func (t *tree) cover(n *node, c chosen, at ms) []*node {
	m, cell := t.g.d.m, t.g.cell
	x := n.parts[c.window]
	// The cell from at to at+cell is covered, or no contact covers it.
	if at >= c.to {
		at = c.to - cell
	}
	w := &m.windows[x.window]
	single := m.p.Spacecraft[w.craft].AtOnce < 2
	around := func(y part) []part { // contacts before the cell, and after it
		before, after := y, y
		before.e1 = min(before.e1, at)
		after.b0 = max(after.b0, at+cell)
		if y.forced { // one of the two is no choice that a part can hold
			return []part{y}
		}
		return []part{before, after}
	}
	in := n.with(t.g, func(k int, y part) []part {
		if k == c.window {
			y.b1, y.e0 = min(y.b1, at), max(y.e0, at+cell)
			y.forced, y.several = true, false
			if x.several {
				return append(around(x), y)
			}
			return []part{y}
		}
		o := &m.windows[y.window]
		switch {
		case !m.split && o.group == w.group:
			return nil
		case o.antenna == w.antenna || single && o.craft == w.craft:
			return around(y)
		}
		return []part{y}
	})
	if x.forced {
		// A forced part that does not cover the cell lies before it or after it.
		before := n.with(t.g, func(k int, y part) []part {
			if k == c.window {
				y.e1 = min(y.e1, at)
			}
			return []part{y}
		})
		after := n.with(t.g, func(k int, y part) []part {
			if k == c.window {
				y.b0 = max(y.b0, at+cell)
			}
			return []part{y}
		})
		return []*node{in, before, after}
	}
	out := n.with(t.g, func(k int, y part) []part {
		if k == c.window {
			return around(y)
		}
		return []part{y}
	})
	return []*node{in, out}
}

// narrow divides the begins or the ends of the first part that has several.
func (t *tree) narrow(n *node, list ...chosen) []*node {
	cell := t.g.cell
	for _, c := range list {
		x := n.parts[c.window]
		child := func(change func(y *part)) *node {
			return n.with(t.g, func(k int, y part) []part {
				if k == c.window {
					change(&y)
				}
				return []part{y}
			})
		}
		if x.b0 < x.b1 {
			at := min(max(c.from, x.b0), x.b1-cell)
			return []*node{child(func(y *part) { y.b1 = at }), child(func(y *part) { y.b0 = at + cell })}
		}
		if x.e0 < x.e1 {
			at := min(max(c.to, x.e0+cell), x.e1)
			return []*node{child(func(y *part) { y.e0 = at }), child(func(y *part) { y.e1 = at - cell })}
		}
	}
	return nil
}

// contact returns what is chosen as a contact of the problem.
func (m *model) contact(n *node, c chosen) contacts.Contact {
	return contacts.Contact{Candidate: m.windows[n.parts[c.window].window].candidate, Span: contacts.Span{From: c.from, To: c.to}}
}
