package pass

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var benchStart = time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)

// fleet makes n low orbits at 500 to 650 km, inclined 40° to 98°, invented, with the
// digits that an element set has.
func fleet(n int) []orbit.Elements {
	r := rand.New(rand.NewPCG(2026, 3))
	digits := func(v, unit float64) float64 { return math.Round(v/unit) * unit }
	angle := func(lo, hi float64) unit.Angle {
		return unit.Angle(digits(lo+(hi-lo)*r.Float64(), 1e-4)) * unit.Degree
	}
	sets := make([]orbit.Elements, n)
	for i := range sets {
		sets[i] = orbit.Elements{
			Name: fmt.Sprintf("Invented %d", i), CatalogNumber: 90000 + i, Epoch: benchStart.Add(-12 * time.Hour),
			MeanMotion:   digits(14.8+0.4*r.Float64(), 1e-8),
			Eccentricity: digits(0.0001+0.002*r.Float64(), 1e-7),
			Inclination:  angle(40, 98),
			RAAN:         angle(0, 359),
			ArgPerigee:   angle(0, 359),
			MeanAnomaly:  angle(0, 359),
			BStar:        5e-5,
		}
	}
	return sets
}

// network makes n sites between 70° south and 70° north, with a bare horizon.
func network(n int, minimum unit.Angle) []*station.Site {
	r := rand.New(rand.NewPCG(2026, 10))
	sites := make([]*station.Site, n)
	for i := range sites {
		sites[i] = &station.Site{
			Name:             fmt.Sprintf("Site %d", i),
			Latitude:         unit.Angle(-70+140*r.Float64()) * unit.Degree,
			Longitude:        unit.Angle(-180+360*r.Float64()) * unit.Degree,
			Altitude:         unit.Length(1000 * r.Float64()),
			MinimumElevation: minimum,
		}
	}
	return sites
}

func benchJob(craft, sites int, minimum unit.Angle) Job {
	sets := fleet(craft)
	w := Window{benchStart, benchStart.Add(7 * 24 * time.Hour)}
	return Job{
		Spacecraft: craft, Sites: network(sites, minimum), Window: w, Workers: 1,
		Ephemeris: func(i int, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
			return scratch, scratch.Rebuild(sets[i], w.From, w.To, orbit.EarthOrientation{})
		},
	}
}

// BenchmarkReferenceLoop times a plain floating-point loop, so that figures from
// machines of different speed can be compared.
func BenchmarkReferenceLoop(b *testing.B) {
	for b.Loop() {
		s := 0.0
		for i := 1; i <= 1000; i++ {
			s += math.Sqrt(float64(i)) / (1 + s)
		}
		if s == 0 {
			b.Fatal("the sum is gone")
		}
	}
}

func benchmarkSearchAll(b *testing.B, j Job) {
	b.ReportAllocs()
	passes := 0
	for b.Loop() {
		l, err := SearchAll(context.Background(), j)
		if err != nil {
			b.Fatal(err)
		}
		passes = l.Len()
	}
	b.ReportMetric(float64(passes), "passes")
}

func BenchmarkSearch10x5(b *testing.B)   { benchmarkSearchAll(b, benchJob(10, 5, 0)) }
func BenchmarkSearch100x50(b *testing.B) { benchmarkSearchAll(b, benchJob(100, 50, 0)) }
func BenchmarkSearch100x50At10(b *testing.B) {
	benchmarkSearchAll(b, benchJob(100, 50, 10*unit.Degree))
}

// BenchmarkSearch100x50Masked gives every site a mask of 36 points between 2° and 12°.
func BenchmarkSearch100x50Masked(b *testing.B) {
	j := benchJob(100, 50, 0)
	r := rand.New(rand.NewPCG(2026, 11))
	for _, s := range j.Sites {
		points := make([]station.MaskPoint, 36)
		for i := range points {
			points[i] = station.MaskPoint{Azimuth: unit.Angle(10*i) * unit.Degree, Elevation: unit.Angle(2+10*r.Float64()) * unit.Degree}
		}
		m, err := station.NewMask(points, station.Geometric)
		if err != nil {
			b.Fatal(err)
		}
		s.Mask = m
	}
	benchmarkSearchAll(b, j)
}

// BenchmarkEphemerides100 times what of the search is propagation.
func BenchmarkEphemerides100(b *testing.B) { benchmarkSearchAll(b, benchJob(100, 0, 0)) }
