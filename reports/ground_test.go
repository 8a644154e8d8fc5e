package reports

import (
	"encoding/json"
	"math"
	"strconv"
	"strings"
	"testing"
)

// groundOf gives a fixture pass a map: a meridian flown northwards, a circle of 18 deg
// around the station, and a night beyond 4 deg of longitude to the east.
func groundOf(p *Pass) *Ground {
	g := &Ground{Station: Place{58.4, -6.1}, SubSolar: Place{0, -86}, NightHere: false}
	n := len(p.Profile.Seconds)
	for i := range n {
		x := float64(i)/float64(n-1)*20 - 10
		g.Track = append(g.Track, Place{58 + x, -2})
		g.HeightKm = append(g.HeightKm, 550)
		g.Lit = append(g.Lit, i < n/2)
	}
	for k := range 36 {
		s, c := math.Sincos(float64(k) * math.Pi / 18)
		g.Circle = append(g.Circle, Place{58.4 + 18*c, -6.1 + 34*s})
	}
	for k := range 60 { // the great circle through the poles and 4 deg, 184 deg east
		a := float64(k) * 6
		if a <= 180 {
			g.Night = append(g.Night, Place{a - 90, 4})
		} else {
			g.Night = append(g.Night, Place{270 - a, -176})
		}
	}
	g.Before, g.After = []Place{{46, -2}, {47, -2}}, []Place{{69, -2}}
	g.Sky = []SkyBody{{"Sun", 170, 31.2}, {"Moon", 20, -14}}
	return g
}

// The worked example of the azimuthal equidistant projection on the sphere: R = 3.0,
// middle 40 N 100 W, point 20 S 100 E gives x = -5.8311398, y = 5.5444634.
// Snyder, USGS Professional Paper 1395, 1987, p. 337 (from memory, and equal to eqs.
// (5-3), (22-4) and (22-5) worked apart from this code).
func TestPlaneOfTheWorkedExample(t *testing.T) {
	m := newPlane(Place{40, -100}, 180/math.Pi, 3.0)
	x, y := m.point(Place{-20, 100})
	x, y = x-m.x, m.y-y
	if math.Abs(x - -5.8311398) > 5e-8 || math.Abs(y-5.5444634) > 5e-8 {
		t.Errorf("the point comes to %.7f, %.7f, want -5.8311398, 5.5444634", x, y)
	}
}

// pathRings reads the drawn rings back.
func pathRings(t *testing.T, d string) [][][2]float64 {
	t.Helper()
	var rings [][][2]float64
	for _, ring := range strings.Split(strings.TrimSuffix(d, "z"), "z") {
		var list [][2]float64
		for _, q := range strings.FieldsFunc(ring, func(r rune) bool { return r == 'M' || r == 'L' }) {
			xs, ys, _ := strings.Cut(q, " ")
			x, errX := strconv.ParseFloat(xs, 64)
			y, errY := strconv.ParseFloat(ys, 64)
			if errX != nil || errY != nil {
				t.Fatalf("not a point: %q", q)
			}
			list = append(list, [2]float64{x, y})
		}
		rings = append(rings, list)
	}
	return rings
}

func drawnInside(rings [][][2]float64, x, y float64) bool {
	in := false
	for _, r := range rings {
		for i := range r {
			a, b := r[i], r[(i+1)%len(r)]
			if (a[1] > y) != (b[1] > y) && x < a[0]+(y-a[1])/(b[1]-a[1])*(b[0]-a[0]) {
				in = !in
			}
		}
	}
	return in
}

// Wherever the station stands, what the map fills is what the rings hold: near the
// poles, at the meridian of 180 deg, inland, and with the antipode on land. Points
// closer to a coast than the drawing's tenth of a unit may fall on either side.
func TestAreaIsWhatTheRingsHold(t *testing.T) {
	rings := [][]Place{
		{{-60, -180}, {-60, -90}, {-60, 0}, {-60, 90}, {-60, 180}, {-90, 180}, {-90, -180}}, // around the south pole, closed along it
		{{10, -120}, {60, -140}, {70, -60}, {20, -70}},                                      // an outline with
		{{40, -110}, {50, -110}, {50, -100}, {40, -100}},                                    // a lake in it
		{{-10, 150}, {40, 140}, {40, 180}, {-10, 180}},                                      // cut at 180 deg
		{{-10, -180}, {40, -180}, {30, -170}, {-5, -170}},
		{{60, 150}, {75, 160}, {70, -170}, {65, -175}}, // across it
	}
	if c := coast(); c != nil {
		all := make([][]Place, len(c))
		for i := range c {
			all[i] = places(c[i])
		}
		checkArea(t, "coast", all, 0.02)
	}
	checkArea(t, "outlines", rings, 0.02)
}

