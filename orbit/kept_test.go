package orbit

import (
	"fmt"
	"math"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

var keptEpoch = time.Date(2026, 9, 14, 12, 0, 0, 0, time.UTC)

func keptCase(altitudeKm, e, inclinationDeg float64) Elements {
	i := unit.Angle(inclinationDeg) * unit.Degree
	o := SyntheticOrbit{Name: "case", CatalogNumber: 99999, Epoch: keptEpoch, Altitude: unit.Length(altitudeKm * 1000), Eccentricity: e,
		Inclination: &i, RAAN: 40 * unit.Degree, ArgPerigee: 70 * unit.Degree, MeanAnomaly: 200 * unit.Degree}
	el, err := o.Elements()
	if err != nil {
		panic(err)
	}
	return el
}

// Without drag, and within the half of SGP4 that knows no Moon, the kept orbit is SGP4
// (the published verification states hold that one). Sun-synchronous orbits are held off what SGP4 does to their node.
func TestKeptOrbitAgainstSGP4(t *testing.T) {
	for _, c := range []struct{ altitude, e, inclination float64 }{
		{300, 0.001, 51.6}, {520, 0.0012, 64}, {800, 0.01, 35}, {1400, 0.05, 110}, {3000, 0.25, 63.4}, {560, 0.0001, 5},
	} {
		el := keptCase(c.altitude, c.e, c.inclination)
		k, err := KeepOrbit(el)
		if err != nil {
			t.Fatal(err)
		}
		if k.SunSynchronous() {
			t.Fatalf("%g km at %g deg is held as Sun-synchronous", c.altitude, c.inclination)
		}
		from, to := keptEpoch.Add(-time.Hour), keptEpoch.Add(25*time.Hour)
		kept, err := k.Ephemeris(from, to, EarthOrientation{}, nil)
		if err != nil {
			t.Fatal(err)
		}
		flown, err := NewEphemeris(el, from, to, EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		worst, fastest := 0.0, 0.0
		for s := 0.0; s <= kept.Span(); s += 97 {
			a, b := kept.StateAt(s), flown.StateAt(s)
			worst = max(worst, a.Position.Sub(b.Position).Norm())
			fastest = max(fastest, a.Velocity.Sub(b.Velocity).Norm())
		}
		if worst > 0.01 || fastest > 1e-5 {
			t.Errorf("%g km, e %g, %g deg: %.3f m and %.2g m/s from SGP4 within a day, want 1 cm and 0.01 mm/s", c.altitude, c.e, c.inclination, worst, fastest)
		}
	}
}

// Interpolation between the knots against the theory itself, for any instant.
func TestKeptOrbitInterpolation(t *testing.T) {
	for _, e := range []float64{0.0005, 0.1, 0.5, 0.7} {
		k, err := KeepOrbit(keptCase(26000*e+500, e, 60))
		if err != nil {
			t.Fatal(err)
		}
		from := keptEpoch.AddDate(0, 5, 0)
		eph, err := k.Ephemeris(from, from.Add(30*time.Hour), EarthOrientation{}, nil)
		if err != nil {
			t.Fatal(err)
		}
		rot := newRotation(from, EarthOrientation{})
		since := from.Sub(keptEpoch).Seconds()
		for s := 3.3; s < eph.Span(); s += 71.7 {
			p, v := k.turn.state(since + s)
			want, got := rot.earthFixed(s, p, v), eph.StateAt(s)
			if d := got.Position.Sub(want.Position).Norm(); d > 0.1 {
				t.Fatalf("e %g at %.1f s: %.3g m between knots", e, s, d)
			}
			if d := got.Velocity.Sub(want.Velocity).Norm(); d > 1e-3 {
				t.Fatalf("e %g at %.1f s: %.3g m/s between knots", e, s, d)
			}
		}
	}
}

// After a year and after five the mean height is the one of the first day, but for what
// the turning perigee does to a mean over time: the axis times the eccentricity times
// that of J3, a thousandth, some 10 m, and as much by the short-period terms.
func TestKeptOrbitHoldsItsHeight(t *testing.T) {
	k, err := KeepOrbit(keptCase(520, 0.001, 97.5))
	if err != nil {
		t.Fatal(err)
	}
	height := func(days int) float64 {
		from := keptEpoch.AddDate(0, 0, days)
		eph, err := k.Ephemeris(from, from.Add(10*k.NodalPeriod()), EarthOrientation{}, nil)
		if err != nil {
			t.Fatal(err)
		}
		sum, n := 0.0, 0
		for s := 0.0; s < eph.Span(); s += 20 {
			sum += eph.PositionAt(s).Norm()
			n++
		}
		return sum / float64(n)
	}
	first := height(0)
	for _, days := range []int{365, 5 * 365} {
		if d := height(days) - first; math.Abs(d) > 40 {
			t.Errorf("after %d days the orbit stands %.1f m from its height", days, d)
		}
	}
}

// A ground track repeats where so many nodal periods are so many nodal days (Wertz,
// Space Mission Analysis and Design, from memory). The height of a track of 15
// revolutions a day, near 567 km for a Sun-synchronous orbit (from memory, to 10 km).
func TestGroundTrackRepeats(t *testing.T) {
	low, high := 500.0, 620.0
	orbitAt := func(h float64) *KeptOrbit {
		o := SyntheticOrbit{CatalogNumber: 99999, Epoch: keptEpoch, Altitude: unit.Length(h * 1000), Eccentricity: 0.001, ArgPerigee: 90 * unit.Degree}
		el, err := o.Elements()
		if err != nil {
			t.Fatal(err)
		}
		k, err := KeepOrbit(el)
		if err != nil {
			t.Fatal(err)
		}
		return k
	}
	for range 60 {
		mid := (low + high) / 2
		if k := orbitAt(mid); 15*k.NodalPeriod() < k.NodalDay() {
			low = mid
		} else {
			high = mid
		}
	}
	if math.Abs(low-567) > 10 {
		t.Errorf("a Sun-synchronous track of 15 revolutions a day lies at %.1f km, want 567 within 10 km", low)
	}
	k := orbitAt(low)
	if d := k.NodalDay() - 24*time.Hour; d.Abs() > 50*time.Millisecond {
		t.Errorf("the nodal day of a Sun-synchronous orbit is %v, want 24 h", k.NodalDay())
	}
	// The perigee turns, so that a point of the track comes again within its small shift.
	eph, err := k.Ephemeris(keptEpoch, keptEpoch.Add(49*time.Hour), EarthOrientation{}, nil)
	if err != nil {
		t.Fatal(err)
	}
	for s := 0.0; s < 86400; s += 611 {
		a, b := eph.PositionAt(s).Unit(), eph.PositionAt(s+k.NodalDay().Seconds()).Unit()
		if d := a.Sub(b).Norm() * EquatorialRadius.Metres(); d > 2000 {
			t.Fatalf("at %g s the track comes again %.0f m aside after a day", s, d)
		}
	}
}

func ExampleSyntheticOrbit() {
	at := 10.5 * 15 * unit.Degree // half past ten
	o := SyntheticOrbit{Name: "Turnstone 1", CatalogNumber: 99010, Epoch: keptEpoch, Altitude: 520 * unit.Kilometre, Eccentricity: 0.001, LocalTime: &at}
	el, err := o.Elements()
	if err != nil {
		fmt.Println(err)
		return
	}
	k, err := KeepOrbit(el)
	if err != nil {
		fmt.Println(err)
		return
	}
	year := keptEpoch.AddDate(1, 0, 0)
	fmt.Printf("%.3f deg, %.4f revolutions a day, local time of the node after a year %.3f h\n",
		el.Inclination.Degrees(), el.MeanMotion, k.LocalTimeOfNode(year).Degrees()/15)
	// Output: 97.502 deg, 15.1433 revolutions a day, local time of the node after a year 10.500 h
}

// The first-order relation of the textbooks, (R/a)^3.5 cos i = -Ω'/(1.5 J2 √(μ/R³))
// for circular orbits (Vallado, Fundamentals of Astrodynamics and Applications, on
// Sun-synchronous orbits; from memory), and its inclinations as tables have them to
// 0.1 deg (from memory). J4 takes a quarter of a percent off the node's rate and J2² a
// tenth, which the relation does not know: 0.35 % of cos i is 0.03 deg.
func TestSunSynchronousInclination(t *testing.T) {
	for _, c := range []struct{ altitudeKm, tableDeg float64 }{{400, 97.0}, {500, 97.4}, {600, 97.8}, {700, 98.2}, {800, 98.6}, {1000, 99.5}} {
		got, err := SunSynchronousInclination(unit.Length(c.altitudeKm*1000), 0)
		if err != nil {
			t.Fatal(err)
		}
		const mu, radius, j2 = 398600.4418, 6378.137, 1.08262668e-3
		n := math.Sqrt(mu / math.Pow(radius+c.altitudeKm, 3))
		cos := -meanSunRate / (1.5 * j2 * math.Pow(radius/(radius+c.altitudeKm), 2) * n)
		want := math.Acos(cos) * 180 / math.Pi
		if math.Abs(got.Degrees()-want) > 0.03 {
			t.Errorf("%g km: %.4f deg, the first-order relation gives %.4f", c.altitudeKm, got.Degrees(), want)
		}
		if math.Abs(got.Degrees()-c.tableDeg) > 0.08 {
			t.Errorf("%g km: %.3f deg, tables have %.1f", c.altitudeKm, got.Degrees(), c.tableDeg)
		}
	}
	if _, err := SunSynchronousInclination(7000*unit.Kilometre, 0); err == nil {
		t.Error("7000 km: no error, and no inclination turns the node fast enough")
	}
	if _, err := SunSynchronousInclination(5900*unit.Kilometre, 0); err != nil {
		t.Errorf("5900 km: %v", err)
	}
}

// The node of a held orbit keeps its local time over years; SGP4 gives the synthetic
// elements back their height.
func TestSyntheticOrbit(t *testing.T) {
	at := 22.25 * 15 * unit.Degree
	o := SyntheticOrbit{Name: "n", CatalogNumber: 99999, Epoch: keptEpoch, Altitude: 700 * unit.Kilometre, Eccentricity: 0.002, LocalTime: &at}
	el, err := o.Elements()
	if err != nil {
		t.Fatal(err)
	}
	f, err := el.Facts()
	if err != nil {
		t.Fatal(err)
	}
	if d := f.SemiMajorAxis - EquatorialRadius - o.Altitude; math.Abs(d.Metres()) > 0.01 {
		t.Errorf("SGP4 recovers an orbit %.3f m from the altitude asked for", d.Metres())
	}
	k, err := KeepOrbit(el)
	if err != nil {
		t.Fatal(err)
	}
	if !k.SunSynchronous() || math.Abs(float64(k.NodeDrift())) > 1e-13 {
		t.Errorf("held %t, drift %g rad/s", k.SunSynchronous(), float64(k.NodeDrift()))
	}
	for _, years := range []int{0, 1, 10} {
		if got := k.LocalTimeOfNode(keptEpoch.AddDate(years, 0, 0)).Degrees() / 15; math.Abs(got-22.25) > 1e-3 {
			t.Errorf("after %d years the node's local time is %.5f h, want 22.25", years, got)
		}
	}
	// The node of the ephemeris: its longitude is local time less universal time.
	node, err := el.NextAscendingNode(keptEpoch.Add(5 * time.Hour))
	if err != nil {
		t.Fatal(err)
	}
	eph, err := k.Ephemeris(node.Add(-time.Minute), node.Add(time.Minute), EarthOrientation{}, nil)
	if err != nil {
		t.Fatal(err)
	}
	p := eph.PositionAt(60)
	clock := math.Atan2(p.Y, p.X)*12/math.Pi + float64(node.Hour()) + float64(node.Minute())/60 + float64(node.Second())/3600
	if d := math.Remainder(clock-22.25, 24); math.Abs(d) > 2e-3 {
		t.Errorf("the node of SGP4 stands %.5f h off the local time", d)
	}
}

func TestSyntheticOrbitRefuses(t *testing.T) {
	for name, o := range map[string]SyntheticOrbit{
		"low":         {Altitude: 50 * unit.Kilometre},
		"not there":   {Altitude: unit.Length(math.NaN())},
		"hyperbolic":  {Altitude: 500 * unit.Kilometre, Eccentricity: 1},
		"in the soil": {Altitude: 500 * unit.Kilometre, Eccentricity: 0.2},
		"too high":    {Altitude: 20000 * unit.Kilometre},
	} {
		o.Epoch = keptEpoch
		if _, err := o.Elements(); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
	el := keptCase(500, 0.001, 50)
	k, err := KeepOrbit(el)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := k.Ephemeris(keptEpoch, keptEpoch.Add(-time.Second), EarthOrientation{}, nil); err == nil {
		t.Error("a span that ends before it begins: no error")
	}
	el.Eccentricity = 0.5
	if _, err := KeepOrbit(el); err == nil {
		t.Error("a perigee in the ground: no error")
	}
}

func BenchmarkKeptOrbitTenDays(b *testing.B) {
	k, err := KeepOrbit(keptCase(520, 0.001, 97.5))
	if err != nil {
		b.Fatal(err)
	}
	var eph *Ephemeris
	b.ReportAllocs()
	for b.Loop() {
		if eph, err = k.Ephemeris(keptEpoch, keptEpoch.AddDate(0, 0, 10), EarthOrientation{}, eph); err != nil {
			b.Fatal(err)
		}
	}
}

// The mean nodes against the nodes of SGP4, within the swing of an eccentricity of
// 0.001: twice that of an orbit's arc, 2 e / 2π of a period.
func TestAscendingNodesOfKeptOrbit(t *testing.T) {
	el := keptCase(520, 0.001, 64)
	k, err := KeepOrbit(el)
	if err != nil {
		t.Fatal(err)
	}
	from := keptEpoch.Add(3 * time.Hour)
	nodes := k.AscendingNodes(from, from.Add(24*time.Hour))
	if len(nodes) != 16 || nodes[0] > 0 || nodes[0] < -k.NodalPeriod().Seconds() {
		t.Fatalf("%d nodes from %g s, want 16 from within a period before", len(nodes), nodes[0])
	}
	for _, s := range nodes {
		near := from.Add(time.Duration(s * float64(time.Second)))
		node, err := el.NextAscendingNode(near.Add(-time.Minute))
		if err != nil {
			t.Fatal(err)
		}
		if d := node.Sub(near).Abs(); d > 4*time.Second {
			t.Errorf("the mean node at %s is %v from the node", near, d)
		}
	}
}
