package pass

import (
	"cmp"
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// The list must be the passes that Search finds one by one, in the promised order,
// for any number of workers.
func TestSearchAllIsSearch(t *testing.T) {
	j := benchJob(6, 4, 5*unit.Degree)
	j.Window.To = j.Window.From.Add(48 * time.Hour)
	var want []Found
	for i := range j.Spacecraft {
		var e orbit.Ephemeris
		if _, err := j.Ephemeris(i, &e); err != nil {
			t.Fatal(err)
		}
		for k, s := range j.Sites {
			passes, err := Search(&e, s, j.Window, j.Decides)
			if err != nil {
				t.Fatal(err)
			}
			for _, p := range passes {
				want = append(want, Found{Spacecraft: i, Site: k, Pass: p})
			}
		}
	}
	slices.SortStableFunc(want, func(a, b Found) int { return a.AOS.Compare(b.AOS) })
	for _, workers := range []int{0, 1, 3, 17} {
		j.Workers = workers
		done := 0
		j.Progress = func(n int) {
			if n != done+1 {
				t.Errorf("progress goes from %d to %d", done, n)
			}
			done = n
		}
		l, err := SearchAll(context.Background(), j)
		if err != nil {
			t.Fatal(err)
		}
		got := slices.Collect(l.All())
		if !slices.Equal(got, want) || l.Len() != len(want) || len(want) < 50 {
			t.Errorf("%d workers: %d passes, want %d, or another order", workers, len(got), len(want))
		}
		if done != j.Spacecraft {
			t.Errorf("%d workers: %d done", workers, done)
		}
	}
}

func TestSearchAllKeeps(t *testing.T) {
	j := benchJob(3, 3, 0)
	all, err := SearchAll(context.Background(), j)
	if err != nil {
		t.Fatal(err)
	}
	j.Keep = func(e *orbit.Ephemeris, f *Found) bool {
		if e.Span() <= 0 {
			t.Error("the ephemeris is gone")
		}
		return f.MaxElevation > 40*unit.Degree && f.Site == 1
	}
	some, err := SearchAll(context.Background(), j)
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for f := range all.All() {
		if f.MaxElevation > 40*unit.Degree && f.Site == 1 {
			if some.At(n) != f {
				t.Fatalf("pass %d is %+v, want %+v", n, some.At(n), f)
			}
			n++
		}
	}
	if n == 0 || some.Len() != n {
		t.Errorf("kept %d, want %d", some.Len(), n)
	}
}

func TestSearchAllStops(t *testing.T) {
	j := benchJob(50, 2, 0)
	ctx, cancel := context.WithCancel(context.Background())
	j.Progress = func(done int) {
		if done == 3 {
			cancel()
		}
	}
	if _, err := SearchAll(ctx, j); !errors.Is(err, context.Canceled) {
		t.Errorf("canceled: got %v", err)
	}
	j = benchJob(5, 2, 0)
	broken := errors.New("no elements")
	j.Ephemeris = func(i int, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) { return nil, broken }
	if _, err := SearchAll(context.Background(), j); !errors.Is(err, broken) {
		t.Errorf("broken: got %v", err)
	}
	j.Ephemeris = func(int, *orbit.Ephemeris) (*orbit.Ephemeris, error) { return nil, nil }
	if l, err := SearchAll(context.Background(), j); err != nil || l.Len() != 0 {
		t.Errorf("all passed over: got %v, %v", l, err)
	}
}

func TestSearchAllRefuses(t *testing.T) {
	j := benchJob(1, 1, 0)
	j.Window.To = j.Window.From
	if _, err := SearchAll(context.Background(), j); err == nil || !strings.Contains(err.Error(), "is not after its start 2026-03-10T00:00:00.000Z") {
		t.Errorf("empty window: got %v", err)
	}
	j = benchJob(1, 1, 0)
	j.Workers = -1
	if _, err := SearchAll(context.Background(), j); err == nil || !strings.HasPrefix(err.Error(), "workers: -1") {
		t.Errorf("workers: got %v", err)
	}
	j = benchJob(1, 1, 0)
	j.Window.From, j.Window.To = j.Window.To, j.Window.To.Add(time.Hour)
	var span *orbit.SpanError
	if _, err := SearchAll(context.Background(), j); !errors.As(err, &span) {
		t.Errorf("window after the ephemeris: got %v, want a *orbit.SpanError", err)
	}
}

// An orbit that decays within the window cuts the pass under way, seen from where the
// orbit ends.
func TestTruncatedEphemeris(t *testing.T) {
	el := fleet(1)[0]
	el.MeanMotion, el.BStar = 16.3, 1e-3
	w := Window{benchStart, benchStart.Add(30 * 24 * time.Hour)}
	e, err := orbit.NewEphemeris(el, w.From, w.To, orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	if e.Truncated() == nil {
		t.Fatal("the orbit does not decay: the case shows nothing")
	}
	end := e.PositionAt(e.Span())
	s := testSite()
	s.Latitude = unit.Angle(math.Asin(end.Z / end.Norm()))
	s.Longitude = unit.Angle(math.Atan2(end.Y, end.X))
	s.MinimumElevation = -5 * unit.Degree
	passes, err := Search(e, s, w, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	if len(passes) == 0 {
		t.Fatal("no passes")
	}
	last := passes[len(passes)-1]
	if d := last.LOS.Sub(e.Time(e.Span())); last.Cut != CutLOS || d > time.Millisecond || d < -time.Millisecond {
		t.Errorf("the last pass is %+v, want it cut at %s", last, e.Time(e.Span()))
	}
}

// Comparing is the oracle of counting.
func TestSortPlaces(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for _, keyBits := range []int{1, 10, 11, 12, 30, 45} {
		places := make([]place, 3000)
		for i := range places {
			places[i] = place{since: r.Uint64N(1 << keyBits), index: uint32(i)}
		}
		want := slices.Clone(places)
		slices.SortStableFunc(want, func(a, b place) int { return cmp.Compare(a.since, b.since) })
		if got := sortPlaces(places, keyBits); !slices.Equal(got, want) {
			t.Errorf("%d bits: not in order", keyBits)
		}
	}
}
