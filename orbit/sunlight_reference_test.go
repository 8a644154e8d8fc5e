package orbit_test

import (
	"testing"
	"time"

	"slantwise/orbit"
)

// The instants at which the light of six sets changes in a day, by rays to the rim of
// astropy's apparent Sun past the ellipsoid (testdata/SOURCES.md, astronomy).
func TestSunlightAgainstAstropy(t *testing.T) {
	sets, rows := referenceSets(t), referenceRows(t, "sunlight.csv")
	if len(rows) != 200 {
		t.Fatalf("%d instants; want 200", len(rows))
	}
	ephemerides := map[string]*orbit.Ephemeris{}
	for _, row := range rows {
		name, at := row[0], instant(t, row[1])
		e := ephemerides[name]
		if e == nil {
			el := sets[name]
			var err error
			if e, err = orbit.NewEphemeris(el, el.Epoch, el.Epoch.Add(25*time.Hour), referenceEarth(t, row[2:5])); err != nil {
				t.Fatal(err)
			}
			ephemerides[name] = e
		}
		s := e.Seconds(at)
		// 0.1 s: the Sun's direction to 1.5 arcseconds, against which a geostationary
		// spacecraft moves 15 of them in a second, and a low one 200.
		const tolerance = 0.1
		before, after := e.LightAt(s-tolerance).String(), e.LightAt(s+tolerance).String()
		if before != row[5] || after != row[6] {
			t.Errorf("%s about %s: from %s to %s within %g s; want from %s to %s", name, row[1], before, after, tolerance, row[5], row[6])
		}
	}
}
