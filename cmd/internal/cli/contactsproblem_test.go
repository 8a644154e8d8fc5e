package cli

import (
	"slices"
	"testing"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/contacts"
	"slantwise/orbit/unit"
)

func TestClashes(t *testing.T) {
	tx := func(mhz float64) []downlink.Transmitter {
		return []downlink.Transmitter{{Name: "X", Frequency: unit.Frequency(mhz) * unit.Megahertz, AllottedBandwidth: 10 * unit.Megahertz}}
	}
	window := func(craft int, azimuth float64) contacts.Candidate {
		return contacts.Candidate{Spacecraft: craft, Antenna: craft, Window: contacts.Span{To: 100_000}, Links: []contacts.Link{{Transmitter: "X"}},
			Course: []contacts.Aim{{At: 0, AzimuthDeg: 360}, {At: 100_000, AzimuthDeg: 360 + azimuth}}}
	}
	p := &planProblem{plan: &scenario.ContactPlan{SameBeam: 2 * unit.Degree}, scenario: &scenario.Scenario{Spacecraft: []scenario.Spacecraft{{Transmitters: tx(8180)}, {Transmitters: tx(8189)}}},
		Problem: &contacts.Problem{Antennas: []contacts.Antenna{{}, {}}, Candidates: []contacts.Candidate{window(0, 0), window(1, 4)}}}
	p.Candidates[1].Course[0].AzimuthDeg, p.Candidates[1].Course[1].AzimuthDeg = 1, 5 // past north: 361 is 1
	p.clashes()
	if len(p.Clashes) != 1 || !slices.Equal(p.Clashes[0].Spans, []contacts.Span{{From: 0, To: 30_000}}) {
		t.Errorf("%+v", p.Clashes)
	}
	p.Clashes, p.scenario.Spacecraft[1].Transmitters = nil, tx(8191)
	if p.clashes(); len(p.Clashes) != 0 {
		t.Errorf("on different frequencies: %+v", p.Clashes)
	}
}

func TestShifts(t *testing.T) {
	zone := func(name string) *time.Location {
		z, err := time.LoadLocation(name)
		if err != nil {
			t.Fatal(err)
		}
		return z
	}
	p := &contacts.Problem{Start: time.Date(2026, 3, 28, 12, 0, 0, 0, time.UTC), Length: 48 * contacts.Hour}
	night := []scenario.Shift{{From: 22 * time.Hour, To: 6 * time.Hour}}
	var got []contacts.Span
	for _, s := range staffed(p, night, zone("Europe/London")) {
		if s.From >= 0 {
			got = append(got, s)
		}
	}
	want := []contacts.Span{{From: 10 * contacts.Hour, To: 17 * contacts.Hour}, {From: 33 * contacts.Hour, To: 41 * contacts.Hour}}
	if !slices.Equal(got, want) {
		t.Errorf("London: %v, want %v", got, want)
	}
	sunday := []scenario.Shift{{Days: []time.Weekday{time.Sunday}, To: 24 * time.Hour}}
	if got := staffed(p, sunday, zone("Pacific/Kiritimati")); !slices.Equal(got, []contacts.Span{{From: -2 * contacts.Hour, To: 22 * contacts.Hour}}) {
		t.Errorf("Kiritimati: %v", got)
	}
}
