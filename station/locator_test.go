package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

// The first four are the examples of Tyson, Conversion between geodetic and grid locator
// systems, QST, January 1989, as the tests of public programs quote them: the place lies
// within its rectangle. So does the fifth, the station of the American radio amateurs'
// league, which these tests add.
func TestLocatorHoldsItsPlace(t *testing.T) {
	for _, c := range []struct {
		text     string
		lat, lon float64
	}{
		{"JN58td", 48.14666, 11.60833}, // Munich
		{"GF15vc", -34.91, -56.21166},  // Montevideo
		{"FM18lw", 38.92, -77.065},     // Washington
		{"RE78ir", -41.28333, 174.745}, // Wellington
		{"FN31pr", 41.714775, -72.727260},
	} {
		for n := 4; n <= 6; n += 2 {
			l, err := ParseLocator(strings.ToUpper(c.text)[:n])
			if err != nil {
				t.Fatal(err)
			}
			up, right := c.lat-l.South.Degrees(), c.lon-l.West.Degrees()
			if l.Text != c.text[:n] || !(up >= 0 && up < l.Height.Degrees() && right >= 0 && right < l.Width.Degrees()) {
				t.Errorf("%s: %g, %g deg lies outside %g + %g, %g + %g deg", l.Text, c.lat, c.lon, l.South.Degrees(), l.Height.Degrees(), l.West.Degrees(), l.Width.Degrees())
			}
		}
	}
}

// Ten characters: the south-western corner that a public library's documentation prints
// for each, to its six decimals (the package maidenhead of pub.dev, seen).
func TestLocatorOfTenCharacters(t *testing.T) {
	for text, corner := range map[string][2]float64{"JN75xu32SP": {45.844271, 15.947917}, "JN75XU32NV": {45.845313, 15.946181}} {
		l, err := ParseLocator(text)
		if err != nil || math.Abs(l.South.Degrees()-corner[0]) > 1e-6 || math.Abs(l.West.Degrees()-corner[1]) > 1e-6 {
			t.Errorf("%s: corner %.6f, %.6f deg, %v, want %v", text, l.South.Degrees(), l.West.Degrees(), err, corner)
		}
		// 20 deg / 10 / 24 / 10 / 24 and half of it: definition.
		if w, h := l.Width.Degrees(), l.Height.Degrees(); math.Abs(w-20.0/57600) > 1e-12 || math.Abs(h-10.0/57600) > 1e-12 {
			t.Errorf("%s: %g by %g deg", text, w, h)
		}
		if math.Abs((l.Latitude-l.South-l.Height/2).Degrees()) > 1e-12 || math.Abs((l.Longitude-l.West-l.Width/2).Degrees()) > 1e-12 {
			t.Errorf("%s: the middle is at %g, %g deg", text, l.Latitude.Degrees(), l.Longitude.Degrees())
		}
	}
}

// The system covers the Earth: its first and its last rectangle.
func TestLocatorEnds(t *testing.T) {
	first, err := ParseLocator("AA00aa00aa")
	if err != nil || first.West != -180*unit.Degree || first.South != -90*unit.Degree {
		t.Errorf("first: %+v, %v", first, err)
	}
	last, err := ParseLocator("RR99xx99xx")
	if err != nil || math.Abs((last.West+last.Width).Degrees()-180) > 1e-9 || math.Abs((last.South+last.Height).Degrees()-90) > 1e-9 {
		t.Errorf("last: %+v, %v", last, err)
	}
	for text, want := range map[string]string{
		"": "give 4, 6, 8 or 10", "JN": "give 4", "JN58t": "give 4", "JN58td12ab3": "give 4", "ZN58": "character 1 must be a letter A to R",
		"JN5x": "character 4 must be a digit", "JN58yd": "character 5 must be a letter A to X", "JN58td1x": "character 8", "JN58td11ay": "character 10", "JÑ58": "give 4",
	} {
		if l, err := ParseLocator(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %+v, %v, want %q", text, l, err, want)
		}
	}
}

// What is accepted is a rectangle on the Earth, and its text reads as itself.
func FuzzParseLocator(f *testing.F) {
	for _, s := range []string{"JN58td", "jn58", "FN31pr45ab", "ZZ99", "JN58t", "АА00"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		l, err := ParseLocator(text)
		if err != nil {
			return
		}
		if !(math.Abs(l.Latitude.Degrees()) < 90 && math.Abs(l.Longitude.Degrees()) < 180 && l.Width > 0 && l.Height > 0) {
			t.Errorf("%q is %+v", text, l)
		}
		if again, err := ParseLocator(l.Text); err != nil || again != l {
			t.Errorf("%q: %+v, read again %+v, %v", text, l, again, err)
		}
	})
}
