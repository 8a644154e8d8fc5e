package solve

import (
	"math"
	"math/rand/v2"
	"slices"

	"slantwise/downlink/contacts"
)

// search improves the plan on a board by emptying a part of it and filling it again.
type search struct {
	b *board
	d *dual
	r *rand.Rand

	guides [len(shares)][]float64 // shares of the prices that the bound has found last
	guide  []float64              // one of them, drawn for each move
	share  int                    // which one
	// densities are those found so far, by share and window; NaN: not yet
	densities [][]float64
	cell      ms

	best      contacts.Plan
	bestValue float64
	ahead     bool    // the board holds the best plan, which best does not have yet
	heat      float64 // value that a move may lose

	chain    chain
	slots    []slot
	refs     []int // window of each slot
	gains    []float64
	open     []contacts.Span
	longest  []ms    // longest window of each antenna
	requests [][]int // windows of each request
}

func newSearch(m *model, d *dual, seed uint64, start *contacts.Plan) *search {
	s := &search{b: newBoard(m), d: d, r: rand.New(rand.NewPCG(seed, 1)), longest: make([]ms, len(m.p.Antennas))}
	shortest := contacts.Day
	for _, w := range m.windows {
		s.longest[w.antenna] = max(s.longest[w.antenna], w.to-w.from)
		shortest = min(shortest, w.least)
	}
	// Cells of chains: whole steps, about a twentieth of the shortest contact.
	s.cell = max(1, shortest/20/m.step) * m.step
	if u := d.unit(); u > s.cell && u%m.step == 0 && u <= shortest {
		s.cell = u
	}
	for range shares {
		s.densities = append(s.densities, make([]float64, len(m.windows)))
	}
	s.price(nil)
	s.guideBy(full)
	if start != nil {
		s.begin(*start)
	}
	s.greedy()
	s.keep()
	s.copy()
	return s
}

// shares of the prices by which moves are guided.
var shares = [...]float64{0, 0.5, 0.9, 1}

const full = len(shares) - 1

// price takes over new prices; nil: none yet. Pools have theirs in full in every share,
// since what they say is what a byte is worth.
func (s *search) price(prices []float64) {
	for k, share := range shares {
		guide := make([]float64, len(s.d.rows))
		for r := range guide {
			reward := s.d.rows[r].reward
			switch {
			case prices == nil && reward != nil:
				guide[r] = reward[0].each / 2
			case reward != nil:
				guide[r] = max(prices[r], reward[0].each/100)
			case prices != nil:
				guide[r] = prices[r] * share
			}
		}
		s.guides[k] = guide
		for i := range s.densities[k] {
			s.densities[k][i] = math.NaN()
		}
	}
	s.guideBy(s.share)
}

// guideBy guides what follows by one of the shares of the prices.
func (s *search) guideBy(share int) { s.share, s.guide = share, s.guides[share] }

// keep notes the plan on the board if it is the best so far. Copying it is put off until
// the board is about to leave it.
func (s *search) keep() {
	if s.best.Contacts == nil || s.b.total > s.bestValue+1e-9*math.Abs(s.bestValue) {
		s.bestValue, s.ahead = s.b.total, true
		if s.best.Contacts == nil {
			s.copy()
		}
	}
}

// copy copies the best plan off the board where it stands there alone.
func (s *search) copy() {
	if s.ahead {
		s.best, s.ahead = s.b.plan(), false
	}
}

// windowsIn returns the windows of an antenna that touch a span.
func (s *search) windowsIn(antenna int, in contacts.Span) []int {
	ws := s.b.m.windows
	lo, _ := slices.BinarySearchFunc(ws, in.From-s.longest[antenna], func(w window, t ms) int {
		if w.antenna < antenna || w.antenna == antenna && w.from < t {
			return -1
		}
		return 1
	})
	var out []int
	for ; lo < len(ws) && ws[lo].antenna == antenna && ws[lo].from < in.To; lo++ {
		if ws[lo].to > in.From {
			out = append(out, lo)
		}
	}
	return out
}

// run makes a number of moves.
func (s *search) run(moves int, stop func() bool) {
	if len(s.b.m.windows) == 0 {
		return
	}
	for range moves {
		if stop() {
			break
		}
		n, before := len(s.b.log), s.b.total
		s.move()
		s.b.settle()
		worse := s.b.total < before-1e-12*math.Abs(before)
		switch {
		case worse && s.b.total < before-s.heat*s.r.Float64():
			s.b.undo(n)
		case worse && s.ahead:
			s.b.undo(n)
			s.copy() // the next worse plan may be taken
		default:
			s.b.log = s.b.log[:0]
			s.keep()
		}
	}
	s.copy()
}

