package solve

import (
	"testing"
	"time"

	"slantwise/downlink/contacts"
)

// A contact of ten minutes is worth the same anywhere in its hour, so that the times of the
// plan in force are better by the price of a change: 600 - 0 against 600 - 5. Where another
// contact has the antenna by then, it stays where it is.
func TestRestored(t *testing.T) {
	at := func(m int) time.Time { return time.Date(2026, 3, 10, 0, m, 0, 0, time.UTC) }
	p := &contacts.Problem{Start: at(0), Length: 2 * contacts.Hour, Weights: contacts.Weights{Change: 5}}
	row := func(request, craft string) contacts.WindowRow {
		return contacts.WindowRow{Request: request, Spacecraft: craft, Station: "G", Antenna: "A", Start: at(0), End: at(60), MinimumS: 60, DesiredS: 600, ValuePerS: 1}
	}
	if err := p.AddWindows([]contacts.WindowRow{row("r1", "S1"), row("r2", "S2")}); err != nil {
		t.Fatal(err)
	}
	span := func(from contacts.Ms) contacts.Span {
		return contacts.Span{From: from * contacts.Minute, To: (from + 10) * contacts.Minute}
	}
	p.InForce = []contacts.Contact{{Candidate: 0, Span: span(20)}}
	plan := contacts.Plan{Contacts: []contacts.Contact{{Candidate: 0, Span: span(25)}, {Candidate: 1, Span: span(40)}}}
	if got := restored(p, plan); got.Contacts[0].Span != span(20) {
		t.Errorf("stays at %v", got.Contacts[0].Span)
	}
	plan = contacts.Plan{Contacts: []contacts.Contact{{Candidate: 1, Span: span(15)}, {Candidate: 0, Span: span(25)}}}
	if got := restored(p, plan); got.Contacts[1].Span != span(25) {
		t.Errorf("moves onto another contact: %v", got.Contacts)
	}
}
