package orbit

import (
	"bufio"
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// referenceSets reads the element sets that the astronomy libraries were given.
func referenceSets(t testing.TB) map[string]Elements {
	t.Helper()
	f, err := os.Open("../testdata/astronomy/elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var lines []string
	for s := bufio.NewScanner(f); s.Scan(); {
		lines = append(lines, s.Text())
	}
	sets := map[string]Elements{}
	for i := 0; i+2 < len(lines); i += 3 {
		sets[strings.TrimSpace(lines[i])] = twoLines(t, lines[i+1], lines[i+2])
	}
	return sets
}

// referenceRows reads a CSV file and returns its rows without the header.
func referenceRows(t testing.TB, file string) [][]string {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) < 2 {
		t.Fatalf("%s holds no rows", file)
	}
	return rows[1:]
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func instant(t testing.TB, s string) time.Time {
	t.Helper()
	v, err := time.Parse("2006-01-02T15:04:05.999999999Z", s)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func orientation(t testing.TB, ut1, poleX, poleY string) EarthOrientation {
	t.Helper()
	return EarthOrientation{
		UT1MinusUTC:  time.Duration(math.Round(number(t, ut1) * 1e9)),
		PolarMotionX: unit.Angle(number(t, poleX)) * unit.Arcsecond,
		PolarMotionY: unit.Angle(number(t, poleY)) * unit.Arcsecond,
	}
}

// Instants by astropy 5.2.1 with rays to 720 points of the Sun's rim
// (testdata/astronomy/sunlight.py). Tolerance: 0.002 degrees of the Sun's direction at
// the orbit's angular speed, 0.03 s on low orbits and 0.5 s on the stationary one.
func TestLight(t *testing.T) {
	sets := referenceSets(t)
	ephemerides := map[string]*Ephemeris{}
	worst := map[string]float64{}
	for _, row := range referenceRows(t, "../testdata/astronomy/sunlight.csv") {
		name, at := row[0], instant(t, row[1])
		e := ephemerides[name]
		if e == nil {
			var err error
			start := at.Add(-2 * time.Hour)
			if e, err = NewEphemeris(sets[name], start, start.Add(30*time.Hour), orientation(t, row[2], row[3], row[4])); err != nil {
				t.Fatal(err)
			}
			ephemerides[name] = e
		}
		s := e.Seconds(at)
		low, high := s-5, s+5
		if e.LightAt(low).String() != row[5] || e.LightAt(high).String() != row[6] {
			t.Errorf("%s at %s: from %s to %s, want %s to %s", name, row[1], e.LightAt(low), e.LightAt(high), row[5], row[6])
			continue
		}
		for high-low > 1e-6 {
			if mid := (low + high) / 2; e.LightAt(mid).String() == row[5] {
				low = mid
			} else {
				high = mid
			}
		}
		worst[name] = math.Max(worst[name], math.Abs(low-s))
	}
	for name, w := range worst {
		tolerance := 0.05
		if sets[name].MeanMotion < 3 {
			tolerance = 0.5
		}
		t.Logf("%s: worst %.4f s", name, w)
		if w > tolerance {
			t.Errorf("%s: light changes %.4f s from the reference, over %g s", name, w, tolerance)
		}
	}
}

func TestLightByName(t *testing.T) {
	sun := Vec3{X: astronomicalUnit}
	for _, c := range []struct {
		name string
		at   Vec3
		want Light
	}{ // geometry by hand: the shadow is 6378 km wide and its cone 1.38 million km long
		{"before the Earth", Vec3{X: 7e6}, Sunlit},
		{"beside it", Vec3{Y: 7e6}, Sunlit},
		{"behind it", Vec3{X: -7e6}, Umbra},
		{"behind it, on the rim's cylinder", Vec3{X: -7e6, Y: 6378137}, Penumbra},
		{"behind the tip of the cone", Vec3{X: -1.5e9}, Penumbra},
		{"over the pole, below the equator's radius", Vec3{X: -1e6, Z: 6366e3}, Sunlit},
		{"inside", Vec3{X: 6e6}, Umbra},
	} {
		if got := LightAt(c.at, sun); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}

func TestSunTrack(t *testing.T) {
	from := time.Date(2026, 3, 10, 7, 0, 0, 0, time.UTC)
	earth := EarthOrientation{UT1MinusUTC: 300 * time.Millisecond, PolarMotionX: 0.1 * unit.Arcsecond}
	track := NewSunTrack(from, from.Add(7*24*time.Hour), earth)
	for s := 0.0; s <= 7*86400; s += 3571 {
		want := SunPosition(from.Add(time.Duration(s*1e9)), earth)
		// Tolerance: what the comment of SunTrack promises, on 1.5e11 m.
		if d := track.PositionAt(s).Sub(want).Norm() / want.Norm(); d > 1e-8 {
			t.Errorf("after %g s the track is %.2g of the distance from the Sun, over 1e-8", s, d)
		}
	}
}

func TestMoonTrack(t *testing.T) {
	from := time.Date(2026, 3, 10, 7, 0, 0, 0, time.UTC)
	earth := EarthOrientation{UT1MinusUTC: 300 * time.Millisecond}
	track := NewMoonTrack(from, from.Add(30*24*time.Hour), earth)
	for s := 0.0; s <= 30*86400; s += 4571 {
		want := MoonPosition(from.Add(time.Duration(s*1e9)), earth)
		// Tolerance: what the comment of MoonTrack promises.
		if d := track.PositionAt(s).Sub(want).Norm() / want.Norm(); d > 1e-7 {
			t.Errorf("after %g s the track is %.2g of the distance from the Moon, over 1e-7", s, d)
		}
	}
}
