package solve

import (
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// fits tells whether a contact, which lies in a window of the model, can be added without
// breaking a rule.
func (b *board) fits(c contacts.Contact) bool {
	w := &b.m.p.Candidates[c.Candidate]
	if l := c.Length(); l < w.Least || w.Greatest > 0 && l > w.Greatest {
		return false
	}
	if !b.m.split && len(b.groups[b.m.group(c.Candidate)]) > 0 {
		return false
	}
	if !b.antennaFree(c) || !b.craftFree(c) || !b.sharedFree(c) || b.clashes(c) || !b.commanded(c) {
		return false
	}
	price := b.m.p.Price(c)
	for _, k := range b.named[c.Candidate] {
		if !b.limits[k].allows(c.Span, price) {
			return false
		}
	}
	return true
}

func (b *board) antennaFree(c contacts.Contact) bool {
	a := b.m.p.Candidates[c.Candidate].Antenna
	list := b.antennas[a]
	busy := b.m.p.Busy(c)
	i := place(list, c.From)
	if i < len(list) && list[i].busy.From < busy.To || i > 0 && list[i-1].busy.To > busy.From {
		return false
	}
	s := b.m.p.Antennas[a].Slew
	return s == nil || b.cableFree(s, list, i, c)
}

// craftFree judges the contact against the others of its spacecraft.
func (b *board) craftFree(c contacts.Contact) bool {
	s := b.m.p.Candidates[c.Candidate].Spacecraft
	craft := &b.m.p.Spacecraft[s]
	list := b.crafts[s]
	far := max(craft.Between, craft.Repoint)
	together := []contacts.Span{c.Span}
	i := place(list, c.From)
	for k := i; k < len(list) && list[k].From < c.To+far; k++ {
		if !b.pairFits(craft, c, list[k].Contact, &together) {
			return false
		}
	}
	for k := i - 1; k >= 0; k-- {
		// Ends are in order as long as contacts do not overlap; where they may, go on for a day.
		if list[k].To+far <= c.From && (craft.AtOnce < 2 || list[k].From+contacts.Day < c.From) {
			break
		}
		if !b.pairFits(craft, list[k].Contact, c, &together) {
			return false
		}
	}
	most := max(1, craft.AtOnce)
	for _, x := range together {
		n := 0
		for _, y := range together {
			if y.From <= x.From && x.From < y.To {
				n++
			}
		}
		if n > most {
			return false
		}
	}
	return true
}

// pairFits judges two contacts of a spacecraft, first the one that begins first, and
// notes those that overlap.
func (b *board) pairFits(craft *contacts.Spacecraft, first, second contacts.Contact, together *[]contacts.Span) bool {
	if second.From >= first.To {
		return second.From-first.To >= b.m.gap(first.Candidate, second.Candidate)
	}
	if craft.AtOnce < 2 {
		return false
	}
	other := first
	if (*together)[0] == first.Span {
		other = second
	}
	*together = append(*together, other.Span)
	o := first.Overlap(second.Span)
	return o >= craft.HandOver.Least && (craft.HandOver.Greatest == 0 || o <= craft.HandOver.Greatest)
}

func (b *board) sharedFree(c contacts.Contact) bool {
	for _, k := range b.sharing[b.m.p.Candidates[c.Candidate].Antenna] {
		s := &b.m.p.Shared[k]
		span := func(x *item) contacts.Span { return x.Span }
		mine := c.Span
		if s.Busy {
			span = func(x *item) contacts.Span { return x.busy }
			mine = b.m.p.Busy(c)
		}
		near := []contacts.Span{mine}
		for _, x := range b.shared[k] {
			if span(x).Overlap(mine) > 0 {
				near = append(near, span(x))
			}
		}
		for _, x := range near {
			n := 0
			for _, y := range near {
				if y.From <= x.From && x.From < y.To {
					n++
				}
			}
			if n > s.Capacity {
				return false
			}
		}
	}
	return true
}

// commanded tells whether a downlink has its commands loaded.
func (b *board) commanded(c contacts.Contact) bool {
	w := &b.m.p.Candidates[c.Candidate]
	k := b.m.p.Spacecraft[w.Spacecraft].Command
	if k == nil || !w.Downlink {
		return true
	}
	loaded := func(end ms) bool {
		return c.From-end >= k.Lead && (k.Valid == 0 || c.From-end <= k.Valid)
	}
	return slices.ContainsFunc(k.Loaded, loaded) || slices.ContainsFunc(b.crafts[w.Spacecraft], func(x *item) bool {
		return b.m.p.Candidates[x.Candidate].Uplink && x.Span != c.Span && loaded(x.To)
	})
}

// cableFree tells whether some way of laying the cable lets the antenna fly a contact
// between the others. Only contacts that follow closely matter: in a pause as long as
// the longest turn every way is open again.
func (b *board) cableFree(s *contacts.Slew, list []*item, at int, c contacts.Contact) bool {
	longest := ms(1000 * math.Max((s.ToDeg-s.FromDeg)/s.AzimuthDegPerS, 180/s.ElevationDegPerS))
	from, to := at, at
	begin, end := b.m.p.Busy(c).From, b.m.p.Busy(c).To
	for from > 0 && begin-list[from-1].busy.To <= longest {
		from--
		begin = list[from].busy.From
	}
	for to < len(list) && list[to].busy.From-end <= longest {
		end = list[to].busy.To
		to++
	}
	row := []contacts.Contact{}
	for k := from; k < to; k++ {
		if k == at {
			row = append(row, c)
		}
		row = append(row, list[k].Contact)
	}
	if at == to {
		row = append(row, c)
	}
	var open []float64
	for k, x := range row {
		turns := b.m.turns(s, x)
		if k == 0 {
			open = turns
			continue
		}
		idle := (b.m.p.Busy(x).From - b.m.p.Busy(row[k-1]).To).Seconds()
		az0, el0 := direction(&b.m.p.Candidates[row[k-1].Candidate], row[k-1].To)
		az, el := direction(&b.m.p.Candidates[x.Candidate], x.From)
		turns = slices.DeleteFunc(turns, func(turn float64) bool {
			return !slices.ContainsFunc(open, func(was float64) bool {
				return math.Abs(az+turn-az0-was) <= idle*s.AzimuthDegPerS && math.Abs(el-el0) <= idle*s.ElevationDegPerS
			})
		})
		open = turns
		if len(open) == 0 {
			return false
		}
	}
	return len(open) > 0
}

// turns returns the turns (degrees) with which the cable holds a contact.
func (m *model) turns(s *contacts.Slew, c contacts.Contact) []float64 {
	w := &m.p.Candidates[c.Candidate]
	a, _ := direction(w, c.From)
	z, _ := direction(w, c.To)
	low, high := math.Min(a, z), math.Max(a, z)
	for _, x := range w.Course {
		if c.From < x.At && x.At < c.To {
			low, high = math.Min(low, x.AzimuthDeg), math.Max(high, x.AzimuthDeg)
		}
	}
	var out []float64
	for turn := 360 * math.Ceil((s.FromDeg-low)/360); high+turn <= s.ToDeg; turn += 360 {
		out = append(out, turn)
	}
	return out
}

// direction returns azimuth and elevation in degrees, straight between samples.
func direction(w *contacts.Candidate, t ms) (az, el float64) {
	x := w.Course
	k, _ := slices.BinarySearchFunc(x, t, func(a contacts.Aim, t ms) int {
		if a.At < t {
			return -1
		}
		return 1
	})
	if k == 0 {
		return x[0].AzimuthDeg, x[0].ElevationDeg
	}
	if k == len(x) {
		return x[k-1].AzimuthDeg, x[k-1].ElevationDeg
	}
	f := float64(t-x[k-1].At) / float64(x[k].At-x[k-1].At)
	return x[k-1].AzimuthDeg + f*(x[k].AzimuthDeg-x[k-1].AzimuthDeg), x[k-1].ElevationDeg + f*(x[k].ElevationDeg-x[k-1].ElevationDeg)
}
