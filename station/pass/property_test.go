package pass

import (
	"math"
	"slices"
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
		MinimumElevation: unit.Angle(rapid.SampledFrom([]float64{-4, 0, 0, 5, 10, 40, 80}).Draw(t, "min")) * unit.Degree,
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

// Every edge that the plain scan sees must be found, to 0.1 ms, and every edge that is
// found must be one.
func TestSearchAgainstPlainScan(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		span := 86400.0
		k := drawOrbit(t, span)
		s := drawSite(t)
		decides := rapid.SampledFrom([]station.ElevationKind{station.Geometric, station.Apparent}).Draw(t, "decides")
		if decides == station.Apparent { // no ray comes from below the sea horizon
			s.MinimumElevation = max(s.MinimumElevation, 0)
		}
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

// sameArcs wants every edge of the scan among those of the search, and the search to
// be right by the definition: at each of its edges the state changes, and between
// them it is what the arcs say.
func sameArcs(t *rapid.T, o *oracle, got, want []times) {
	const tol = 1e-4 // s
	found := edges(got)
	for _, w := range edges(want) {
		if i, _ := slices.BinarySearch(found, w-tol); i == len(found) || found[i] > w+tol {
			t.Fatalf("the edge at %.6f s is missed\nsearch %v\nscan   %v", w, got, want)
		}
	}
	for i, e := range found {
		before, after := 0.0, o.m.Span()
		if i > 0 {
			before = found[i-1]
		}
		if i+1 < len(found) {
			after = found[i+1]
		}
		if e == 0 || e == o.m.Span() || e-before < 2*tol || after-e < 2*tol {
			continue // an end of the window, or one edge on the heels of another
		}
		rising := i%2 == 0
		if (o.clear(e+tol) >= 0) != rising || (o.clear(e-tol) >= 0) == rising {
			t.Fatalf("edge %d at %.6f s, rising %v: %g rad before, %g rad after", i, e, rising, o.clear(e-tol), o.clear(e+tol))
		}
		if mid := (e + after) / 2; (o.clear(mid) >= 0) != rising {
			t.Fatalf("from %.6f s to %.6f s visible is %v, but %g rad at %.6f s", e, after, rising, o.clear(mid), mid)
		}
	}
}

func edges(arcs []times) []float64 {
	var e []float64
	for _, a := range arcs {
		e = append(e, a.from, a.to)
	}
	return e
}
