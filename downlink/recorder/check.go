package recorder

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// mostBytes and mostSeconds bound every figure of a plan, so that all sums are finite
// and a byte is not lost in them.
const (
	mostBytes   = 1e15
	mostSeconds = 1e8
)

// checker collects faults.
type checker struct{ faults []error }

func (c *checker) number(what string, v, low, high float64, u, allowed string) {
	if !(v >= low && v <= high) {
		c.faults = append(c.faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
	}
}

func (c *checker) say(format string, args ...any) {
	c.faults = append(c.faults, fmt.Errorf(format, args...))
}

func (c *checker) rate(what string, v float64) {
	c.number(what, v, 0, mostBytes, "B/s", "0 to 1e15 B/s")
}

// tiny is the least number greater than 0.
const tiny = math.SmallestNonzeroFloat64

// Check returns every fault of the plan at once.
func (p *Plan) Check() error {
	c := &checker{}
	c.number("length", p.Length, tiny, mostSeconds, "s", "greater than 0 and at most 1e8 s")
	c.number("capacity", p.Capacity, tiny, mostBytes, "B", "greater than 0 and at most 1e15 B")
	if !(p.Housekeeping >= 0 && p.Housekeeping < 1) {
		c.number("share of housekeeping", p.Housekeeping, 0, 0, "", "0 and more, less than 1")
	}
	c.number("copies", float64(p.Copies), 0, 100, "", "0 to 100")
	if len(p.Classes) == 0 {
		c.say("there is no class of data; give one at least")
	}
	p.checkClasses(c)
	uplink := p.checkContacts(c)
	if uplink {
		c.number("time between acknowledgements", p.Acknowledge.Every, 0.1, mostSeconds, "s", "0.1 to 1e8 s")
		c.number("delay of acknowledgements", p.Acknowledge.Delay, 0, mostSeconds, "s", "0 to 1e8 s")
	}
	if p.WithoutUplink == KeepForUplink && !uplink && len(p.Contacts) > 0 {
		c.say("data are kept until an uplink acknowledges them, and no contact has one; take %s", DeleteWhenSent)
	}
	if p.WithoutUplink == KeepForUplink && p.Copies > 1 {
		c.say("copies have no effect where data are kept until they are acknowledged; leave them out")
	}
	lines := map[string]bool{}
	for _, l := range p.Lines {
		c.number(fmt.Sprintf("ground line of %q", l.Station), l.BytesPerSecond, tiny, mostBytes, "B/s", "greater than 0 and at most 1e15 B/s")
		if lines[l.Station] {
			c.say("ground line of %q: it is given twice; give it once", l.Station)
		}
		lines[l.Station] = true
	}
	return errors.Join(c.faults...)
}

func (p *Plan) checkClasses(c *checker) {
	names := map[string]bool{}
	onBoard := 0.0
	for _, k := range p.Classes {
		what := fmt.Sprintf("class %q: ", k.Name)
		if names[k.Name] {
			c.say("%sthe name stands twice; give each class one of its own", what)
		}
		names[k.Name] = true
		for _, m := range k.Made {
			c.rate(what+"rate", m.BytesPerSecond)
			if !(m.To > m.From) || math.Abs(m.From) > mostSeconds || math.Abs(m.To) > mostSeconds {
				c.say("%sdata made from %g to %g s: the end must follow the begin", what, m.From, m.To)
			}
		}
		c.number(what+"on board at the start", k.OnBoard, 0, mostBytes, "B", "0 to 1e15 B")
		c.number(what+"age of the data on board", k.OnBoardAge, 0, mostSeconds, "s", "0 to 1e8 s")
		onBoard += k.OnBoard
	}
	if onBoard > p.Capacity {
		c.say("%g B are on board at the start, more than the capacity of %g B", onBoard, p.Capacity)
	}
}

// checkContacts tells besides whether a contact has an uplink.
func (p *Plan) checkContacts(c *checker) (uplink bool) {
	before := math.Inf(-1)
	for i, k := range p.Contacts {
		what := fmt.Sprintf("contact %d (%s): ", i+1, k.Station)
		uplink = uplink || k.Uplink
		switch {
		case !(k.From >= 0 && k.To > k.From && k.To <= p.Length):
			c.say("%sit lasts from %g to %g s; it must lie within the plan, 0 to %g s, and end after it begins", what, k.From, k.To, p.Length)
		case k.From < before:
			c.say("%sit begins at %g s, before the one in front of it ends at %g s; contacts of a spacecraft do not overlap", what, k.From, before)
		}
		before = k.To
		at := k.From
		for _, s := range k.Steps {
			c.rate(what+"rate", s.BytesPerSecond)
			c.number(what+"share lost", s.Loss, 0, 1, "", "0 to 1")
			if !(s.From >= at && s.To > s.From && s.To <= k.To) {
				c.say("%sstep from %g to %g s: steps lie within the contact and follow one another", what, s.From, s.To)
			}
			at = s.To
		}
	}
	return uplink
}
