package cli

import (
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/recorder"
)

// throughRecorder sends the data of a spacecraft through the contacts of a plan.
func (p *planProblem) throughRecorder(craft int, plan contacts.Plan) (*recorder.Plan, *recorder.Result, error) {
	c := &p.scenario.Spacecraft[craft]
	r := c.Recorder
	out := &recorder.Plan{
		Start: p.Start, Length: p.Length.Seconds(), Capacity: r.Capacity, WhenFull: r.WhenFull, Housekeeping: r.Housekeeping,
		Acknowledge: r.Acknowledge, WithoutUplink: r.WithoutUplink, Copies: r.Copies,
	}
	nodes, err := ascendingNodes(p.scenario, c)
	if err != nil {
		return nil, nil, err
	}
	for i := range r.Data {
		out.Classes = append(out.Classes, r.Data[i].Class(nodes, out.Length))
	}
	for i := range p.scenario.Stations {
		st := &p.scenario.Stations[i]
		if rate := st.Line.BitsPerSecond(); rate > 0 {
			out.Lines = append(out.Lines, recorder.Line{Station: st.Site.Name, BytesPerSecond: rate / 8})
		}
	}
	// A plan counts what gets through; the recorder takes loss and housekeeping off itself.
	kept := (1 - r.FrameLoss) * (1 - r.Housekeeping)
	var list []recorder.Contact
	for _, x := range plan.Contacts {
		if w := &p.Candidates[x.Candidate]; w.Spacecraft == craft {
			st := &p.scenario.Stations[p.Antennas[w.Antenna].Station]
			list = append(list, recorder.Contact{Station: st.Site.Name, From: x.From.Seconds(), To: x.To.Seconds(), Uplink: st.Uplink && w.Uplink,
				Steps: contactSteps(w, x.Span, kept, r.FrameLoss)})
		}
	}
	out.Contacts = apart(list)
	result, err := recorder.Simulate(out)
	return out, result, err
}

// contactSteps are the rates of a contact, those of all its links together.
func contactSteps(w *contacts.Candidate, span contacts.Span, kept, loss float64) []recorder.Step {
	at := []contacts.Ms{span.From, span.To}
	for i := range w.Links {
		for _, v := range w.Links[i].Volume {
			if v.At > span.From && v.At < span.To {
				at = append(at, v.At)
			}
		}
	}
	slices.Sort(at)
	at = slices.Compact(at)
	var out []recorder.Step
	for i := 1; i < len(at); i++ {
		part := contacts.Span{From: at[i-1], To: at[i]}
		if bytes := w.Bytes(part); bytes > 0 {
			out = append(out, recorder.Step{From: part.From.Seconds(), To: part.To.Seconds(), BytesPerSecond: bytes / kept / part.Length().Seconds(), Loss: loss})
		}
	}
	return out
}