// move empties and fills a part of the plan that is drawn at random.
func (s *search) move() {
	s.guideBy(max(0, s.r.IntN(len(shares)+1)-1))
	i := s.r.IntN(len(s.b.m.windows))
	w := s.b.m.windows[i]
	reach := ms(float64(w.most+w.setUp+w.tearDown) * (1 + 7*s.r.Float64()))
	middle := w.from + ms(s.r.Float64()*float64(w.to-w.from))
	in := contacts.Span{From: middle - reach/2, To: middle + reach/2}
	switch k := s.r.IntN(10); {
	case k < 3:
		s.replan([]int{w.antenna}, nil, in)
	case k < 5:
		s.replan(nil, []int{w.craft}, in)
	case k < 7:
		s.replan([]int{w.antenna, s.related(&w, in)}, []int{w.craft}, in)
	default:
		s.force(i)
	}
}

// related draws another antenna that has windows of the same spacecraft or request.
func (s *search) related(w *window, in contacts.Span) int {
	k := s.r.IntN(len(s.b.m.windows))
	for range 20 {
		if o := &s.b.m.windows[k]; o.craft == w.craft && o.antenna != w.antenna && o.from < in.To && o.to > in.From {
			return o.antenna
		}
		k = s.r.IntN(len(s.b.m.windows))
	}
	return s.b.m.windows[k].antenna
}

// replan empties antennas and spacecraft within a span and plans them anew, chain by
// chain; then whatever has lost its place is tried elsewhere.
func (s *search) replan(antennas, crafts []int, in contacts.Span) {
	var lost []int
	empty := func(list []*item) {
		for _, x := range slices.Clone(list) {
			if !x.must && x.From < in.To && x.To > in.From {
				lost = append(lost, x.group)
				s.b.remove(x)
			}
		}
	}
	for _, a := range antennas {
		empty(near(s.b.antennas[a], in))
	}
	for _, c := range crafts {
		empty(near(s.b.crafts[c], in))
	}
	// A little wider, so that what was cut off at an edge can come back.
	in = contacts.Span{From: in.From - (in.To-in.From)/4, To: in.To + (in.To-in.From)/4}
	var around []int
	for _, k := range s.r.Perm(len(antennas) + len(crafts)) {
		var list []int
		if k < len(antennas) {
			list = s.windowsIn(antennas[k], in)
		} else {
			list = s.craftWindows(crafts[k-len(antennas)], in)
		}
		around = append(around, list...)
		s.replanChain(list, in, k >= len(antennas))
	}
	s.fill(around, contacts.Span{From: 0, To: s.b.m.p.Length}, 0.3)
	s.elsewhere(lost)
}

// near returns the part of a list that can touch a span.
func near(list []*item, in contacts.Span) []*item {
	lo := place(list, in.From)
	for lo > 0 && list[lo-1].To > in.From {
		lo--
	}
	return list[lo:place(list, in.To)]
}

// craftWindows returns the windows of a spacecraft that touch a span.
func (s *search) craftWindows(craft int, in contacts.Span) []int {
	var out []int
	for a := range s.longest {
		for _, i := range s.windowsIn(a, in) {
			if s.b.m.windows[i].craft == craft {
				out = append(out, i)
			}
		}
	}
	return out
}

// elsewhere tries groups that have lost contacts in all their windows.
func (s *search) elsewhere(groups []int) {
	slices.Sort(groups)
	everywhere := contacts.Span{From: 0, To: s.b.m.p.Length}
	for _, g := range slices.Compact(groups) {
		s.fill(s.groupWindows(g), everywhere, 0.3)
	}
}

// groupWindows returns the windows of a request or a pass.
func (s *search) groupWindows(g int) []int {
	m := s.b.m
	if g >= len(m.p.Requests) {
		return m.byCand[g-len(m.p.Requests)]
	}
	if s.requests == nil {
		s.requests = make([][]int, len(m.p.Requests))
		for i, w := range m.windows {
			if w.group < len(m.p.Requests) {
				s.requests[w.group] = append(s.requests[w.group], i)
			}
		}
	}
	return s.requests[g]
}
