package solve

import (
	"errors"
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/verify"
)

// Trials answers what a plan would be worth if it took a candidate that it leaves.
type Trials struct {
	s     *search
	plan  contacts.Plan
	value float64
}

// Trial is the best way found to take a candidate: what is in its way is taken off and
// put elsewhere as far as that was found to work. The best plan with the candidate is
// worth at least Value, so that taking it costs at most what the plan is worth beyond it.
type Trial struct {
	Contact contacts.Contact
	Value   float64
	Plan    contacts.Plan
}

// NewTrials prepares a plan that keeps the rules of a problem. Others are an error.
func NewTrials(p *contacts.Problem, plan contacts.Plan) (*Trials, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	if err := breaches(p, plan.Contacts); err != nil {
		return nil, errors.Join(errors.New("the plan breaks rules"), err)
	}
	m := newModel(p)
	s := newSearch(m, newDual(m), 0, &plan)
	s.load(plan)
	return &Trials{s, plan, verify.Worth(p, plan).Value}, nil
}

// Value returns what the plan is worth.
func (t *Trials) Value() float64 { return t.value }

// Longest returns the longest contact that a candidate could have by itself, and false
// where closed times, staffed hours, lead times or fixed contacts leave none.
func (t *Trials) Longest(candidate int) (contacts.Contact, bool) {
	best, found := contacts.Contact{Candidate: candidate}, false
	for _, i := range t.s.b.m.byCand[candidate] {
		w := &t.s.b.m.windows[i]
		length := floor(w.most, t.s.b.m.step) * t.s.b.m.step
		if length >= w.least && length > best.Length() {
			best.Span, found = contacts.Span{From: w.from, To: w.from + length}, true
		}
	}
	return best, found
}

// Take takes a candidate; false where no way was found that keeps the rules.
func (t *Trials) Take(candidate int) (Trial, bool) {
	best := Trial{}
	found := false
	for _, i := range t.s.b.m.byCand[candidate] {
		for _, c := range t.positions(i) {
			n := len(t.s.b.log)
			if t.place(i, c) && (!found || t.s.b.total > best.Value) {
				best, found = Trial{c, t.s.b.total, t.s.b.plan()}, true
			}
			t.s.b.undo(n)
		}
	}
	if found {
		t.s.b.m.p.Sort(best.Plan.Contacts)
		best.Value = verify.Worth(t.s.b.m.p, best.Plan).Value
	}
	return best, found
}

// positions returns contacts of a window to try: as long as is useful at either end and
// in the middle, the same at the least length, and where the board leaves room.
func (t *Trials) positions(i int) []contacts.Contact {
	b := t.s.b
	w := &b.m.windows[i]
	step := b.m.step
	var out []contacts.Contact
	add := func(from, length ms) {
		from = floor(from, step) * step
		c := contacts.Contact{Candidate: w.candidate, Span: contacts.Span{From: from, To: from + length}}
		if length >= w.least && c.From >= w.from && c.To <= w.to && !slices.Contains(out, c) {
			out = append(out, c)
		}
	}
	least := -floor(-w.least, step) * step
	for _, length := range []ms{floor(w.most, step) * step, least} {
		add(w.from, length)
		add(w.to-length, length)
		add(w.from+(w.to-w.from-length)/2, length)
	}
	for _, o := range b.openings(w, contacts.Span{From: w.from, To: w.to}, nil) {
		length := floor(min(o.Length(), w.most), step) * step
		add(o.From, length)
	}
	return out
}

// place puts a contact on the board whatever is in its way. Beside antenna and spacecraft
// that is what the same limits, shared chains and clashes count, the least valuable first.
func (t *Trials) place(i int, c contacts.Contact) bool {
	s := t.s
	b := s.b
	w := &b.m.windows[i]
	s.guideBy(0)
	lost := s.displace(w, c)
	for _, x := range slices.Clone(b.groups[w.group]) {
		if !b.m.split && !x.must {
			lost = append(lost, x.group)
			b.remove(x)
		}
	}
	for !b.fits(c) {
		x := t.inTheWay(w, c)
		if x == nil {
			return false
		}
		lost = append(lost, x.group)
		b.remove(x)
	}
	b.add(c)
	b.settle()
	s.elsewhere(lost)
	for _, g := range lost {
		for _, x := range slices.Clone(b.groups[g]) {
			b.grow(x)
		}
	}
	b.settle()
	return slices.ContainsFunc(b.groups[w.group], func(x *item) bool { return x.Candidate == c.Candidate && x.Span.Holds(c.Span) })
}

// inTheWay returns the least valuable contact that a limit, a shared chain, a clash, a
// cable or a hand-over may hold against a contact; nil: none can go.
func (t *Trials) inTheWay(w *window, c contacts.Contact) *item {
	b := t.s.b
	var best *item
	weigh := func(list []*item) {
		for _, x := range list {
			if !x.must && x.Span != c.Span && (best == nil || x.value < best.value) {
				best = x
			}
		}
	}
	if !b.antennaFree(c) {
		weigh(near(b.antennas[w.antenna], contacts.Span{From: c.From - contacts.Hour, To: c.To + contacts.Hour}))
		return best
	}
	if !b.craftFree(c) {
		weigh(near(b.crafts[w.craft], contacts.Span{From: c.From - contacts.Day, To: c.To + contacts.Day}))
		return best
	}
	for _, k := range b.clashing[c.Candidate] {
		weigh(b.groups[b.m.group(k.other)])
	}
	if best != nil && b.clashes(c) {
		return best
	}
	best = nil
	for _, k := range b.sharing[w.antenna] {
		for _, x := range b.shared[k] {
			if x.busy.Overlap(b.m.p.Busy(c)) > 0 {
				weigh([]*item{x})
			}
		}
	}
	if best != nil && !b.sharedFree(c) {
		return best
	}
	best = nil
	price := b.m.p.Price(c)
	for _, list := range b.antennas {
		for _, x := range list {
			for _, k := range b.named[x.Candidate] {
				t := b.limits[k]
				if slices.Contains(b.named[c.Candidate], k) && t.together(c.Span, x.Span) && !t.allows(c.Span, price) {
					weigh([]*item{x})
				}
			}
		}
	}
	return best
}
