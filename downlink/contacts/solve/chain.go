package solve

// slot is a window as a chain sees it: cells of the grid from the begin of the chain. A
// contact from cell s to cell e gains end[e-from] - begin[s-from] - fixed.
type slot struct {
	from, to    int
	least, most int
	setUp       int
	tearDown    int
	fixed       float64
	begin, end  []float64

	// State of the run.
	best  float64
	arg   int32
	queue []int32 // begins that may still be the best, where most binds
	head  int
}

// pick is a contact that a chain takes.
type pick struct {
	slot int
	s, e int
}

// chain solves the plan of one antenna, or of one spacecraft, exactly: the contacts that
// gain the most, apart from one another. Its slices are kept for the next run.
type chain struct {
	value []float64 // most gain with everything over by a cell
	last  []int32   // the cell at or before it at which that was gained
	who   []int32
	start []int32
	picks []pick
}

// run returns the gain and the contacts, the last first; slots are ordered by from and
// begin their set-up at cell 0 or later; cells is the last at which a tear-down ends.
// Every least length is one cell or more.
//
// The gain up to a cell follows from gains at least setUp+least+tearDown cells earlier,
// so that blocks of this length can be worked off slot by slot.
func (c *chain) run(slots []slot, cells int) (float64, []pick) {
	c.grow(cells + 1)
	block := cells
	for i := range slots {
		s := &slots[i]
		block = min(block, s.setUp+s.least+s.tearDown)
		s.best, s.arg, s.head, s.queue = negative, 0, 0, s.queue[:0]
	}
	block = max(block, 1)
	c.value[0], c.last[0], c.who[0] = 0, 0, -1
	low := 0 // slots before it are over
	for t := 1; t <= cells; t += block {
		until := min(t+block, cells+1)
		carry := c.value[t-1]
		for k := t; k < until; k++ {
			c.value[k], c.who[k] = carry, -1
		}
		for low < len(slots) && slots[low].to+slots[low].tearDown < t {
			low++
		}
		for i := low; i < len(slots); i++ {
			s := &slots[i]
			if s.from+s.least+s.tearDown >= until {
				if s.from >= until {
					break
				}
				continue
			}
			if s.most < s.to-s.from {
				c.blockBounded(s, int32(i), t, until)
			} else {
				c.block(s, int32(i), t, until)
			}
		}
		for k := t; k < until; k++ {
			if c.value[k] > c.value[k-1] {
				c.last[k] = int32(k)
			} else {
				c.value[k], c.last[k] = c.value[k-1], c.last[k-1]
			}
		}
	}
	return c.value[cells], c.trace(slots, cells)
}

const negative = -1e300

func (c *chain) grow(n int) {
	if len(c.value) < n {
		c.value, c.last = make([]float64, n), make([]int32, n)
		c.who, c.start = make([]int32, n), make([]int32, n)
	}
}

// block works off the ends of a slot whose tear-down ends in [t, until).
func (c *chain) block(s *slot, who int32, t, until int) {
	e0, e1 := max(t-s.tearDown, s.from+s.least), min(until-s.tearDown, s.to+1)
	if e0 >= e1 {
		return
	}
	n := e1 - e0
	before := c.value[e0-s.least-s.setUp:][:n]
	begin := s.begin[e0-s.least-s.from:][:n]
	end := s.end[e0-s.from:][:n]
	value := c.value[e0+s.tearDown:][:n]
	best, arg := s.best, s.arg
	for k := range n {
		if a := before[k] - begin[k]; a > best {
			best, arg = a, int32(e0-s.least+k)
		}
		if v := best + end[k] - s.fixed; v > value[k] {
			value[k] = v
			c.who[e0+s.tearDown+k], c.start[e0+s.tearDown+k] = who, arg
		}
	}
	s.best, s.arg = best, arg
}

// blockBounded is block for a slot whose contacts have a greatest length: the best begin
// among those not too far back is kept in a queue of falling gains.
func (c *chain) blockBounded(s *slot, who int32, t, until int) {
	e0, e1 := max(t-s.tearDown, s.from+s.least), min(until-s.tearDown, s.to+1)
	gain := func(b int) float64 { return c.value[b-s.setUp] - s.begin[b-s.from] }
	for e := e0; e < e1; e++ {
		b := e - s.least
		a := gain(b)
		for len(s.queue) > s.head && a > gain(int(s.queue[len(s.queue)-1])) {
			s.queue = s.queue[:len(s.queue)-1]
		}
		s.queue = append(s.queue, int32(b))
		for int(s.queue[s.head]) < e-s.most {
			s.head++
		}
		front := int(s.queue[s.head])
		if v := gain(front) + s.end[e-s.from] - s.fixed; v > c.value[e+s.tearDown] {
			c.value[e+s.tearDown] = v
			c.who[e+s.tearDown], c.start[e+s.tearDown] = who, int32(front)
		}
	}
}

// trace follows the gain back.
func (c *chain) trace(slots []slot, cells int) []pick {
	c.picks = c.picks[:0]
	for t := int(c.last[cells]); t > 0; {
		i := c.who[t]
		s := &slots[i]
		b := int(c.start[t])
		c.picks = append(c.picks, pick{int(i), b, t - s.tearDown})
		t = int(c.last[b-s.setUp])
	}
	return c.picks
}
