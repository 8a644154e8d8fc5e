package verify

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"slantwise/downlink/contacts"
)

type ms = contacts.Ms

// Rules by which a Breach is named.
const (
	RuleWindow     = "window"
	RuleLength     = "length"
	RuleStep       = "step"
	RuleClosed     = "closed"
	RuleStaff      = "staff"
	RuleLead       = "lead time"
	RuleAntenna    = "antenna"
	RuleSlew       = "slew"
	RuleCable      = "cable"
	RuleSpacecraft = "spacecraft"
	RuleHandOver   = "hand-over"
	RuleCommand    = "command"
	RuleOnce       = "one contact"
	RuleLimit      = "limit"
	RuleShared     = "shared"
	RuleClash      = "clash"
	RuleHeld       = "fixed"
)

// Breach is a rule that a plan breaks.
type Breach struct {
	Rule     string `json:"rule"`
	Contacts []int  `json:"contacts"` // places in the plan of those that break it together
	Text     string `json:"text"`
}

// Error returns the rule and the text.
func (b Breach) Error() string { return b.Rule + ": " + b.Text }

// Plan returns every breach of a plan, in the order of the rules; none: an empty slice.
// The problem must have passed its Check; the contacts of the plan may be in any order,
// and candidates that the problem does not have are breaches, too.
func Plan(p *contacts.Problem, plan contacts.Plan) []Breach {
	j := &judge{p: p, plan: plan.Contacts, out: []Breach{}}
	for i, c := range j.plan {
		if c.Candidate < 0 || c.Candidate >= len(p.Candidates) {
			j.breach(RuleWindow, []int{i}, "contact %d is in window %d; there are %d", i+1, c.Candidate+1, len(p.Candidates))
		}
	}
	if len(j.out) > 0 {
		return j.out
	}
	for i := range j.plan {
		j.single(i)
	}
	j.once()
	j.antennas()
	j.spacecraft()
	j.commands()
	j.limits()
	j.shared()
	j.clashes()
	j.held()
	return j.out
}

// judge is the state of one judgement.
type judge struct {
	p    *contacts.Problem
	plan []contacts.Contact
	out  []Breach
}

func (j *judge) breach(rule string, who []int, format string, a ...any) {
	j.out = append(j.out, Breach{rule, who, fmt.Sprintf(format, a...)})
}

func (j *judge) candidate(i int) *contacts.Candidate { return &j.p.Candidates[j.plan[i].Candidate] }

func (j *judge) station(i int) *contacts.Station {
	return &j.p.Stations[j.p.Antennas[j.candidate(i).Antenna].Station]
}

func (j *judge) tell(i int) string {
	return fmt.Sprintf("%q (%s to %s)", j.candidate(i).Name, j.clock(j.plan[i].From), j.clock(j.plan[i].To))
}

func (j *judge) clock(t ms) string {
	return strings.TrimSuffix(j.p.At(t).Format("2006-01-02T15:04:05.000"), ".000") + "Z"
}

// single judges a contact by itself.
func (j *judge) single(i int) {
	c, w := j.plan[i], j.candidate(i)
	if c.From < w.Window.From || c.To > w.Window.To || c.To <= c.From {
		j.breach(RuleWindow, []int{i}, "%s does not lie in its window %s to %s", j.tell(i), j.clock(w.Window.From), j.clock(w.Window.To))
	}
	if l := c.To - c.From; l < w.Least {
		j.breach(RuleLength, []int{i}, "%s lasts %g s, less than the least %g s", j.tell(i), l.Seconds(), w.Least.Seconds())
	} else if w.Greatest > 0 && l > w.Greatest {
		j.breach(RuleLength, []int{i}, "%s lasts %g s, more than the greatest %g s", j.tell(i), l.Seconds(), w.Greatest.Seconds())
	}
	if step := j.p.Resolution(); !j.isHeld(c) && (c.From%step != 0 || c.To%step != 0) {
		j.breach(RuleStep, []int{i}, "%s does not begin and end on whole steps of %g s", j.tell(i), step.Seconds())
	}
	from, to := c.From-w.SetUp, c.To+w.TearDown
	a := &j.p.Antennas[w.Antenna]
	s := &j.p.Stations[a.Station]
	j.closed(i, from, to, a.Closed, fmt.Sprintf("antenna %q", a.Name))
	j.closed(i, from, to, s.Closed, fmt.Sprintf("station %q", s.Name))
	j.closed(i, c.From, c.To, j.p.Spacecraft[w.Spacecraft].Closed, fmt.Sprintf("spacecraft %q", j.p.Spacecraft[w.Spacecraft].Name))
	if s.Staffed != nil && !slices.ContainsFunc(contacts.Union(s.Staffed), func(t contacts.Span) bool { return t.From <= from && to <= t.To }) {
		j.breach(RuleStaff, []int{i}, "station %q is not staffed throughout %s, set-up and tear-down included", s.Name, j.tell(i))
	}
	if s.Lead > 0 && from < j.p.Now+s.Lead && !j.isHeld(c) && !j.inForce(c) {
		j.breach(RuleLead, []int{i}, "%s: its set-up begins %g s after now, and station %q wants %g s", j.tell(i), (from - j.p.Now).Seconds(), s.Name, s.Lead.Seconds())
	}
}

