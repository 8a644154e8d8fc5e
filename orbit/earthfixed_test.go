package orbit

import (
	"math"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// The example of AIAA 2006-6753 Rev 2, Appendix C, as the tests of general-purpose
// astronomy libraries quote it. Tolerance: the published run held the Julian date in
// one float64, 20 µs, 12 mm here; the velocity's is the excess length of day that is
// left out (1.6 ms, 1e-5 m/s here) and as much again.
func TestFrameExample(t *testing.T) {
	at := time.Date(2004, 4, 6, 7, 51, 28, 386e6, time.UTC)
	earth := EarthOrientation{
		UT1MinusUTC:  -439961 * time.Microsecond,
		PolarMotionX: -0.140682 * unit.Arcsecond,
		PolarMotionY: 0.333309 * unit.Arcsecond,
	}
	got := TEMEToEarthFixed(
		Vec3{5094.18016210e3, 6127.64465950e3, 6380.34453270e3},
		Vec3{-4746.131487, 785.818041, 5531.931288}, at, earth)
	want := State{
		Position: Vec3{-1033.47938300e3, 7901.29527540e3, 6380.35659580e3},
		Velocity: Vec3{-3225.636520, -2872.451450, 5531.924446},
	}
	if d := got.Position.Sub(want.Position).Norm(); d > 0.02 {
		t.Errorf("position %v, want %v: %.4f m apart, over 0.02 m", got.Position, want.Position, d)
	}
	if d := got.Velocity.Sub(want.Velocity).Norm(); d > 2e-5 {
		t.Errorf("velocity %v, want %v: %.3g m/s apart, over 2e-5 m/s", got.Velocity, want.Velocity, d)
	}
}

// The sidereal time of Meeus, Astronomical Algorithms, examples 12.a and 12.b, printed
// to 0.0001 s of time.
func TestGMST(t *testing.T) {
	for _, c := range []struct {
		at   time.Time
		want float64 // seconds of time
	}{
		{time.Date(1987, 4, 10, 0, 0, 0, 0, time.UTC), 13*3600 + 10*60 + 46.3668},
		{time.Date(1987, 4, 10, 19, 21, 0, 0, time.UTC), 8*3600 + 34*60 + 57.0896},
	} {
		got := GMST(c.at, EarthOrientation{}).Degrees() * 240
		if math.Abs(got-c.want) > 5e-5 {
			t.Errorf("%v: %.5f s, want %.4f s", c.at, got, c.want)
		}
	}
}

// States by astropy 5.2.1 with UT1-UTC and pole as given (testdata/astronomy), printed
// to 1 mm and 0.01 mm/s. Tolerance: the interpolation's, 0.3 m and 1 mm/s.
func TestStatesOfReferenceLibrary(t *testing.T) {
	sets := referenceSets(t)
	worst, worstV := 0.0, 0.0
	for _, row := range referenceRows(t, "../testdata/astronomy/earth_fixed.csv") {
		at := instant(t, row[1])
		e, err := NewEphemeris(sets[row[0]], at.Add(-time.Hour), at.Add(time.Hour), orientation(t, row[2], row[3], row[4]))
		if err != nil {
			t.Fatal(err)
		}
		got, err := e.At(at)
		if err != nil {
			t.Fatal(err)
		}
		d := got.Position.Sub(Vec3{number(t, row[5]), number(t, row[6]), number(t, row[7])}).Norm()
		dv := got.Velocity.Sub(Vec3{number(t, row[8]), number(t, row[9]), number(t, row[10])}).Norm()
		worst, worstV = math.Max(worst, d), math.Max(worstV, dv)
		if d > 0.3 || dv > 1e-3 {
			t.Errorf("%s at %s: %.4f m and %.6f m/s from the reference", row[0], row[1], d, dv)
		}
	}
	t.Logf("worst %.4f m, %.6f m/s", worst, worstV)
}
