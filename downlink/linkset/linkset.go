package linkset

import (
	"errors"
	"fmt"

	"slantwise/orbit/unit"
)

// Order is how the links of a set share the time of a pass.
type Order int

// Orders.
const (
	Together Order = iota // all at once
	InTurns               // up, then down, then up again
	UpFirst               // up until enough has been sent, then down
)

// String returns the order as the scenario writes it.
func (o Order) String() string { return [...]string{"together", "in_turns", "up_first"}[o] }

// Rule is how a set shares a pass. Lengths of time are in seconds.
type Rule struct {
	Order  Order
	Change float64 // dead time at each change of direction, 0 or greater

	Turn    float64 // of InTurns: from the begin of one turn up to the next, 0.1 or more
	UpShare float64 // of InTurns: the share of it that is for up, in (0, 1)

	// Of UpFirst, one of the two: how long the uplinks work before the downlinks begin,
	// or how much they bring up.
	UpSeconds, UpBytes float64
}

// Span is a time, in seconds after the begin of a pass, in which a link gets something
// through.
type Span struct {
	From, To       float64
	BytesPerSecond float64
}

// Link is a link of a set along a pass: spans in order and apart from one another.
type Link struct {
	Name  string
	Up    bool
	Spans []Span
}

// Share is what a link gets of a pass under a rule.
type Share struct {
	Link           string
	Up             bool
	Seconds, Bytes float64
	AloneSeconds   float64 // if it had the whole pass
	AloneBytes     float64
	Spans          []Span // what is left of its own
}

// Check returns every fault of the rule.
func (r *Rule) Check() error {
	var faults []error
	check := func(what string, v float64, fine bool, u, allowed string) {
		if !fine {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	check("dead time at a change", r.Change, r.Change >= 0 && r.Change <= 3600, "s", "0 to 3600 s")
	switch r.Order {
	case InTurns:
		check("length of a turn", r.Turn, r.Turn >= 0.1 && r.Turn <= 86400, "s", "0.1 to 86400 s")
		check("share of a turn for up", r.UpShare, r.UpShare > 0 && r.UpShare < 1, "", "greater than 0 and less than 1")
		if down := r.Turn*(1-r.UpShare) - 2*r.Change; len(faults) == 0 && !(down > 0) {
			faults = append(faults, fmt.Errorf("a turn of %g s with %g of it up and %g s at each of its two changes leaves no time down", r.Turn, r.UpShare, r.Change))
		}
	case UpFirst:
		check("time for up", r.UpSeconds, r.UpSeconds >= 0 && r.UpSeconds <= 86400, "s", "0 to 86400 s")
		check("bytes for up", r.UpBytes, r.UpBytes >= 0 && r.UpBytes <= 1e15, "B", "0 to 1e15 B")
		if len(faults) == 0 && (r.UpSeconds > 0) == (r.UpBytes > 0) {
			faults = append(faults, errors.New("up first needs how long or how many bytes, one of the two"))
		}
	}
	return errors.Join(faults...)
}

// Divide returns the share of each link of a pass of a length in seconds, in the order of
// the links. The rule must have passed Check.
func Divide(rule Rule, length float64, links []Link) []Share {
	up, down := rule.windows(length, links)
	out := make([]Share, len(links))
	for i, l := range links {
		s := Share{Link: l.Name, Up: l.Up}
		s.AloneSeconds, s.AloneBytes = total(within(l.Spans, []Span{{From: 0, To: length}}))
		if l.Up {
			s.Spans = within(l.Spans, up)
		} else {
			s.Spans = within(l.Spans, down)
		}
		s.Seconds, s.Bytes = total(s.Spans)
		out[i] = s
	}
	return out
}

// windows returns when the radio is for up and when for down.
func (r *Rule) windows(length float64, links []Link) (up, down []Span) {
	switch r.Order {
	case InTurns:
		for k := 0; ; k++ {
			from := float64(k) * r.Turn
			if from >= length {
				return up, down
			}
			middle, end := from+r.Turn*r.UpShare, from+r.Turn
			up = append(up, Span{From: from, To: min(middle, length)})
			if a, b := middle+r.Change, min(end-r.Change, length); b > a {
				down = append(down, Span{From: a, To: b})
			}
		}
	case UpFirst:
		end := r.upDone(length, links)
		up = []Span{{From: 0, To: end}}
		if end+r.Change < length {
			down = []Span{{From: end + r.Change, To: length}}
		}
		return up, down
	}
	all := []Span{{From: 0, To: length}}
	return all, all
}

// upDone is when the uplinks have worked long enough, or brought up enough, all of them
// together; the pass's end where they never do.
func (r *Rule) upDone(length float64, links []Link) float64 {
	var edges []Span
	for _, l := range links {
		if l.Up {
			edges = append(edges, within(l.Spans, []Span{{From: 0, To: length}})...)
		}
	}
	low, high := 0.0, length
	enough := func(t float64) bool {
		seconds, bytes := union(edges, t)
		return r.UpSeconds > 0 && seconds >= r.UpSeconds || r.UpBytes > 0 && bytes >= r.UpBytes
	}
	if !enough(high) {
		return length
	}
	for range 60 { // what has gone up never falls
		if mid := (low + high) / 2; enough(mid) {
			high = mid
		} else {
			low = mid
		}
	}
	return high
}

// union returns for how long up to t any span holds, and what all bring by then.
func union(spans []Span, t float64) (seconds, bytes float64) {
	var cuts []Span
	for _, s := range spans {
		if b := min(s.To, t); b > s.From {
			bytes += (b - s.From) * s.BytesPerSecond
			cuts = append(cuts, Span{From: s.From, To: b})
		}
	}
	// Few spans: time counts once where they overlap.
	for i, c := range cuts {
		left := []Span{c}
		for _, before := range cuts[:i] {
			left = without(left, before)
		}
		for _, l := range left {
			seconds += l.To - l.From
		}
	}
	return seconds, bytes
}

func without(spans []Span, cut Span) (out []Span) {
	for _, s := range spans {
		if cut.To <= s.From || cut.From >= s.To {
			out = append(out, s)
			continue
		}
		if cut.From > s.From {
			out = append(out, Span{From: s.From, To: cut.From})
		}
		if cut.To < s.To {
			out = append(out, Span{From: cut.To, To: s.To})
		}
	}
	return out
}

// within returns what windows leave of spans; both are in order.
func within(spans, windows []Span) []Span {
	var out []Span
	k := 0
	for _, s := range spans {
		for k > 0 && windows[k-1].To > s.From {
			k--
		}
		for ; k < len(windows) && windows[k].From < s.To; k++ {
			if a, b := max(s.From, windows[k].From), min(s.To, windows[k].To); b > a {
				out = append(out, Span{a, b, s.BytesPerSecond})
			}
		}
	}
	return out
}

func total(spans []Span) (seconds, bytes float64) {
	for _, s := range spans {
		seconds += s.To - s.From
		bytes += float64((s.To - s.From) * s.BytesPerSecond)
	}
	return seconds, bytes
}
