package pass

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// drawnSpread is small enough that the second order does not show in the sampling error, and
// its swing along the track is part of what is stated along.
var drawnSpread = orbit.Spread{Radial: 60, Along: 400, Across: 250}

type steadySpread struct{ s orbit.Spread }

func (u steadySpread) At(time.Time) (orbit.Spread, error) { return u.s, nil }
func (u steadySpread) Basis() string                      { return "test" }

const drawnRadius = 6898e3 // m, some 520 km up

func drawnElements() orbit.Elements {
	n := math.Sqrt(3.986004418e14/(drawnRadius*drawnRadius*drawnRadius)) * 86400 / (2 * math.Pi)
	return orbit.Elements{Name: "drawn", CatalogNumber: 1, Epoch: time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC), MeanMotion: n,
		Eccentricity: 0.0012, Inclination: 97.5 * unit.Degree, RAAN: 40 * unit.Degree, ArgPerigee: 70 * unit.Degree, MeanAnomaly: 10 * unit.Degree}
}

// neighbour draws an orbit next to el whose displacements have the standard deviations
// of s, by the elements themselves: the mean anomaly shifts along the track, the vector
// of eccentricity swings radially and twice that along, inclination and node across.
func neighbour(r *rand.Rand, el orbit.Elements, s orbit.Spread) orbit.Elements {
	const a = drawnRadius
	sinI, cosI := math.Sincos(el.Inclination.Radians())
	radial, across := s.Radial.Metres()/a, s.Across.Metres()/a
	along := math.Sqrt(s.Along.Metres()*s.Along.Metres()-4*s.Radial.Metres()*s.Radial.Metres()) / a
	node := r.NormFloat64() * across / sinI
	sinW, cosW := math.Sincos(el.ArgPerigee.Radians())
	ex, ey := el.Eccentricity*cosW+r.NormFloat64()*radial, el.Eccentricity*sinW+r.NormFloat64()*radial
	u := el.ArgPerigee.Radians() + el.MeanAnomaly.Radians() + r.NormFloat64()*along - node*cosI
	el.Inclination += unit.Angle(r.NormFloat64() * across)
	el.RAAN = (el.RAAN + unit.Angle(node)).Wrapped()
	el.Eccentricity = math.Hypot(ex, ey)
	w := math.Atan2(ey, ex)
	el.ArgPerigee, el.MeanAnomaly = unit.Angle(w).Wrapped(), unit.Angle(u-w).Wrapped()
	return el
}

// deviation gathers values about a centre that is known.
type deviation struct {
	name    string
	want    float64
	squares float64
	n       int
}

func (d *deviation) put(v float64) { d.squares += v * v; d.n++ }

// check compares the standard deviation of the draws with the analytic one: of n draws
// its own relative standard deviation is 1/sqrt(2n), and four of them are allowed.
func (d *deviation) check(t *testing.T) {
	t.Helper()
	got, tolerance := math.Sqrt(d.squares/float64(d.n)), 4/math.Sqrt(2*float64(d.n))
	if !(math.Abs(got/d.want-1) < tolerance) {
		t.Errorf("%s: %.6g over %d draws, %.6g by the formula, ratio %.4f, tolerance %.4f", d.name, got, d.n, d.want, got/d.want, tolerance)
	}
	t.Logf("%s: ratio %.4f, tolerance %.4f", d.name, got/d.want, tolerance)
}

func ephemerisFor(t *testing.T, e *orbit.Ephemeris, el orbit.Elements, w Window) {
	t.Helper()
	if err := e.Rebuild(el, w.From, w.To, orbit.EarthOrientation{}); err != nil {
		t.Fatal(err)
	}
}

