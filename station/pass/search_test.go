package pass

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
)

func testSite() *station.Site {
	return &station.Site{Name: "Test Hill", Latitude: 55 * unit.Degree, Longitude: -4 * unit.Degree, Altitude: 100}
}

func mustSkyline(t *testing.T, s *station.Site) *skyline {
	t.Helper()
	k, err := newSkyline(s, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	return k
}

// low is a low polar orbit over two days.
func low() kepler {
	return kepler{a: 6928e3, e: 0.001, inc: 97.6 * math.Pi / 180, node: 1, span: 2 * 86400}
}

// A horizon set just under the highest elevation of a pass leaves seconds of it; set
// just over it, nothing. The scan that finds the true maximum is the oracle's.
func TestGrazingPasses(t *testing.T) {
	k, s := low(), testSite()
	_, arcs := arcsOf(t, k, s, station.Geometric, 0, k.span)
	o := newOracle(k, s, station.Geometric)
	tried := 0
	for _, a := range arcs {
		top, _ := o.culmination(a, 1)
		peak := times{top - 2, top + 2}
		top, el := o.culmination(peak, 1e-3)
		if el > 80*math.Pi/180 { // a pass through the zenith is steeper than the steps here
			continue
		}
		tried++
		for _, under := range []float64{1e-3, 1e-5, 1e-7, 1e-9} { // rad
			s := testSite()
			s.MinimumElevation = unit.Angle(el - under)
			_, got := arcsOf(t, k, s, station.Geometric, a.from-100, a.to+100)
			if len(got) != 1 || !(got[0].from < top && top < got[0].to) {
				t.Fatalf("culmination %.7f deg at %.3f s, horizon %g rad under it: got %v", unit.Angle(el).Degrees(), top, under, got)
			}
			want := newOracle(k, s, station.Geometric).arcs(top-60, top+60, got[0].to-got[0].from)
			if len(want) == 1 && under > 1e-8 && math.Abs(want[0].from-got[0].from) > 1e-3 {
				t.Errorf("horizon %g rad under: got %v, by bisection %v", under, got, want)
			}
			s.MinimumElevation = unit.Angle(el + under)
			if _, got := arcsOf(t, k, s, station.Geometric, a.from-100, a.to+100); len(got) != 0 {
				t.Errorf("horizon %g rad over the culmination: invented %v", under, got)
			}
		}
	}
	if tried < 5 {
		t.Fatalf("only %d passes of %d were tried", tried, len(arcs))
	}
}

// A geostationary spacecraft stands all the time: one pass, cut at both ends, and the
// highest of its daily maxima.
func TestAlwaysUp(t *testing.T) {
	k := kepler{a: 42164172, e: 0.0003, inc: 0.05 * math.Pi / 180, m0: 0.1, span: 4 * 86400}
	s := testSite()
	f, arcs := arcsOf(t, k, s, station.Geometric, 0, k.span)
	if len(arcs) != 1 || arcs[0] != (times{0, k.span}) {
		t.Fatalf("got %v", arcs)
	}
	r, ok := f.scene.contact(&f.arcs[0], mustSkyline(t, s), f.clock)
	if !ok || r.cut != CutBoth {
		t.Fatalf("got %+v, %v", r, ok)
	}
	o := newOracle(k, s, station.Geometric)
	if _, el := o.culmination(arcs[0], 30); el > r.maxElevation+1e-12 {
		t.Errorf("culmination %.9f rad, the grid has %.9f", r.maxElevation, el)
	}
}

// Windows that begin and end within a pass cut it there, to the millisecond.
func TestCutByTheWindow(t *testing.T) {
	k, s := low(), testSite()
	_, arcs := arcsOf(t, k, s, station.Geometric, 0, k.span)
	a := arcs[2]
	third := (a.to - a.from) / 3
	for _, c := range []struct {
		name     string
		from, to float64
		cut      Cut
		want     times
	}{
		{"before to after", a.from - 10, a.to + 10, CutNone, a},
		{"from within", a.from + third, a.to + 10, CutAOS, times{a.from + third, a.to}},
		{"to within", a.from - 10, a.to - third, CutLOS, times{a.from, a.to - third}},
		{"all within", a.from + third, a.to - third, CutBoth, times{a.from + third, a.to - third}},
		{"a second", a.from + third, a.from + third + 1, CutBoth, times{a.from + third, a.from + third + 1}},
	} {
		f, got := arcsOf(t, k, s, station.Geometric, c.from, c.to)
		if len(got) != 1 || math.Abs(got[0].from-c.want.from) > 1e-4 || math.Abs(got[0].to-c.want.to) > 1e-4 {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
			continue
		}
		r, _ := f.scene.contact(&f.arcs[0], mustSkyline(t, s), f.clock)
		if r.cut != c.cut {
			t.Errorf("%s: cut %q, want %q", c.name, r.cut, c.cut)
		}
	}
	if _, got := arcsOf(t, k, s, station.Geometric, a.to+1, a.to+60); len(got) != 0 {
		t.Errorf("after LOS: got %v", got)
	}
}

// A mast of a degree in the way splits a pass, unless the merge gap spans it.
func TestMergeGap(t *testing.T) {
	k, s := low(), testSite()
	f, arcs := arcsOf(t, k, s, station.Geometric, 0, k.span)
	a := arcs[1]
	r, _ := f.scene.contact(&f.arcs[1], mustSkyline(t, s), f.clock)
	mast := float64(r.culmAzimuth) * 180 / math.Pi
	p := func(az, el float64) station.MaskPoint {
		return station.MaskPoint{Azimuth: unit.Angle(az) * unit.Degree, Elevation: unit.Angle(el) * unit.Degree}
	}
	m, err := station.NewMask([]station.MaskPoint{p(mast-0.501, 0), p(mast-0.5, 85), p(mast+0.5, 85), p(mast+0.501, 0)}, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	s.Mask = m
	_, split := arcsOf(t, k, s, station.Geometric, a.from-10, a.to+10)
	if len(split) != 2 {
		t.Fatalf("the mast at %.1f deg leaves %v of %v", mast, split, a)
	}
	gap := split[1].from - split[0].to
	for _, c := range []struct {
		gap  time.Duration
		want int
	}{
		{time.Duration(gap*1e9) + 2*time.Millisecond, 1},
		{time.Duration(gap*1e9) - 2*time.Millisecond, 2},
	} {
		s.MergeGap = c.gap
		f, _ := arcsOf(t, k, s, station.Geometric, a.from-10, a.to+10)
		got := f.find(mustSkyline(t, s), nil)
		if len(got) != c.want {
			t.Errorf("gap of %.3f s, merge gap %v: %d passes, want %d", gap, c.gap, len(got), c.want)
		}
		if c.want == 1 {
			if got[0].culmination != r.culmination {
				t.Errorf("the culmination behind the mast at %d ms is not kept: %d ms", r.culmination, got[0].culmination)
			}
		}
	}
}

// What lasts under a millisecond prints as one instant and is no pass.
func TestUnderAMillisecond(t *testing.T) {
	k, s := low(), testSite()
	f, _ := arcsOf(t, k, s, station.Geometric, 0, k.span)
	a, sky := f.arcs[0], mustSkyline(t, s)
	a.to = f.scene.look(a.from.t + 1e-5)
	c := clock{rest: 0.25 - math.Mod(a.from.t*1000, 1)}
	if _, ok := f.scene.contact(&a, sky, c); ok {
		t.Error("10 µs made a pass")
	}
	a.to = f.scene.look(a.from.t + 2e-3)
	if _, ok := f.scene.contact(&a, sky, c); !ok {
		t.Error("2 ms made no pass")
	}
}

func TestClock(t *testing.T) {
	ref := time.Date(2026, 3, 10, 0, 0, 0, 123_400_000, time.UTC)
	for _, c := range []struct {
		s    float64
		want string
	}{
		{0, "2026-03-10T00:00:00.123Z"}, {0.0002, "2026-03-10T00:00:00.124Z"}, {-0.1235, "2026-03-10T00:00:00.000Z"}, {86400.0006, "2026-03-11T00:00:00.124Z"},
	} {
		if got := stamp(instant(newClock(ref).at(c.s))); got != c.want {
			t.Errorf("%g s: got %s, want %s", c.s, got, c.want)
		}
	}
	before := time.Date(1960, 1, 1, 0, 0, 0, 600_000, time.UTC)
	if got := stamp(instant(newClock(before).at(1))); got != "1960-01-01T00:00:01.001Z" {
		t.Errorf("before 1970: got %s", got)
	}
}

func TestSkylineRefuses(t *testing.T) {
	high := testSite()
	high.MinimumElevation = -2 * unit.Degree
	_, err := newSkyline(high, station.Apparent)
	want := `station "Test Hill": minimum elevation: -2 deg is not allowed; it must be at least -0.274 deg as apparent elevation, the sea horizon from 100 m; raise it, or give it as geometric elevation`
	if err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	masked := testSite()
	masked.Mask, err = station.NewMask([]station.MaskPoint{{Azimuth: 0, Elevation: 1 * unit.Degree}, {Azimuth: 1, Elevation: -3 * unit.Degree}}, station.Apparent)
	if err != nil {
		t.Fatal(err)
	}
	if _, err = newSkyline(masked, station.Geometric); err == nil || !strings.Contains(err.Error(), "horizon mask, entry 2: elevation: -3 deg is not allowed") {
		t.Errorf("got %v", err)
	}
	nowhere := testSite()
	nowhere.Latitude = unit.Angle(math.NaN())
	var re *unit.RangeError
	if _, err = newSkyline(nowhere, station.Geometric); !errors.As(err, &re) {
		t.Errorf("got %v, want a *unit.RangeError", err)
	}
}