// checkArea compares on a grid; share is how many points may fall on the other side.
func checkArea(t *testing.T, name string, rings [][]Place, share float64) {
	for _, middle := range []Place{{58, -6}, {-23, 17}, {45, -105}, {89, 0}, {-89.5, 40}, {0, 179.5}, {-10, 75}, {50, 85}, {-33, 151}} {
		for _, reach := range []float64{15, 80} {
			m := newPlane(middle, reach, 200)
			drawn := pathRings(t, m.area(rings, holds(rings, middle)))
			wrong, all := 0, 0
			step := reach / 7
			for lat := -88.7; lat < 90; lat += step {
				for lon := -179.3; lon < 180; lon += step {
					q := Place{lat, lon}
					if angle, _ := m.polar(q); angle > m.reach*0.98 {
						continue
					}
					x, y := m.point(q)
					all++
					if drawnInside(drawn, x, y) != holds(rings, q) {
						wrong++
					}
				}
			}
			if float64(wrong) > share*float64(all)+1 {
				t.Errorf("%s around %v, reach %v deg: %d of %d points are on the wrong side", name, middle, reach, wrong, all)
			}
		}
	}
}

func TestGroundInWordsAndNumbers(t *testing.T) {
	p := fixturePass(basicShape())
	p.Ground = groundOf(p)
	text := groundText(p)
	for _, want := range []string{"from 48.0° N, 2.0° W to 68.0° N, 2.0° W", "enters the Earth’s shadow at 10:47:31 UTC", "it is day at the station"} {
		if !strings.Contains(text, want) {
			t.Errorf("the words lack %q: %s", want, text)
		}
	}
	if text := skyText(p); !strings.Contains(text, "The Sun stands at azimuth 170 deg, elevation 31 deg") || !strings.Contains(text, "The Moon stands 14 deg under the horizon") {
		t.Errorf("the sky says %s", text)
	}
	head, _, _ := strings.Cut(string(samplesCSV(p)), "\n")
	if !strings.HasSuffix(head, ",ground_latitude_deg,ground_longitude_deg,height_km,sunlit") {
		t.Errorf("the columns are %s", head)
	}
	js, err := passJSON(p)
	if err != nil {
		t.Fatal(err)
	}
	var got struct {
		Ground struct {
			Circle [][2]float64 `json:"visibility_lat_lon_deg"`
			Night  [][2]float64 `json:"night_edge_lat_lon_deg"`
			Sky    []struct{ Name string }
		}
		Samples struct {
			Latitude []float64 `json:"ground_latitude_deg"`
		}
	}
	if err := json.Unmarshal(js, &got); err != nil {
		t.Fatal(err)
	}
	if len(got.Ground.Circle) != 36 || len(got.Ground.Night) != 60 || len(got.Ground.Sky) != 2 || len(got.Samples.Latitude) != len(p.Profile.Seconds) {
		t.Errorf("the JSON has %+v", got.Ground)
	}
}

// Rings that are left out unseen would have drawn nothing: the map is the same with all of them.
func TestFarRingsDrawNothing(t *testing.T) {
	rings := [][]Place{
		{{-60, -180}, {-60, -90}, {-60, 0}, {-60, 90}, {-60, 180}, {-90, 180}, {-90, -180}},
		{{10, -120}, {60, -140}, {70, -60}, {20, -70}}, {{-10, 150}, {40, 140}, {40, 180}, {-10, 180}}, {{60, 150}, {75, 160}, {70, -170}, {65, -175}},
	}
	for _, r := range coast() {
		rings = append(rings, places(r))
	}
	land := make([]outline, len(rings))
	for i, r := range rings {
		land[i] = outlineOf(r)
	}
	dropped := 0
	for _, middle := range []Place{{58, -6}, {-23, 17}, {45, -105}, {89, 0}, {-89.5, 40}, {0, 179.5}, {-10, 75}, {50, 85}, {-33, 151}} {
		for _, reach := range []float64{3, 15, 40, 80, 180} {
			m := newPlane(middle, reach, 200)
			near := m.near(land)
			dropped += len(land) - len(near)
			if m.area(near, holds(near, middle)) != m.area(rings, holds(rings, middle)) {
				t.Errorf("around %v, reach %g: another map", middle, reach)
			}
		}
	}
	if dropped == 0 {
		t.Error("no ring is ever left out")
	}
}
