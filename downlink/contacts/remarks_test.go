package contacts

import (
	"strings"
	"testing"
)

func TestRemarks(t *testing.T) {
	p := &Problem{Start: start, Length: Day}
	if err := p.AddWindows([]WindowRow{window()}); err != nil {
		t.Fatal(err)
	}
	if r := p.Remarks(); len(r) != 0 {
		t.Errorf("remarks %v on a plain problem", r)
	}
	none, free := 0, 0.0
	p.Limits = []Limit{{Name: "a", Contacts: &none}, {Name: "b", Price: &free}}
	p.Antennas[0].Closed = []Span{{0, 2 * Hour}, {Hour, 3 * Hour}}
	p.InForce = []Contact{{0, Span{Hour, Hour + 5*Minute}, false}}
	if err := p.Check(); err != nil {
		t.Fatal(err)
	}
	got := p.Remarks()
	want := []string{`limit "a" allows no contact`, `limit "b" is a budget of zero`, "which overlap", "no longer stands"}
	if len(got) != len(want) {
		t.Fatalf("remarks %q", got)
	}
	for i := range want {
		if !strings.Contains(got[i], want[i]) {
			t.Errorf("remark %q, want it to say %q", got[i], want[i])
		}
	}
}