func TestSpreadOfDrawnOrbits(t *testing.T) {
	sloped, err := station.NewMask([]station.MaskPoint{
		{Azimuth: 0, Elevation: 3 * unit.Degree}, {Azimuth: 90 * unit.Degree, Elevation: 20 * unit.Degree},
		{Azimuth: 180 * unit.Degree, Elevation: 5 * unit.Degree}, {Azimuth: 270 * unit.Degree, Elevation: 25 * unit.Degree}}, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	level := testSite()
	level.MinimumElevation = 5 * unit.Degree
	masked := testSite()
	masked.Mask = sloped
	for _, c := range []struct {
		name    string
		site    *station.Site
		decides station.ElevationKind
	}{{"level", level, station.Geometric}, {"sloped mask", masked, station.Geometric}, {"apparent", level, station.Apparent}} {
		t.Run(c.name, func(t *testing.T) { drawPasses(t, c.site, c.decides, 3000) })
	}
}

func drawPasses(t *testing.T, site *station.Site, decides station.ElevationKind, draws int) {
	el := drawnElements()
	day := Window{el.Epoch, el.Epoch.Add(24 * time.Hour)}
	var nominal, drawn orbit.Ephemeris
	ephemerisFor(t, &nominal, el, day)
	passes, err := Search(&nominal, site, day, decides)
	if err != nil {
		t.Fatal(err)
	}
	g, err := NewGauge(site, decides)
	if err != nil {
		t.Fatal(err)
	}
	p := passes[1]
	if p.MaxElevation < 30*unit.Degree {
		t.Fatalf("the pass culminates at %.1f deg only", p.MaxElevation.Degrees())
	}
	m, err := g.PlusMinus(&nominal, &p, steadySpread{drawnSpread})
	if err != nil {
		t.Fatal(err)
	}
	if m.MayVanish() {
		t.Fatalf("a pass of %.1f deg headroom grazes: clearance %.1f", m.Headroom.Degrees(), m.Clearance)
	}
	aos, los := &deviation{name: "AOS, s", want: m.AOS}, &deviation{name: "LOS, s", want: m.LOS}
	top := &deviation{name: "elevation at culmination, rad", want: m.MaxElevation.Radians()}
	along, total := &deviation{name: "along the sky, rad", want: m.Culminating.Along.Radians()}, &deviation{name: "total on the sky, rad", want: m.Culminating.Total().Radians()}
	rate, rateAOS := &deviation{name: "range rate at culmination, m/s", want: float64(m.Culminating.RangeRate)}, &deviation{name: "range rate at AOS, m/s", want: float64(m.AtAOS.RangeRate)}
	sight := &deviation{name: "range at AOS, m", want: m.AtAOS.Range.Metres()}
	f := site.Frame()
	at := func(e *orbit.Ephemeris, when time.Time) (orbit.State, station.Look) {
		s, err := e.At(when)
		if err != nil {
			t.Fatal(err)
		}
		return s, f.Look(s)
	}
	state, culmination := at(&nominal, p.Culmination)
	_, start := at(&nominal, p.AOS)
	d := state.Position.Sub(f.Origin).Unit()
	motion := state.Velocity.Sub(d.Scale(state.Velocity.Dot(d))).Unit()
	r := rand.New(rand.NewPCG(2026, 9))
	w := Window{p.AOS.Add(-2 * time.Minute), p.LOS.Add(2 * time.Minute)}
	for range draws {
		ephemerisFor(t, &drawn, neighbour(r, el, drawnSpread), w)
		found, err := Search(&drawn, site, w, decides)
		if err != nil || len(found) != 1 {
			t.Fatalf("%d passes, %v", len(found), err)
		}
		aos.put(found[0].AOS.Sub(p.AOS).Seconds())
		los.put(found[0].LOS.Sub(p.LOS).Seconds())
		s, l := at(&drawn, p.Culmination)
		_, first := at(&drawn, p.AOS)
		off := s.Position.Sub(f.Origin).Unit()
		top.put((l.Elevation - culmination.Elevation).Radians())
		along.put(off.Dot(motion))
		total.put(off.Cross(d).Norm())
		rate.put(float64(l.RangeRate - culmination.RangeRate))
		rateAOS.put(float64(first.RangeRate - start.RangeRate))
		sight.put((first.Range - start.Range).Metres())
	}
	for _, d := range []*deviation{aos, los, top, along, total, rate, rateAOS, sight} {
		d.check(t)
	}
}

// A horizon set a little under the culmination: the share of draws that still see a
// pass is Existence, within four standard deviations of a share of n draws.
func TestExistenceOfDrawnPasses(t *testing.T) {
	el, site := drawnElements(), testSite()
	day := Window{el.Epoch, el.Epoch.Add(24 * time.Hour)}
	var nominal, drawn orbit.Ephemeris
	ephemerisFor(t, &nominal, el, day)
	passes, err := Search(&nominal, site, day, station.Geometric)
	if err != nil {
		t.Fatal(err)
	}
	p := passes[0]
	for _, sigmas := range []float64{0.3, 1, 2} {
		g, err := NewGauge(site, station.Geometric)
		if err != nil {
			t.Fatal(err)
		}
		m, err := g.PlusMinus(&nominal, &p, steadySpread{drawnSpread})
		if err != nil {
			t.Fatal(err)
		}
		high := testSite()
		high.MinimumElevation = p.MaxElevation - unit.Angle(sigmas*m.MaxElevation.Radians())
		if g, err = NewGauge(high, station.Geometric); err != nil {
			t.Fatal(err)
		}
		w := Window{p.AOS, p.LOS}
		grazing, err := Search(&nominal, high, w, station.Geometric)
		if err != nil || len(grazing) != 1 {
			t.Fatalf("%d passes, %v", len(grazing), err)
		}
		if m, err = g.PlusMinus(&nominal, &grazing[0], steadySpread{drawnSpread}); err != nil {
			t.Fatal(err)
		}
		if !m.MayVanish() || math.Abs(m.Clearance-sigmas) > 0.01 {
			t.Errorf("%g standard deviations under the top: clearance %g, may vanish %v", sigmas, m.Clearance, m.MayVanish())
		}
		r := rand.New(rand.NewPCG(7, 9))
		const draws = 2000
		seen := 0
		for range draws {
			ephemerisFor(t, &drawn, neighbour(r, el, drawnSpread), w)
			found, err := Search(&drawn, high, w, station.Geometric)
			if err != nil {
				t.Fatal(err)
			}
			seen += len(found)
		}
		want := m.Existence()
		if share, tolerance := float64(seen)/draws, 4*math.Sqrt(want*(1-want)/draws); math.Abs(share-want) > tolerance {
			t.Errorf("%g standard deviations under the top: %.4f of the draws see a pass, %.4f by the formula, tolerance %.4f", sigmas, share, want, tolerance)
		}
	}
}

func TestPlusMinusEdges(t *testing.T) {
	p := Pass{AOS: time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC), LOS: time.Date(2026, 9, 15, 0, 1, 0, 0, time.UTC)}
	m := PlusMinus{AOS: 0.1234, LOS: math.NaN()}
	from, to := m.Around(&p, 3)
	if got := p.AOS.Sub(from); got != 371*time.Millisecond || !to.Equal(p.LOS) {
		t.Errorf("around: %v before AOS, %v after LOS; want 371ms and the window's edge", got, to.Sub(p.LOS))
	}
	if from, _, ok := m.Within(&p, 3); !ok || from.Sub(p.AOS) != 371*time.Millisecond {
		t.Errorf("within: starts %v after AOS, %v", from.Sub(p.AOS), ok)
	}
	m.LOS = 40
	if _, _, ok := m.Within(&p, 3); ok {
		t.Error("two minutes were taken off a pass of one, and something was left")
	}
}
