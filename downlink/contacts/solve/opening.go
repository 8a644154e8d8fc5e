package solve

import (
	"math"

	"slantwise/downlink/contacts"
)

// openings returns the parts of a window within a span in which the board leaves room for
// a contact: the antenna is free with set-up and tear-down, and the spacecraft where it
// talks to one station at a time. Their ends are whole steps.
func (b *board) openings(w *window, in contacts.Span, out []contacts.Span) []contacts.Span {
	at, end := max(w.from, in.From), min(w.to, in.To)
	if end-at < w.least {
		return out
	}
	list := b.antennas[w.antenna]
	i := place(list, at)
	if i > 0 {
		i--
	}
	craft := &b.m.p.Spacecraft[w.craft]
	var others []*item
	k := 0
	if craft.AtOnce < 2 {
		others = b.crafts[w.craft]
		if k = place(others, at); k > 0 {
			k--
		}
	}
	// The two lists are merged: each contact closes the time around it.
	for {
		closed, none := contacts.Span{}, true
		if i < len(list) {
			closed, none = contacts.Span{From: list[i].busy.From - w.tearDown, To: list[i].busy.To + w.setUp}, false
		}
		useCraft := false
		if k < len(others) {
			gap := b.m.gap(w.candidate, others[k].Candidate)
			s := contacts.Span{From: others[k].From - gap, To: others[k].To + gap}
			if none || s.From < closed.From {
				closed, none, useCraft = s, false, true
			}
		}
		if none || closed.From >= end {
			return b.appendOpening(w, at, end, out)
		}
		if closed.From > at {
			out = b.appendOpening(w, at, closed.From, out)
		}
		at = max(at, closed.To)
		if at >= end {
			return out
		}
		if useCraft {
			k++
		} else {
			i++
		}
	}
}

func (b *board) appendOpening(w *window, from, to ms, out []contacts.Span) []contacts.Span {
	step := b.m.step
	from, to = -floor(-from, step)*step, floor(to, step)*step
	if to-from < w.least {
		return out
	}
	return append(out, contacts.Span{From: from, To: to})
}

// wanted returns how long a contact in an opening should be: what its request still
// desires, at least its least length, in whole steps; 0: none.
func (b *board) wanted(w *window, opening contacts.Span) ms {
	step := b.m.step
	most := min(opening.Length(), w.most)
	if r := b.m.p.Candidates[w.candidate].Request; r >= 0 {
		left := b.m.p.Requests[r].Desired
		for _, x := range b.groups[r] {
			left -= x.Length()
		}
		if left <= 0 {
			return 0
		}
		most = min(most, max(left, w.least))
	}
	most = min(most, b.room(w, opening))
	up := -floor(-most, step) * step // a request's last part of a step is worth taking
	if up > min(opening.Length(), w.most) || up > b.room(w, opening) {
		up = floor(most, step) * step
	}
	if up < w.least {
		return 0
	}
	return up
}

// room returns what limits of time leave in an opening.
func (b *board) room(w *window, opening contacts.Span) ms {
	room := opening.Length()
	for _, k := range b.named[w.candidate] {
		room = min(room, b.limits[k].room(opening))
	}
	return room
}

// try adds a contact of a window in an opening where one fits and pays. At the left it
// begins with the opening, at the right it ends with it.
func (b *board) try(w *window, opening contacts.Span, right bool) bool {
	length := b.wanted(w, opening)
	if length == 0 || !b.m.split && len(b.groups[w.group]) > 0 {
		return false
	}
	c := contacts.Contact{Candidate: w.candidate, Span: contacts.Span{From: opening.From, To: opening.From + length}}
	if right {
		c.Span = contacts.Span{From: opening.To - length, To: opening.To}
	}
	return b.addPaying(c)
}

// addPaying adds a contact if it fits and the plan is worth more with it.
func (b *board) addPaying(c contacts.Contact) bool {
	if !b.fits(c) {
		return false
	}
	before, n := b.total, len(b.log)
	b.add(c)
	if b.total > before+1e-12*math.Abs(before) {
		return true
	}
	b.undo(n)
	return false
}

// grow lengthens a contact into the free time around it as far as that pays.
func (b *board) grow(x *item) {
	w := b.windowOf(x)
	if w == nil || x.must {
		return
	}
	old := x.Contact
	n := len(b.log)
	before := b.total
	b.remove(x)
	var around contacts.Span
	for _, o := range b.openings(w, contacts.Span{From: w.from, To: w.to}, nil) {
		if o.Holds(old.Span) {
			around = o
		}
	}
	length := ms(0)
	if around.Length() > 0 {
		length = b.wanted(w, around)
	}
	if length <= old.Length() {
		b.undo(n)
		return
	}
	from := min(old.From, around.To-length)
	for _, f := range []ms{from, max(around.From, old.To-length)} {
		c := contacts.Contact{Candidate: old.Candidate, Span: contacts.Span{From: f, To: f + length}}
		if !b.fits(c) {
			continue
		}
		m := len(b.log)
		b.add(c)
		if b.total > before {
			return
		}
		b.undo(m)
	}
	b.undo(n)
}

// windowOf returns the window in which a contact lies, or nil.
func (b *board) windowOf(x *item) *window {
	for _, i := range b.m.byCand[x.Candidate] {
		if w := &b.m.windows[i]; w.from <= x.From && x.To <= w.to {
			return w
		}
	}
	return nil
}

// settle takes off what has lost its commands, until nothing has.
func (b *board) settle() {
	for s := range b.m.p.Spacecraft {
		if b.m.p.Spacecraft[s].Command == nil {
			continue
		}
		for again := true; again; {
			again = false
			for _, x := range b.crafts[s] {
				if !x.must && !b.commanded(x.Contact) {
					b.remove(x)
					again = true
					break
				}
			}
		}
	}
}
