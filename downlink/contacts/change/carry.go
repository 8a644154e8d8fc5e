package change

import (
	"fmt"
	"time"

	"slantwise/downlink/contacts"
)

// key is what a contact keeps from problem to problem.
type key struct{ request, spacecraft, station, antenna string }

func keyOf(p *contacts.Problem, candidate int) key {
	c := &p.Candidates[candidate]
	a := &p.Antennas[c.Antenna]
	k := key{spacecraft: p.Spacecraft[c.Spacecraft].Name, station: p.Stations[a.Station].Name, antenna: a.Name}
	if c.Request >= 0 {
		k.request = p.Requests[c.Request].Name
	}
	return k
}

// Lost is a contact in force that the new problem has no place for.
type Lost struct {
	Contact contacts.Contact // of the old problem
	Name    string
	Why     string
}

// Carry puts a plan of an old problem into a new one, as of the new one's Now: contacts
// whose set-up has begun, and fixed ones, become Held; the others InForce, at the times
// that they had, also where their window has moved from under them: then the new plan
// must move or drop them. A contact that is held but does not lie in a window of the new
// problem gets a candidate of its own. What was in force and cannot be carried is
// returned; of what is held nothing is ever lost. Both lists of the new problem are
// replaced.
func Carry(old *contacts.Problem, plan contacts.Plan, next *contacts.Problem) []Lost {
	next.Held, next.InForce = nil, nil
	windows := map[key][]int{}
	for i := range next.Candidates {
		k := keyOf(next, i)
		windows[k] = append(windows[k], i)
	}
	lost := []Lost{}
	for _, c := range plan.Contacts {
		w := &old.Candidates[c.Candidate]
		is := contacts.Contact{Span: contacts.Span{From: next.Ms(old.At(c.From)), To: next.Ms(old.At(c.To))}, Fixed: c.Fixed}
		best, most := -1, contacts.Ms(0)
		for _, i := range windows[keyOf(old, c.Candidate)] {
			if o := next.Candidates[i].Window.Overlap(is.Span); o > most {
				best, most = i, o
			}
		}
		is.Candidate = best
		held := c.Fixed || is.From-w.SetUp <= next.Now
		switch {
		case held && best >= 0 && next.Candidates[best].Window.Holds(is.Span):
			is.Fixed = true
			next.Held = append(next.Held, is)
		case is.To <= 0 || is.From < 0 || is.To > next.Length:
			if !held {
				lost = append(lost, Lost{c, w.Name, "it is outside the new horizon"})
			}
		case held:
			i, err := adopt(old, c, next, is.Span)
			if err != nil {
				lost = append(lost, Lost{c, w.Name, err.Error()})
				continue
			}
			next.Held = append(next.Held, contacts.Contact{Candidate: i, Span: is.Span, Fixed: true})
		case best < 0:
			lost = append(lost, Lost{c, w.Name, "its window is gone"})
		default:
			is.Fixed = false
			next.InForce = append(next.InForce, is)
		}
	}
	next.Sort(next.Held)
	next.Sort(next.InForce)
	return lost
}

// adopt gives a contact a candidate of its own in the new problem.
func adopt(old *contacts.Problem, c contacts.Contact, next *contacts.Problem, span contacts.Span) (int, error) {
	w := old.Candidates[c.Candidate]
	k := keyOf(old, c.Candidate)
	find := func(n int, name func(i int) string, want string) int {
		for i := range n {
			if name(i) == want {
				return i
			}
		}
		return -1
	}
	w.Spacecraft = find(len(next.Spacecraft), func(i int) string { return next.Spacecraft[i].Name }, k.spacecraft)
	w.Antenna = find(len(next.Antennas), func(i int) string {
		return next.Stations[next.Antennas[i].Station].Name + "\x00" + next.Antennas[i].Name
	}, k.station+"\x00"+k.antenna)
	if w.Spacecraft < 0 || w.Antenna < 0 {
		return 0, fmt.Errorf("spacecraft %q or antenna %q of station %q is gone", k.spacecraft, k.antenna, k.station)
	}
	if w.Request >= 0 {
		w.Request = find(len(next.Requests), func(i int) string { return next.Requests[i].Name }, k.request)
	}
	shift := next.Ms(old.Start)
	w.Window = span
	w.Least = min(w.Least, span.Length())
	w.Links = shiftLinks(w.Links, shift)
	course := make([]contacts.Aim, len(w.Course))
	for i, a := range w.Course {
		a.At += shift
		course[i] = a
	}
	w.Course = course
	w.Name = fmt.Sprintf("%s as planned from %s", w.Name, next.At(span.From).Format(time.RFC3339))
	next.Candidates = append(next.Candidates, w)
	return len(next.Candidates) - 1, nil
}

func shiftLinks(links []contacts.Link, shift contacts.Ms) []contacts.Link {
	out := make([]contacts.Link, len(links))
	for i, l := range links {
		out[i] = l
		out[i].Volume = make([]contacts.Point, len(l.Volume))
		for k, v := range l.Volume {
			v.At += shift
			out[i].Volume[k] = v
		}
	}
	return out
}
