package contacts

import "fmt"

// held looks for fixed contacts that cannot stand: outside of their window, of a wrong
// length, or two that contradict each other. What only a whole plan can tell, the checker
// of plans does.
func (c *checker) held() {
	p := c.p
	for i, a := range p.Held {
		if !c.index(fmt.Sprintf("fixed contact %d: window", i+1), a.Candidate, len(p.Candidates)) {
			return
		}
	}
	for i, a := range p.InForce {
		if !c.index(fmt.Sprintf("contact %d of the plan in force: window", i+1), a.Candidate, len(p.Candidates)) {
			return
		}
	}
	for i, a := range p.Held {
		w := &p.Candidates[a.Candidate]
		if a.To <= a.From || !w.Window.Holds(a.Span) {
			c.say("fixed contact %s does not lie in its window %s to %s", p.tell(a), clock(p.At(w.Window.From)), clock(p.At(w.Window.To)))
		} else if l := a.Length(); l < w.Least || w.Greatest > 0 && l > w.Greatest {
			c.say("fixed contact %s lasts %g s, not %g to %g s", p.tell(a), l.Seconds(), w.Least.Seconds(), w.LongestContact().Seconds())
		}
		for _, b := range p.Held[:i] {
			if why := p.contradict(a, b); why != "" {
				c.say("fixed contacts %s and %s contradict each other: %s; free one of them", p.tell(b), p.tell(a), why)
			}
		}
	}
}

// contradict returns why two contacts cannot be in one plan, as far as the two alone
// tell; empty: they can.
func (p *Problem) contradict(a, b Contact) string {
	x, y := &p.Candidates[a.Candidate], &p.Candidates[b.Candidate]
	if x.Antenna == y.Antenna && p.Busy(a).Overlap(p.Busy(b)) > 0 {
		return fmt.Sprintf("antenna %q serves one at a time", p.Antennas[x.Antenna].Name)
	}
	if x.Spacecraft == y.Spacecraft && p.Spacecraft[x.Spacecraft].AtOnce < 2 && a.Overlap(b.Span) > 0 {
		return fmt.Sprintf("spacecraft %q talks to one station at a time", p.Spacecraft[x.Spacecraft].Name)
	}
	if !p.Split && x.Request >= 0 && x.Request == y.Request {
		return fmt.Sprintf("request %q gets one contact", p.Requests[x.Request].Name)
	}
	if !p.Split && a.Candidate == b.Candidate {
		return "a pass gets one contact"
	}
	return ""
}

func (p *Problem) tell(c Contact) string {
	return fmt.Sprintf("%q (%s to %s)", p.Candidates[c.Candidate].Name, clock(p.At(c.From)), clock(p.At(c.To)))
}

// Available returns the times in which a contact in a candidate may lie as far as the
// candidate alone tells: its window without closed times, inside staffed ones, after the
// lead time of its station, of at least its least length, ends on whole steps.
func (p *Problem) Available(candidate int) []Span {
	w := &p.Candidates[candidate]
	s := &p.Stations[p.Antennas[w.Antenna].Station]
	whole := w.Window
	if s.Lead > 0 {
		whole.From = max(whole.From, p.Now+s.Lead+w.SetUp)
	}
	step := p.Resolution()
	var out []Span
	for _, f := range p.standing(candidate, whole) {
		f = Span{up(f.From, step), down(f.To, step)}
		if f.Length() >= w.Least {
			out = append(out, f)
		}
	}
	return out
}

// Stands tells whether a contact could be where it is as far as its candidate alone
// tells, lead time aside: so that one in force that an outage has hit does not.
func (p *Problem) Stands(c Contact) bool {
	for _, s := range p.standing(c.Candidate, p.Candidates[c.Candidate].Window) {
		if s.Holds(c.Span) {
			return true
		}
	}
	return false
}

// standing returns the parts of a span of a candidate that are open and staffed.
func (p *Problem) standing(candidate int, whole Span) []Span {
	w := &p.Candidates[candidate]
	a := &p.Antennas[w.Antenna]
	s := &p.Stations[a.Station]
	var out []Span
	for _, open := range staffed(w, s, whole) {
		var taken []Span
		for _, list := range [][]Span{a.Closed, s.Closed} {
			for _, t := range list {
				taken = append(taken, Span{t.From - w.TearDown, t.To + w.SetUp})
			}
		}
		taken = append(taken, p.Spacecraft[w.Spacecraft].Closed...)
		out = append(out, open.Without(taken)...)
	}
	return out
}

// staffed returns the parts of a span in which a station is staffed from set-up to
// tear-down.
func staffed(w *Candidate, s *Station, whole Span) []Span {
	if s.Staffed == nil {
		return []Span{whole}
	}
	var out []Span
	for _, t := range Union(s.Staffed) {
		f := Span{max(whole.From, t.From+w.SetUp), min(whole.To, t.To-w.TearDown)}
		if f.Length() > 0 {
			out = append(out, f)
		}
	}
	return out
}

// up and down round to whole steps.
func up(t, step Ms) Ms { return -down(-t, step) }

func down(t, step Ms) Ms {
	q := t / step
	if t%step < 0 {
		q--
	}
	return q * step
}

// Unserved returns the requests that nothing can serve whatever else is taken, each with
// the reason.
func (p *Problem) Unserved() []error {
	windows := make([][]int, len(p.Requests))
	for i := range p.Candidates {
		if r := p.Candidates[i].Request; r >= 0 {
			windows[r] = append(windows[r], i)
		}
	}
	out := []error{}
	for r := range p.Requests {
		if why := p.whyUnserved(windows[r]); why != "" {
			out = append(out, fmt.Errorf("request %q cannot be served: %s", p.Requests[r].Name, why))
		}
	}
	return out
}

func (p *Problem) whyUnserved(windows []int) string {
	if len(windows) == 0 {
		return "it has no window"
	}
	longest := Ms(0)
	short := true
	for _, i := range windows {
		if len(p.Available(i)) > 0 {
			return ""
		}
		longest = max(longest, p.Candidates[i].Window.Length())
		short = short && p.Candidates[i].Window.Length() < p.Candidates[i].Least
	}
	if short {
		return fmt.Sprintf("its longest window has %g s, and a contact lasts at least %g s", longest.Seconds(), p.Candidates[windows[0]].Least.Seconds())
	}
	return "closed times, staffed hours and lead times leave no window long enough for its shortest contact"
}