func (j *judge) closed(i int, from, to ms, closed []contacts.Span, who string) {
	for _, t := range closed {
		if t.From < to && from < t.To {
			j.breach(RuleClosed, []int{i}, "%s: %s is closed from %s to %s", j.tell(i), who, j.clock(t.From), j.clock(t.To))
		}
	}
}

func same(a, b contacts.Contact) bool { return a.Candidate == b.Candidate && a.Span == b.Span }

func (j *judge) isHeld(c contacts.Contact) bool {
	return slices.ContainsFunc(j.p.Held, func(h contacts.Contact) bool { return same(h, c) })
}

func (j *judge) inForce(c contacts.Contact) bool {
	return slices.ContainsFunc(j.p.InForce, func(h contacts.Contact) bool { return same(h, c) })
}

// once judges that a request and a pass get one contact.
func (j *judge) once() {
	if j.p.Split {
		return
	}
	first := map[string]int{}
	for _, i := range j.order(func(int) bool { return true }) {
		key, what := "pass "+j.candidate(i).Name, "a pass gets one contact"
		if r := j.candidate(i).Request; r >= 0 {
			key, what = "request "+j.p.Requests[r].Name, fmt.Sprintf("request %q gets one contact", j.p.Requests[r].Name)
		}
		if f, ok := first[key]; ok {
			j.breach(RuleOnce, []int{f, i}, "%s: %s and %s", what, j.tell(f), j.tell(i))
			continue
		}
		first[key] = i
	}
}

// order returns the contacts that are wanted by begin, end and place in the plan.
func (j *judge) order(want func(i int) bool) []int {
	var out []int
	for i := range j.plan {
		if want(i) {
			out = append(out, i)
		}
	}
	slices.SortStableFunc(out, func(a, b int) int {
		return cmp.Or(cmp.Compare(j.plan[a].From, j.plan[b].From), cmp.Compare(j.plan[a].To, j.plan[b].To))
	})
	return out
}

// held judges that what is fixed stands, and what can no longer be cancelled.
func (j *judge) held() {
	has := func(h contacts.Contact) bool {
		return slices.ContainsFunc(j.plan, func(c contacts.Contact) bool { return same(c, h) })
	}
	tell := func(h contacts.Contact) string {
		return fmt.Sprintf("%q (%s to %s)", j.p.Candidates[h.Candidate].Name, j.clock(h.From), j.clock(h.To))
	}
	for _, h := range j.p.Held {
		if !has(h) {
			j.breach(RuleHeld, []int{}, "the fixed contact %s is not in the plan as it is fixed", tell(h))
		}
	}
	for _, h := range j.p.InForce {
		s := &j.p.Stations[j.p.Antennas[j.p.Candidates[h.Candidate].Antenna].Station]
		begin := h.From - j.p.Candidates[h.Candidate].SetUp
		if s.Notice > 0 && begin < j.p.Now+s.Notice && !has(h) && j.stands(h) {
			j.breach(RuleHeld, []int{}, "%s begins %g s after now and can no longer be dropped or changed: station %q wants a notice of %g s",
				tell(h), (begin - j.p.Now).Seconds(), s.Name, s.Notice.Seconds())
		}
	}
}

// stands tells whether a contact in force could still be held where it is: nothing of it
// is closed, and staff is there.
func (j *judge) stands(h contacts.Contact) bool {
	alone := &judge{p: j.p, plan: []contacts.Contact{h}}
	alone.single(0)
	for _, b := range alone.out {
		if b.Rule == RuleClosed || b.Rule == RuleStaff || b.Rule == RuleWindow {
			return false
		}
	}
	return true
}
