package contacts

import (
	"fmt"
	"slices"

	"slantwise/downlink/recorder"
)

// OnBoard returns the recorder of a spacecraft through a plan, to be followed from event
// to event: what waits when, what is lost, how old data are when they arrive. It fails
// where the spacecraft has no recorder, and where contacts overlap.
func (p *Problem) OnBoard(spacecraft int, plan Plan) (*recorder.Plan, error) {
	s := &p.Spacecraft[spacecraft]
	if s.Recorder == nil {
		return nil, fmt.Errorf("spacecraft %q has no recorder", s.Name)
	}
	out := &recorder.Plan{Start: p.Start, Length: p.Length.Seconds(), Capacity: s.Recorder.Capacity, WhenFull: recorder.LoseNew}
	for _, c := range s.Recorder.Classes {
		k := recorder.Class{Name: c.Name, OnBoard: c.OnBoard}
		for _, m := range c.Made {
			k.Made = append(k.Made, recorder.Made{From: m.From.Seconds(), To: m.To.Seconds(), BytesPerSecond: m.BytesPerSecond})
		}
		out.Classes = append(out.Classes, k)
	}
	list := slices.Clone(plan.Contacts)
	p.Sort(list)
	last := Contact{Span: Span{-1 << 60, -1 << 60}}
	for _, c := range list {
		w := &p.Candidates[c.Candidate]
		if w.Spacecraft != spacecraft || w.Request >= 0 {
			continue
		}
		if c.From < last.To {
			return nil, fmt.Errorf("spacecraft %q: contacts %s and %s overlap; the recorder is followed through one at a time", s.Name, p.tell(last), p.tell(c))
		}
		last = c
		out.Contacts = append(out.Contacts, recorder.Contact{Station: p.Stations[p.Antennas[w.Antenna].Station].Name, From: c.From.Seconds(), To: c.To.Seconds(), Steps: w.steps(c.Span)})
	}
	return out, nil
}

// steps returns the stretches of a contact with even rates, all links together.
func (c *Candidate) steps(s Span) []recorder.Step {
	cuts := []Ms{s.From, s.To}
	for _, l := range c.Links {
		for _, v := range l.Volume {
			if s.From < v.At && v.At < s.To {
				cuts = append(cuts, v.At)
			}
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	var out []recorder.Step
	for k := 1; k < len(cuts); k++ {
		part := Span{cuts[k-1], cuts[k]}
		if b := c.Bytes(part); b > 0 {
			out = append(out, recorder.Step{From: part.From.Seconds(), To: part.To.Seconds(), BytesPerSecond: b / part.Length().Seconds()})
		}
	}
	return out
}
