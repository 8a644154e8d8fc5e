package pass

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// drawOrbit draws low, Molniya-like, transfer, medium and geosynchronous orbits with
// perigees from 200 km.
func drawOrbit(t *rapid.T, span float64) kepler {
	angle := rapid.Float64Range(0, 2*math.Pi)
	k := kepler{node: angle.Draw(t, "node"), peri: angle.Draw(t, "peri"), m0: angle.Draw(t, "m0"), inc: rapid.Float64Range(0, math.Pi).Draw(t, "inc"), span: span}
	perigee := 6378e3 + rapid.Float64Range(200e3, 1500e3).Draw(t, "perigee")
	switch rapid.SampledFrom([]string{"low", "low", "molniya", "transfer", "medium", "geo"}).Draw(t, "kind") {
	case "low":
		k.e = rapid.Float64Range(0, 0.02).Draw(t, "e")
		k.a = perigee / (1 - k.e)
	case "molniya":
		k.a = 26560e3
		k.e = 1 - perigee/k.a
	case "transfer":
		k.a = (perigee + rapid.Float64Range(20000e3, 45000e3).Draw(t, "apogee")) / 2
		k.e = 1 - perigee/k.a
	case "medium":
		k.a, k.e = rapid.Float64Range(9000e3, 30000e3).Draw(t, "a"), rapid.Float64Range(0, 0.1).Draw(t, "e")
	case "geo":
		k.a, k.e, k.inc = 42164e3, rapid.Float64Range(0, 0.01).Draw(t, "e"), rapid.Float64Range(0, 0.2).Draw(t, "inc")
	}
	return k
}

func drawSite(t *rapid.T) *station.Site {
	s := &station.Site{
		Name:             "Test Hill",
		Latitude:         unit.Angle(rapid.Float64Range(-90, 90).Draw(t, "lat")) * unit.Degree,
		Longitude:        unit.Angle(rapid.Float64Range(-180, 180).Draw(t, "lon")) * unit.Degree,
		Altitude:         unit.Length(rapid.Float64Range(0, 4000).Draw(t, "alt")),
		MinimumElevation: unit.Angle(rapid.SampledFrom([]float64{0, 0, 5, 10, 40, 80}).Draw(t, "min")) * unit.Degree,
	}
	if rapid.Bool().Draw(t, "masked") {
		s.Mask = drawMask(t)
	}
	return s
}

// drawMask draws masks from gentle to teeth with edges of a thousandth of a degree.
func drawMask(t *rapid.T) *station.Mask {
	gap := rapid.SampledFrom([]float64{0.001, 1, 30}).Draw(t, "gap")
	height := rapid.SampledFrom([]float64{2, 15, 88}).Draw(t, "height")
	var points []station.MaskPoint
	for az := rapid.Float64Range(0, 60).Draw(t, "first"); az < 360; {
		el := rapid.Float64Range(0, height).Draw(t, "el")
		points = append(points, station.MaskPoint{Azimuth: unit.Angle(az) * unit.Degree, Elevation: unit.Angle(el) * unit.Degree})
		az += gap + rapid.Float64Range(0, 40).Draw(t, "on")*float64(len(points)%2)
		if len(points) > 40 {
			break
		}
	}
	kind := rapid.SampledFrom([]station.ElevationKind{station.Geometric, station.Apparent}).Draw(t, "mask kind")
	m, err := station.NewMask(points, kind)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// arcsOf runs the search down to arcs, before they are rounded and described.
func arcsOf(t interface{ Fatal(...any) }, m motion, s *station.Site, decides station.ElevationKind, from, to float64) (*finder, []times) {
	k, err := newSkyline(s, decides)
	if err != nil {
		t.Fatal(err)
	}
	f := &finder{clock: newClock(time.Unix(0, 0))}
	f.track.reset(m, from, to)
	f.find(k, nil)
	var got []times
	for i := range f.arcs {
		got = append(got, times{f.arcs[i].from.t, f.arcs[i].to.t})
	}
	return f, got
}

// Every arc of the plain scan that lasts over its step must be found, to 0.1 ms, and
// every arc that is found must be seen by the scan, in place where it is too short for
// its step.
func TestSearchAgainstPlainScan(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		span := 86400.0
		k := drawOrbit(t, span)
		s := drawSite(t)
		decides := rapid.SampledFrom([]station.ElevationKind{station.Geometric, station.Apparent}).Draw(t, "decides")
		f, got := arcsOf(t, k, s, decides, 0, span)
		o := newOracle(k, s, decides)
		want := o.arcs(0, span, 20)
		sameArcs(t, o, got, want)
		for i, a := range got {
			top, near := f.scene.extremes(&f.arcs[i])
			_, best, _ := o.direction(top.t)
			if gridTop, el := o.culmination(a, 20); el > best.Radians()+1e-9 {
				t.Fatalf("arc %v: culmination %.6f deg at %.3f s, the grid has %.6f deg at %.3f s", a, best.Degrees(), top.t, unit.Angle(el).Degrees(), gridTop)
			}
			if grid := o.nearest(a, 20); grid < near-0.01 {
				t.Fatalf("arc %v: least range %.3f m, the grid has %.3f m", a, near, grid)
			}
		}
	})
}

// sameArcs compares the edges of both lists in time order; edges that only one has
// must come in pairs closer than the scan's step that the definition confirms.
func sameArcs(t *rapid.T, o *oracle, got, want []times) {
	g, w := edges(got), edges(want)
	for len(g) > 0 || len(w) > 0 {
		if len(g) > 0 && len(w) > 0 && math.Abs(g[0]-w[0]) < 1e-4 {
			g, w = g[1:], w[1:]
			continue
		}
		// Only the search may know more, and what it knows must be so.
		if len(g) < 2 || len(w) > 0 && w[0] < g[1] || g[1]-g[0] > 20 {
			t.Fatalf("edges differ: search %v, scan %v\nsearch %v\nscan   %v", head(g), head(w), got, want)
		}
		// Three places between, since what is shorter than the search's resolution may
		// lie at one of them.
		before, after, changes := o.clear(g[0]-1e-3), o.clear(g[1]+1e-3), false
		for _, share := range []float64{0.25, 0.5, 0.75} {
			between := o.clear(g[0] + share*(g[1]-g[0]))
			changes = changes || (between >= 0) != (before >= 0) || (between >= 0) != (after >= 0)
		}
		if !changes {
			t.Fatalf("edges %v: nothing changes there: %g rad before, %g rad after", g[:2], before, after)
		}
		g = g[2:]
	}
}

func edges(arcs []times) []float64 {
	var e []float64
	for _, a := range arcs {
		e = append(e, a.from, a.to)
	}
	return e
}

func head(v []float64) []float64 { return v[:min(len(v), 4)] }
