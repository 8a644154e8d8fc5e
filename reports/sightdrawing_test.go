package reports

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

func sightAt(offDeg, boresightDeg float64) Sight {
	sin, cos := math.Sincos(boresightDeg * math.Pi / 180)
	x, y := math.Sincos((boresightDeg + offDeg) * math.Pi / 180)
	return Sight{"culmination", downlink.Sightline{Off: unit.Angle(offDeg) * unit.Degree, StationX: unit.Length(800e3 * x), StationY: unit.Length(800e3 * y),
		EarthY: 6900e3, EarthRadius: 6400e3, BoresightX: sin, BoresightY: cos}}
}

// The lines of a drawing enclose the angle that stands beside them, and everything but the
// Earth lies within it.
func TestSightDrawingIsTrue(t *testing.T) {
	line := regexp.MustCompile(`<line class="(\w+)" x1="([-0-9.]+)" y1="([-0-9.]+)" x2="([-0-9.]+)" y2="([-0-9.]+)"/>`)
	for _, c := range [][2]float64{{60, 0}, {30, 20}, {1, 40}, {70, -45}, {143, -76}, {120, -110}} {
		s := sightAt(c[0], c[1])
		out := string(sightDrawing(&s))
		way := map[string]float64{}
		for _, m := range line.FindAllStringSubmatch(out, -1) {
			var v [4]float64
			for i := range v {
				v[i], _ = strconv.ParseFloat(m[i+2], 64)
				if low, high := 0.0, []float64{sightWidth, sightHeight}[i%2]; v[i] < low || v[i] > high {
					t.Errorf("%v: %s reaches %g, beyond 0 to %g", c, m[1], v[i], high)
				}
			}
			way[m[1]] = math.Atan2(v[3]-v[1], v[2]-v[0])
		}
		// Ends are written to a tenth over 74 units of the arrow at least half that of the other.
		if got := math.Abs(math.Remainder(way["axis"]-way["tosite"], 2*math.Pi)) * 180 / math.Pi; len(way) != 2 || math.Abs(got-c[0]) > 0.3 {
			t.Errorf("%v: the lines enclose %.2f deg", c, got)
		}
		if !strings.Contains(out, fixed(c[0], 1)+"°</text>") {
			t.Errorf("%v: the angle is not beside its arc: %s", c, out)
		}
	}
}

func TestSightWords(t *testing.T) {
	s := sightAt(40, 10)
	s.OffNadir, s.Boresight, s.OnAxis = 50*unit.Degree, 10*unit.Degree, true
	if got, want := sightText(&s), "The station stands 40.0° off the spin axis and 50.0° off the line to the Earth’s centre; the spin axis 10.0° off that line."; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
