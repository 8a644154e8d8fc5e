package solve

import (
	"cmp"
	"slices"
)

// earn adds to what the contacts of a spacecraft are worth, its share included.
func (b *board) earn(craft int, value float64) {
	if value == 0 {
		return
	}
	s := b.m.p.Spacecraft[craft].Share
	w := b.m.p.Weights.Share
	before := b.earned[craft]
	b.earned[craft] += value
	b.total += value + w*(min(b.earned[craft], s)-min(before, s))
}

func (b *board) setValue(x *item, value float64) {
	b.earn(b.m.p.Candidates[x.Candidate].Spacecraft, value-x.value)
	x.value = value
}

// revalue values anew what the coming or going of a contact changes.
func (b *board) revalue(x *item) {
	c := &b.m.p.Candidates[x.Candidate]
	if c.Request >= 0 {
		b.revalueRequest(c.Request)
		return
	}
	craft := &b.m.p.Spacecraft[c.Spacecraft]
	if craft.Recorder != nil || craft.SameData {
		b.revalueCraft(c.Spacecraft)
		return
	}
	list := b.groups[x.group]
	if i := place(list, x.From); i < len(list) && list[i] == x {
		sum := 0.0
		for k := range c.Links {
			sum += c.Links[k].PerByte * c.Links[k].Bytes(x.Span)
		}
		b.setValue(x, sum)
	}
}

// revalueRequest counts the most valuable seconds of a request first.
func (b *board) revalueRequest(r int) {
	p := b.m.p
	list := b.groups[r]
	left := p.Requests[r].Desired
	if len(list) > 1 {
		list = slices.Clone(list)
		slices.SortStableFunc(list, func(x, y *item) int {
			return cmp.Compare(p.Candidates[y.Candidate].PerSecond, p.Candidates[x.Candidate].PerSecond)
		})
	}
	for _, x := range list {
		counted := min(x.Length(), left)
		left -= counted
		b.setValue(x, p.Candidates[x.Candidate].PerSecond*counted.Seconds())
	}
}

// revalueCraft values all passes of a spacecraft whose contacts share what they bring.
func (b *board) revalueCraft(craft int) {
	var list []*item
	for _, x := range b.crafts[craft] {
		if b.m.p.Candidates[x.Candidate].Request < 0 {
			list = append(list, x)
		}
	}
	values := b.m.sharedValues(craft, list)
	for i, x := range list {
		b.setValue(x, values[i])
	}
}
