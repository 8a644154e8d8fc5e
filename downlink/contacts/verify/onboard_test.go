package verify

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"slantwise/downlink/contacts"
	"slantwise/downlink/recorder"
)

// followed is the recorder of a spacecraft through a plan whose contacts stand in order and
// apart, as the package that follows recorders takes it.
func followed(p *contacts.Problem, spacecraft int, plan contacts.Plan) *recorder.Plan {
	r := p.Spacecraft[spacecraft].Recorder
	out := &recorder.Plan{Start: p.Start, Length: p.Length.Seconds(), Capacity: r.Capacity, WhenFull: recorder.LoseNew}
	for _, c := range r.Classes {
		k := recorder.Class{Name: c.Name, OnBoard: c.OnBoard}
		for _, m := range c.Made {
			k.Made = append(k.Made, recorder.Made{From: m.From.Seconds(), To: m.To.Seconds(), BytesPerSecond: m.BytesPerSecond})
		}
		out.Classes = append(out.Classes, k)
	}
	for _, c := range plan.Contacts {
		w := &p.Candidates[c.Candidate]
		out.Contacts = append(out.Contacts, recorder.Contact{Station: p.Stations[p.Antennas[w.Antenna].Station].Name,
			From: c.From.Seconds(), To: c.To.Seconds(), Steps: steps(w, c.Span)})
	}
	return out
}

// steps are the stretches of a contact with even rates, all links together.
func steps(c *contacts.Candidate, s contacts.Span) []recorder.Step {
	cuts := []contacts.Ms{s.From, s.To}
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
		part := contacts.Span{From: cuts[k-1], To: cuts[k]}
		if b := c.Bytes(part); b > 0 {
			out = append(out, recorder.Step{From: part.From.Seconds(), To: part.To.Seconds(), BytesPerSecond: b / part.Length().Seconds()})
		}
	}
	return out
}

// The package that follows recorders was written apart: what it receives is what the
// checker counts, contact by contact.
func TestBytesAsTheRecorderHasThem(t *testing.T) {
	r := rand.New(rand.NewPCG(2026, 3))
	for range 300 {
		p := network()
		p.Spacecraft[0].Recorder = &contacts.Recorder{Capacity: 1e4 + 1e6*r.Float64(), Classes: []contacts.Class{
			{Name: "first", Weight: 2, OnBoard: 1e4 * r.Float64(), Made: []contacts.Made{{Span: contacts.Span{From: hour, To: 3 * hour}, BytesPerSecond: 60 * r.Float64()}}},
			{Name: "second", Weight: 1, Made: []contacts.Made{{Span: contacts.Span{From: 0, To: hour + 8*minute}, BytesPerSecond: 300 * r.Float64()}}},
		}}
		plan := contacts.Plan{Contacts: []contacts.Contact{take(0, hour, hour+6*minute), take(1, hour+6*minute, hour+15*minute), take(4, 4*hour, 4*hour+10*minute)}}
		result, err := recorder.Simulate(followed(p, 0, plan))
		if err != nil {
			t.Fatal(err)
		}
		w := Worth(p, plan)
		for i, c := range result.Contacts {
			// Both take a thousandth of a byte for nothing at each event.
			if math.Abs(c.Received-w.ByteShare[i]) > 0.05 {
				t.Fatalf("contact %d: %g bytes, the recorder's account has %g", i, w.ByteShare[i], c.Received)
			}
		}
	}
}
