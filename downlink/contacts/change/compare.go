package change

import (
	"cmp"
	"slices"
	"time"

	"slantwise/downlink/contacts"
)

// Kind says what has become of a contact.
type Kind string

// Kinds of a Difference.
const (
	Kept    Kind = "kept"
	Moved   Kind = "moved" // begins or ends at another time
	Dropped Kind = "dropped"
	Added   Kind = "added"
)

// Difference is a contact of either plan. Times of the plan that does not have it are
// zero.
type Difference struct {
	Kind       Kind
	Request    string // empty: an own pass
	Spacecraft string
	Station    string
	Antenna    string
	WasStart   time.Time
	WasEnd     time.Time
	IsStart    time.Time
	IsEnd      time.Time
	WasContact int // place in the first plan, or -1
	IsContact  int // place in the second plan, or -1
}

// Compare lists the contacts of two plans, in order of time. Contacts of one request,
// spacecraft and antenna are the same where they share time, those first that share the
// most; else one was dropped and one added.
func Compare(p *contacts.Problem, a contacts.Plan, q *contacts.Problem, b contacts.Plan) []Difference {
	type pair struct {
		a, b   int
		shared time.Duration
	}
	var pairs []pair
	byKey := map[key][]int{}
	for i, c := range b.Contacts {
		k := keyOf(q, c.Candidate)
		byKey[k] = append(byKey[k], i)
	}
	for i, c := range a.Contacts {
		for _, k := range byKey[keyOf(p, c.Candidate)] {
			o := b.Contacts[k]
			from, to := later(p.At(c.From), q.At(o.From)), earlier(p.At(c.To), q.At(o.To))
			if to.After(from) {
				pairs = append(pairs, pair{i, k, to.Sub(from)})
			}
		}
	}
	slices.SortStableFunc(pairs, func(x, y pair) int { return cmp.Compare(y.shared, x.shared) })
	partner := map[int]int{}
	taken := map[int]bool{}
	for _, x := range pairs {
		if _, ok := partner[x.a]; !ok && !taken[x.b] {
			partner[x.a], taken[x.b] = x.b, true
		}
	}
	out := []Difference{}
	for i := range a.Contacts {
		k, ok := partner[i]
		if !ok {
			k = -1
		}
		out = append(out, difference(p, a, i, q, b, k))
	}
	for k := range b.Contacts {
		if !taken[k] {
			out = append(out, difference(p, a, -1, q, b, k))
		}
	}
	slices.SortStableFunc(out, func(x, y Difference) int {
		return cmp.Or(x.when().Compare(y.when()), cmp.Compare(x.Station, y.Station), cmp.Compare(x.Antenna, y.Antenna), cmp.Compare(x.Kind, y.Kind))
	})
	return out
}

func difference(p *contacts.Problem, a contacts.Plan, i int, q *contacts.Problem, b contacts.Plan, k int) Difference {
	d := Difference{WasContact: i, IsContact: k}
	var name key
	if i >= 0 {
		c := a.Contacts[i]
		name = keyOf(p, c.Candidate)
		d.WasStart, d.WasEnd, d.Kind = p.At(c.From), p.At(c.To), Dropped
	}
	if k >= 0 {
		c := b.Contacts[k]
		name = keyOf(q, c.Candidate)
		d.IsStart, d.IsEnd, d.Kind = q.At(c.From), q.At(c.To), Added
	}
	if i >= 0 && k >= 0 {
		d.Kind = Moved
		if d.WasStart.Equal(d.IsStart) && d.WasEnd.Equal(d.IsEnd) {
			d.Kind = Kept
		}
	}
	d.Request, d.Spacecraft, d.Station, d.Antenna = name.request, name.spacecraft, name.station, name.antenna
	return d
}

// when returns when a contact begins, in the first plan if it is there.
func (d *Difference) when() time.Time {
	if d.WasContact >= 0 {
		return d.WasStart
	}
	return d.IsStart
}

func later(a, b time.Time) time.Time {
	if a.After(b) {
		return a
	}
	return b
}

func earlier(a, b time.Time) time.Time {
	if a.Before(b) {
		return a
	}
	return b
}
