package orbit_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
)

// Earth-fixed states against astropy 5.2.1 over sgp4 2.15, with UT1-UTC and the pole
// given to both (testdata/SOURCES.md, astronomy).
func TestEarthFixedAgainstAstropy(t *testing.T) {
	sets, _, err := elements.ReadFile("../testdata/astronomy/elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	byName := map[string]orbit.Elements{}
	for _, el := range sets {
		byName[el.Name] = el
	}
	f, err := os.Open("../testdata/astronomy/earth_fixed.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != 1+9*12 {
		t.Fatalf("%d rows; want a header and 12 states of 9 element sets", len(rows))
	}
	ephemerides := map[string]*orbit.Ephemeris{}
	for _, row := range rows[1:] {
		var v [9]float64
		for i := range v {
			if v[i], err = strconv.ParseFloat(row[i+2], 64); err != nil {
				t.Fatal(err)
			}
		}
		at, err := time.Parse(time.RFC3339Nano, row[1])
		if err != nil {
			t.Fatal(err)
		}
		e := ephemerides[row[0]]
		if e == nil {
			el := byName[row[0]]
			earth := orbit.EarthOrientation{
				UT1MinusUTC:  time.Duration(math.Round(v[0] * 1e9)),
				PolarMotionX: unit.Angle(v[1]) * unit.Arcsecond,
				PolarMotionY: unit.Angle(v[2]) * unit.Arcsecond,
			}
			// The instants of the file lie within 4 days of the epoch.
			if e, err = orbit.NewEphemeris(el, el.Epoch.Add(-time.Second), el.Epoch.Add(96*time.Hour+time.Second), earth); err != nil {
				t.Fatal(err)
			}
			ephemerides[row[0]] = e
		}
		got, err := e.At(at)
		if err != nil {
			t.Fatal(err)
		}
		dr := got.Position.Sub(orbit.Vec3{X: v[3], Y: v[4], Z: v[5]}).Norm()
		dv := got.Velocity.Sub(orbit.Vec3{X: v[6], Y: v[7], Z: v[8]}).Norm()
		// 0.3 m: the aim for the interpolation. 2 mm/s: the ephemeris' own claim is 1, the
		// rest is what the engine's coarse time leaves (a tenth of the aim of 20 mm/s).
		if !(dr <= 0.3 && dv <= 0.002) {
			t.Errorf("%s at %s: %.3f m and %.5f m/s from astropy; want at most 0.3 m and 0.002 m/s", row[0], row[1], dr, dv)
		}
	}
}
