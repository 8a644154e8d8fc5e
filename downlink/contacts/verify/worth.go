package verify

import (
	"cmp"
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// Worth returns what a plan is worth, by its terms. The plan need not keep the rules,
// but its contacts must lie in candidates of the problem.
func Worth(p *contacts.Problem, plan contacts.Plan) contacts.Worth {
	j := &judge{p: p, plan: plan.Contacts}
	w := contacts.Worth{ByContact: make([]float64, len(j.plan)), ByteShare: make([]float64, len(j.plan))}
	j.requests(&w)
	byCraft := make([]float64, len(p.Spacecraft))
	for s := range p.Spacecraft {
		j.passes(s, &w)
	}
	for i := range j.plan {
		byCraft[j.candidate(i).Spacecraft] += w.ByContact[i]
		w.Contacts += w.ByContact[i]
		w.Bytes += w.ByteShare[i]
		a := &p.Antennas[j.candidate(i).Antenna]
		w.Money += a.PerContact + a.PerMinute*(j.plan[i].To-j.plan[i].From).Seconds()/60
	}
	for s := range p.Spacecraft {
		w.Share += p.Weights.Share * math.Min(byCraft[s], p.Spacecraft[s].Share)
	}
	w.Price = p.Weights.Price * w.Money
	w.Changed = j.changed()
	w.Changes = p.Weights.Change * float64(w.Changed)
	w.Value = w.Contacts + w.Share - w.Price - w.Changes
	return w
}

// requests counts the seconds of each request, the most valuable first, until it has
// what it desires. Bytes of its links are counted whole.
func (j *judge) requests(w *contacts.Worth) {
	list := j.order(func(i int) bool { return j.candidate(i).Request >= 0 })
	slices.SortStableFunc(list, func(a, b int) int { return cmp.Compare(j.candidate(b).PerSecond, j.candidate(a).PerSecond) })
	left := make([]ms, len(j.p.Requests))
	for r := range left {
		left[r] = j.p.Requests[r].Desired
	}
	for _, i := range list {
		c := j.candidate(i)
		counted := min(j.plan[i].To-j.plan[i].From, left[c.Request])
		left[c.Request] -= counted
		w.ByContact[i] = c.PerSecond * counted.Seconds()
		w.ByteShare[i] = c.Bytes(j.plan[i].Span)
	}
}

// piece is a stretch of a spacecraft's passes in which rates are constant.
type piece struct {
	from, to ms
	contact  int     // place in the plan of the contact that counts
	bytes    float64 // that it can bring in the piece
	value    float64 // of these bytes without a recorder
}

// passes counts the own passes of a spacecraft.
func (j *judge) passes(s int, w *contacts.Worth) {
	craft := &j.p.Spacecraft[s]
	list := j.order(func(i int) bool { return j.candidate(i).Spacecraft == s && j.candidate(i).Request < 0 })
	pieces := j.pieces(list, craft.SameData, craft.Recorder != nil)
	if craft.Recorder == nil {
		for _, x := range pieces {
			w.ByContact[x.contact] += x.value
			w.ByteShare[x.contact] += x.bytes
		}
		return
	}
	onBoard(craft.Recorder, pieces, j.p.Length, w)
}

// pieces cuts contacts where one begins or ends or a rate changes. Where data are the
// same, only the contact counts that brings the most in the piece (value, then bytes; with a
// recorder bytes alone), the first of equals.
func (j *judge) pieces(list []int, sameData, recorded bool) []piece {
	cuts := []ms{}
	for _, i := range list {
		cuts = append(cuts, j.plan[i].From, j.plan[i].To)
		for _, l := range j.candidate(i).Links {
			for _, v := range l.Volume {
				cuts = append(cuts, v.At)
			}
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	var out []piece
	for _, i := range list {
		k, _ := slices.BinarySearch(cuts, j.plan[i].From)
		for ; cuts[k] < j.plan[i].To; k++ {
			x := piece{from: cuts[k], to: cuts[k+1], contact: i}
			span := contacts.Span{From: x.from, To: x.to}
			for l := range j.candidate(i).Links {
				b := j.candidate(i).Links[l].Bytes(span)
				x.bytes += b
				x.value += b * j.candidate(i).Links[l].PerByte
			}
			out = append(out, x)
		}
	}
	slices.SortStableFunc(out, func(a, b piece) int { return cmp.Compare(a.from, b.from) })
	if !sameData {
		return out
	}
	best := out[:0]
	for _, x := range out {
		if n := len(best); n > 0 && best[n-1].from == x.from {
			if b := &best[n-1]; !recorded && x.value > b.value || (recorded || x.value == b.value) && x.bytes > b.bytes {
				*b = x
			}
			continue
		}
		best = append(best, x)
	}
	return best
}

// changed counts the contacts that differ from the plan in force and what is fixed: in
// each window the first of one is compared with the first of the other, and so on.
func (j *judge) changed() int {
	if len(j.p.InForce) == 0 {
		return 0
	}
	type key struct{ candidate, rank int }
	number := func(list []contacts.Contact) map[key]contacts.Span {
		list = slices.Clone(list)
		slices.SortFunc(list, func(a, b contacts.Contact) int { return cmp.Compare(a.From, b.From) })
		seen, out := map[int]int{}, map[key]contacts.Span{}
		for _, c := range list {
			out[key{c.Candidate, seen[c.Candidate]}] = c.Span
			seen[c.Candidate]++
		}
		return out
	}
	before := slices.Clone(j.p.InForce)
	for _, h := range j.p.Held {
		if !j.inForce(h) {
			before = append(before, h)
		}
	}
	was, is := number(before), number(j.plan)
	n := 0
	for k, s := range is {
		if before, ok := was[k]; !ok || before != s {
			n++
		}
	}
	for k := range was {
		if _, ok := is[k]; !ok {
			n++
		}
	}
	return n
}
