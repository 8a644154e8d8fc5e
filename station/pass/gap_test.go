package pass_test

import (
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// Passes of a trajectory with a gap are those of the whole orbit, cut at the gap.
func TestPassesAreCutAtGaps(t *testing.T) {
	start := time.Date(2026, 9, 14, 0, 0, 0, 0, time.UTC)
	el := orbit.Elements{Epoch: start, MeanMotion: 14.8, Eccentricity: 0.001, Inclination: 97.5 * unit.Degree}
	end := start.Add(24 * time.Hour)
	whole, err := orbit.NewEphemeris(el, start, end, orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	site := station.Site{Name: "S", Latitude: 60 * unit.Degree, MinimumElevation: 5 * unit.Degree}
	w := pass.Window{From: start, To: end}
	want, err := pass.Search(whole, &site, w, station.Geometric)
	if err != nil || len(want) < 4 {
		t.Fatalf("%d passes, %v", len(want), err)
	}
	// A gap from the middle of the second pass to the middle of the third.
	middle := func(p pass.Pass) time.Time { return p.AOS.Add(p.Duration() / 2).Truncate(time.Second) }
	from, to := middle(want[1]), middle(want[2])
	segment := func(a, b time.Time) orbit.TrajectorySegment {
		s := orbit.TrajectorySegment{Interpolation: orbit.Interpolation{Kind: orbit.Hermite, Degree: 7}, From: a, To: b}
		for at := a; ; at = at.Add(30 * time.Second) {
			if at.After(b) {
				at = b
			}
			p, v := whole.TrackAt(whole.Seconds(at))
			s.States = append(s.States, orbit.TimedState{Time: at, Position: p, Velocity: v})
			if at.Equal(b) {
				return s
			}
		}
	}
	tr := &orbit.Trajectory{Name: "T", Segments: []orbit.TrajectorySegment{segment(start, from), segment(to, end)}}
	var e orbit.Ephemeris
	if err := e.Follow(tr, orbit.Shift{}, start, end, orbit.EarthOrientation{}); err != nil {
		t.Fatal(err)
	}
	got, err := pass.Search(&e, &site, w, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	if len(got) != len(want) {
		t.Fatalf("%d passes, want %d", len(got), len(want))
	}
	for i := range got {
		aos, los, cut := want[i].AOS, want[i].LOS, pass.CutNone
		if i == 1 {
			los, cut = from, pass.CutLOS
		}
		if i == 2 {
			aos, cut = to, pass.CutAOS
		}
		near := func(a, b time.Time) bool { return a.Sub(b).Abs() <= 2*time.Millisecond }
		if !near(got[i].AOS, aos) || !near(got[i].LOS, los) || got[i].Cut != cut {
			t.Errorf("pass %d: %v to %v, cut %q; want %v to %v, cut %q", i, got[i].AOS, got[i].LOS, got[i].Cut, aos, los, cut)
		}
		// What is at a gap's edge can be looked at.
		e.StateAt(e.Seconds(got[i].AOS))
		e.StateAt(e.Seconds(got[i].LOS))
	}
}
