package recorder

// lineState is a ground line that passes data on in the order of their arrival.
type lineState struct {
	rate float64 // bytes a second
	busy float64 // until when
}

// passage tells when what arrives at a station in a stretch leaves its ground line: it
// goes straight from (from, out0) to (bend, outBend), and from there to (to, out1).
type passage struct{ from, bend, to, out0, outBend, out1 float64 }

// throughLine sends what arrives in a stretch over the station's ground line.
func (s *simulation) throughLine(step *Step, from, to float64) passage {
	line := s.lines[s.plan.Contacts[s.contact].Station]
	arrives := 0.0
	for _, r := range s.flow.sent {
		arrives += r * (1 - step.Loss)
	}
	if line == nil || !(arrives > 0) {
		return passage{from, from, to, from, from, to}
	}
	return line.pass(from, to, arrives)
}

// pass returns the passage of an even flow, in bytes a second, and keeps the line busy.
func (l *lineState) pass(from, to, rate float64) passage {
	begin := max(from, l.busy)
	p := passage{from, from, to, begin, begin, begin + (to-from)*rate/l.rate}
	switch {
	case rate >= l.rate || begin > from && p.out1 >= to:
		// It never catches up: all of it leaves at the line's rate.
	case begin <= from:
		p.out1 = to // the line is idle and faster: at once
	default:
		// The line works its queue off and from then on passes data on as they come.
		p.bend = from + (begin-from)/(1-rate/l.rate)
		p.outBend, p.out1 = p.bend, to
	}
	l.busy = p.out1
	return p
}

// out returns when what arrives at t leaves.
func (p *passage) out(t float64) float64 {
	if t < p.bend {
		return mix(p.out0, p.outBend, (t-p.from)/(p.bend-p.from))
	}
	return mix(p.outBend, p.out1, (t-p.bend)/(p.to-p.bend))
}
