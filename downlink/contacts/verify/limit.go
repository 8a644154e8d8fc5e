package verify

import (
	"slices"

	"slantwise/downlink/contacts"
)

// commands judges that downlinks come after the uplink that loads their commands.
func (j *judge) commands() {
	for i := range j.plan {
		craft := &j.p.Spacecraft[j.candidate(i).Spacecraft]
		if craft.Command == nil || !j.candidate(i).Downlink {
			continue
		}
		loaded := func(end ms) bool {
			age := j.plan[i].From - end
			return age >= craft.Command.Lead && (craft.Command.Valid == 0 || age <= craft.Command.Valid)
		}
		fine := slices.ContainsFunc(craft.Command.Loaded, loaded)
		for h := range j.plan {
			// A contact does not load commands for itself, not even with a lead of 0.
			fine = fine || h != i && j.candidate(h).Spacecraft == j.candidate(i).Spacecraft && j.candidate(h).Uplink && loaded(j.plan[h].To)
		}
		if !fine {
			j.breach(RuleCommand, []int{i}, "%s has no uplink that ends in time before it (lead %g s, valid %g s, 0: for good)", j.tell(i), craft.Command.Lead.Seconds(), craft.Command.Valid.Seconds())
		}
	}
}

// limits judges each limit in each of its spans.
func (j *judge) limits() {
	for k := range j.p.Limits {
		l := &j.p.Limits[k]
		list := j.order(func(i int) bool { return l.Names(j.p, j.plan[i].Candidate) })
		if l.Rolling > 0 {
			j.rolling(l, list)
			continue
		}
		spans := l.Spans
		if len(spans) == 0 {
			// Contacts outside the horizon are told as outside of their window.
			spans = []contacts.Span{{From: -1 << 60, To: 1 << 60}}
		}
		for _, s := range spans {
			j.inSpan(l, s, list)
		}
	}
}

func (j *judge) inSpan(l *contacts.Limit, s contacts.Span, list []int) {
	var begin, during []int
	time, money := ms(0), 0.0
	for _, i := range list {
		c := j.plan[i]
		if s.From <= c.From && c.From < s.To {
			begin = append(begin, i)
			a := &j.p.Antennas[j.candidate(i).Antenna]
			money += a.PerContact + a.PerMinute*(c.To-c.From).Seconds()/60
		}
		if o := min(c.To, s.To) - max(c.From, s.From); o > 0 {
			during = append(during, i)
			time += o
		}
	}
	at := "over the plan"
	if len(l.Spans) > 0 {
		at = "from " + j.clock(s.From) + " to " + j.clock(s.To)
	}
	if l.Contacts != nil && len(begin) > *l.Contacts {
		j.breach(RuleLimit, begin, "limit %q: %d contacts begin %s, and %d are allowed", l.Name, len(begin), at, *l.Contacts)
	}
	if l.Time != nil && time > *l.Time {
		j.breach(RuleLimit, during, "limit %q: %g s of contact %s, and %g s are allowed", l.Name, time.Seconds(), at, (*l.Time).Seconds())
	}
	if l.Price != nil && money > *l.Price+1e-6 {
		j.breach(RuleLimit, begin, "limit %q: contacts %s cost %.2f, and %.2f is allowed", l.Name, at, money, *l.Price)
	}
}

// rolling judges a limit in any time of its length. The number of begins is greatest in a
// time that starts with a begin. The contact time in [t, t+R] has slopes that change only
// where t or t+R meets a begin or an end, so it is greatest at one of these.
func (j *judge) rolling(l *contacts.Limit, list []int) {
	if l.Contacts != nil {
		for _, i := range list {
			var in []int
			for _, h := range list {
				if d := j.plan[h].From - j.plan[i].From; d >= 0 && d < l.Rolling {
					in = append(in, h)
				}
			}
			if len(in) > *l.Contacts {
				j.breach(RuleLimit, in, "limit %q: %d contacts begin within %g s from %s, and %d are allowed", l.Name, len(in), l.Rolling.Seconds(), j.clock(j.plan[i].From), *l.Contacts)
				break
			}
		}
	}
	if l.Time == nil {
		return
	}
	for _, i := range list {
		for _, t := range []ms{j.plan[i].From, j.plan[i].To, j.plan[i].From - l.Rolling, j.plan[i].To - l.Rolling} {
			var in []int
			sum := ms(0)
			for _, h := range list {
				if o := min(j.plan[h].To, t+l.Rolling) - max(j.plan[h].From, t); o > 0 {
					in = append(in, h)
					sum += o
				}
			}
			if sum > *l.Time {
				j.breach(RuleLimit, in, "limit %q: %g s of contact within %g s from %s, and %g s are allowed", l.Name, sum.Seconds(), l.Rolling.Seconds(), j.clock(t), (*l.Time).Seconds())
				return
			}
		}
	}
}

// shared judges what a station has fewer of than antennas: the count is greatest where
// one of the contacts begins.
func (j *judge) shared() {
	for k := range j.p.Shared {
		s := &j.p.Shared[k]
		span := func(i int) contacts.Span {
			c := j.plan[i]
			if s.Busy {
				return contacts.Span{From: c.From - j.candidate(i).SetUp, To: c.To + j.candidate(i).TearDown}
			}
			return c.Span
		}
		list := j.order(func(i int) bool { return slices.Contains(s.Antennas, j.candidate(i).Antenna) })
		for _, i := range list {
			var in []int
			for _, h := range list {
				if span(h).From <= span(i).From && span(i).From < span(h).To {
					in = append(in, h)
				}
			}
			if len(in) > s.Capacity {
				j.breach(RuleShared, in, "shared %q: %d contacts at %s, and it serves %d", s.Name, len(in), j.clock(span(i).From), s.Capacity)
				break
			}
		}
	}
}

func (j *judge) clashes() {
	for _, k := range j.p.Clashes {
		for i := range j.plan {
			if j.plan[i].Candidate != k.A {
				continue
			}
			for h := range j.plan {
				if j.plan[h].Candidate != k.B || h == i {
					continue
				}
				for _, s := range k.Spans {
					from, to := max(s.From, j.plan[i].From, j.plan[h].From), min(s.To, j.plan[i].To, j.plan[h].To)
					if from < to {
						j.breach(RuleClash, []int{i, h}, "%s and %s disturb each other from %s to %s", j.tell(i), j.tell(h), j.clock(from), j.clock(to))
						break
					}
				}
			}
		}
	}
}
