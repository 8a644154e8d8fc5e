package cli

import "testing"

// TestLiveFlights keeps what was used last, and no more than it may.
func TestLiveFlights(t *testing.T) {
	var l liveFlights
	first := l.of(0)
	for i := 1; i < mostFlights; i++ {
		l.of(i)
	}
	if l.of(0) != first {
		t.Error("one that is kept was made anew")
	}
	second := l.of(1)
	l.of(mostFlights) // in place of 2, the oldest
	if len(l.kept) != mostFlights || l.kept[2] != nil || l.kept[0] != first || l.kept[1] != second {
		t.Errorf("%d are kept; 0, 1 and not 2 should be among them", len(l.kept))
	}
}
