package solve

import (
	"cmp"
	"slices"

	"slantwise/downlink/contacts"
)

// item is a contact on the board.
type item struct {
	contacts.Contact
	busy  contacts.Span
	group int
	must  bool    // it cannot be taken off
	value float64 // what it adds to its spacecraft
}

// board is a plan that can be changed: contacts by what they share, always in order of
// their begins, with the value of the whole. Everything on it keeps the rules.
type board struct {
	m *model

	antennas [][]*item
	crafts   [][]*item
	groups   [][]*item
	limits   []*tally // as the problem's
	named    [][]int  // limits of each candidate
	shared   [][]*item
	sharing  [][]int // of each antenna
	clashing map[int][]clash
	inForce  map[int][]contacts.Span

	earned []float64 // of each spacecraft
	total  float64
	log    []entry
}

// entry is a change that can be taken back.
type entry struct {
	item  *item
	added bool
}

func newBoard(m *model) *board {
	p := m.p
	b := &board{
		m: m, antennas: make([][]*item, len(p.Antennas)), crafts: make([][]*item, len(p.Spacecraft)), groups: make([][]*item, m.groups),
		named: make([][]int, len(p.Candidates)), shared: make([][]*item, len(p.Shared)), sharing: make([][]int, len(p.Antennas)),
		clashing: map[int][]clash{}, inForce: map[int][]contacts.Span{}, earned: make([]float64, len(p.Spacecraft)),
	}
	for k := range p.Limits {
		b.limits = append(b.limits, newTally(&p.Limits[k]))
		for i := range p.Candidates {
			if p.Limits[k].Names(p, i) {
				b.named[i] = append(b.named[i], k)
			}
		}
	}
	for k, s := range p.Shared {
		for _, a := range s.Antennas {
			if !slices.Contains(b.sharing[a], k) {
				b.sharing[a] = append(b.sharing[a], k)
			}
		}
	}
	for _, k := range p.Clashes {
		b.clashing[k.A] = append(b.clashing[k.A], clash{k.B, k.Spans})
		b.clashing[k.B] = append(b.clashing[k.B], clash{k.A, k.Spans})
	}
	for _, c := range m.before() {
		b.inForce[c.Candidate] = append(b.inForce[c.Candidate], c.Span)
	}
	for _, list := range b.inForce {
		slices.SortFunc(list, func(a, c contacts.Span) int { return cmp.Compare(a.From, c.From) })
		b.total -= p.Weights.Change * float64(len(list))
	}
	for _, h := range m.held {
		b.add(h).must = true
	}
	b.log = b.log[:0]
	return b
}

func (b *board) item(c contacts.Contact) *item {
	return &item{Contact: c, busy: b.m.p.Busy(c), group: b.m.group(c.Candidate)}
}

// place returns where a contact that begins at t belongs in a list.
func place(list []*item, t ms) int {
	lo, hi := 0, len(list)
	for lo < hi {
		if mid := (lo + hi) / 2; list[mid].From < t {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}

func insert(list []*item, x *item) []*item { return slices.Insert(list, place(list, x.From), x) }

func drop(list []*item, x *item) []*item {
	for i := place(list, x.From); ; i++ {
		if list[i] == x {
			return slices.Delete(list, i, i+1)
		}
	}
}

// add puts a contact on the board.
func (b *board) add(c contacts.Contact) *item {
	x := b.item(c)
	b.put(x)
	b.log = append(b.log, entry{x, true})
	return x
}

// remove takes a contact off the board.
func (b *board) remove(x *item) {
	b.take(x)
	b.log = append(b.log, entry{x, false})
}

// undo takes back what was done since the log had n entries.
func (b *board) undo(n int) {
	for len(b.log) > n {
		e := b.log[len(b.log)-1]
		b.log = b.log[:len(b.log)-1]
		if e.added {
			b.take(e.item)
		} else {
			b.put(e.item)
		}
	}
}

func (b *board) put(x *item) { b.change(x, insert, 1) }

func (b *board) take(x *item) { b.change(x, drop, -1) }

// change puts a contact into every list or takes it out, and values the plan anew.
func (b *board) change(x *item, edit func([]*item, *item) []*item, sign int) {
	p := b.m.p
	c := &p.Candidates[x.Candidate]
	b.total += b.changeCost(x.Candidate)
	b.antennas[c.Antenna] = edit(b.antennas[c.Antenna], x)
	b.crafts[c.Spacecraft] = edit(b.crafts[c.Spacecraft], x)
	b.groups[x.group] = edit(b.groups[x.group], x)
	for _, k := range b.named[x.Candidate] {
		b.limits[k].change(x, p.Price(x.Contact), edit, sign)
	}
	for _, k := range b.sharing[c.Antenna] {
		b.shared[k] = edit(b.shared[k], x)
	}
	b.total -= b.changeCost(x.Candidate)
	b.total -= float64(sign) * p.Weights.Price * p.Price(x.Contact)
	if sign < 0 {
		b.earn(c.Spacecraft, -x.value)
		x.value = 0
	}
	b.revalue(x)
}

// changeCost returns what the changes in a candidate cost.
func (b *board) changeCost(candidate int) float64 {
	if len(b.inForce) == 0 || b.m.p.Weights.Change == 0 {
		return 0
	}
	was := b.inForce[candidate]
	n, k := 0, 0
	for _, x := range b.groups[b.m.group(candidate)] {
		if x.Candidate != candidate {
			continue
		}
		if k >= len(was) || was[k] != x.Span {
			n++
		}
		k++
	}
	n += max(0, len(was)-k)
	return b.m.p.Weights.Change * float64(n)
}

// plan returns what is on the board, antenna by antenna.
func (b *board) plan() contacts.Plan {
	n := 0
	for _, list := range b.antennas {
		n += len(list)
	}
	out := make([]contacts.Contact, 0, n)
	for _, list := range b.antennas {
		for _, x := range list {
			out = append(out, x.Contact)
		}
	}
	return contacts.Plan{Contacts: out}
}
