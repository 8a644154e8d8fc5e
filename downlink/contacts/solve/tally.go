package solve

import (
	"slices"

	"slantwise/downlink/contacts"
)

// tally is what a limit has counted.
type tally struct {
	l     *contacts.Limit
	spans []contacts.Span
	count []int
	time  []ms
	money []float64
	items []*item // of a limit in any time of a length
}

func newTally(l *contacts.Limit) *tally {
	t := &tally{l: l, spans: l.Spans}
	if l.Rolling == 0 && len(l.Spans) == 0 {
		t.spans = []contacts.Span{whole}
	}
	t.count, t.time, t.money = make([]int, len(t.spans)), make([]ms, len(t.spans)), make([]float64, len(t.spans))
	return t
}

func (t *tally) change(x *item, price float64, edit func([]*item, *item) []*item, sign int) {
	if t.l.Rolling > 0 {
		t.items = edit(t.items, x)
		return
	}
	for k, s := range t.spans {
		t.time[k] += ms(sign) * s.Overlap(x.Span)
		if s.From <= x.From && x.From < s.To {
			t.count[k] += sign
			t.money[k] += float64(sign) * price
		}
	}
}

// slackOfMoney is what sums of money may err by.
const slackOfMoney = 1e-7

// allows tells whether a contact may be added.
func (t *tally) allows(s contacts.Span, price float64) bool {
	l := t.l
	if l.Rolling > 0 {
		return t.allowsRolling(s)
	}
	for k, d := range t.spans {
		if l.Time != nil && d.Overlap(s) > 0 && t.time[k]+d.Overlap(s) > *l.Time {
			return false
		}
		if s.From < d.From || s.From >= d.To {
			continue
		}
		if l.Contacts != nil && t.count[k] >= *l.Contacts || l.Price != nil && t.money[k]+price > *l.Price+slackOfMoney {
			return false
		}
	}
	return true
}

// allowsRolling looks at the contacts near a new one.
func (t *tally) allowsRolling(s contacts.Span) bool {
	l := t.l
	near := []contacts.Span{s}
	longest := ms(0)
	for _, x := range t.items {
		longest = max(longest, x.Length())
	}
	for i := place(t.items, s.From-l.Rolling-longest); i < len(t.items) && t.items[i].From < s.To+l.Rolling; i++ {
		near = append(near, t.items[i].Span)
	}
	for _, a := range near {
		if l.Contacts != nil && begins(near, contacts.Span{From: a.From, To: a.From + l.Rolling}) > *l.Contacts {
			return false
		}
		if l.Time == nil {
			continue
		}
		for _, at := range []ms{a.From, a.To, a.From - l.Rolling, a.To - l.Rolling} {
			if within(near, contacts.Span{From: at, To: at + l.Rolling}) > *l.Time {
				return false
			}
		}
	}
	return true
}

// together tells whether two contacts count against each other.
func (t *tally) together(a, b contacts.Span) bool {
	if r := t.l.Rolling; r > 0 {
		return a.From < b.To+r && b.From < a.To+r
	}
	return slices.ContainsFunc(t.spans, func(s contacts.Span) bool { return s.Overlap(a) > 0 && s.Overlap(b) > 0 })
}

func begins(list []contacts.Span, in contacts.Span) int {
	n := 0
	for _, s := range list {
		if in.From <= s.From && s.From < in.To {
			n++
		}
	}
	return n
}

func within(list []contacts.Span, in contacts.Span) ms {
	sum := ms(0)
	for _, s := range list {
		sum += s.Overlap(in)
	}
	return sum
}

// room returns how much contact time a limit leaves a contact that may lie in a span, at
// most; less may be allowed.
func (t *tally) room(s contacts.Span) ms {
	if t.l.Time == nil || t.l.Rolling > 0 {
		return s.Length()
	}
	room := s.Length()
	for k, d := range t.spans {
		if o := d.Overlap(s); o > 0 {
			room = min(room, s.Length()-o+max(0, *t.l.Time-t.time[k]))
		}
	}
	return room
}

// clash is a candidate that disturbs another.
type clash struct {
	other int
	spans []contacts.Span
}

// clashes tells whether a contact and those in the board's groups run at an instant at
// which they disturb each other.
func (b *board) clashes(c contacts.Contact) bool {
	for _, k := range b.clashing[c.Candidate] {
		for _, x := range b.groups[b.m.group(k.other)] {
			if x.Candidate != k.other {
				continue
			}
			both := contacts.Span{From: max(c.From, x.From), To: min(c.To, x.To)}
			if slices.ContainsFunc(k.spans, func(s contacts.Span) bool { return both.Length() > 0 && s.Overlap(both) > 0 }) {
				return true
			}
		}
	}
	return false
}
