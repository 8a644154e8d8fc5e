package verify

import (
	"math"
	"math/rand/v2"
	"testing"

	"slantwise/downlink/contacts"
	"slantwise/downlink/recorder"
)

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
		board, err := p.OnBoard(0, plan)
		if err != nil {
			t.Fatal(err)
		}
		result, err := recorder.Simulate(board)
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
