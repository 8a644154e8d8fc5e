package mount

import (
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestSampledCourse samples a pass through the zenith, where azimuth leaps, a second
// apart at the rate of the lowest orbits: direction and rate between are the pass's own.
func TestSampledCourse(t *testing.T) {
	c := circle(0.05, 30, 1.2, 60)
	var at []float64
	var dirs []station.Direction
	for s := 0.0; s <= 60; s++ {
		d, _ := c.at(s)
		at, dirs = append(at, s), append(dirs, directionOf(d))
	}
	got, err := SampledCourse(at, dirs)
	if err != nil {
		t.Fatal(err)
	}
	for s := 0.0; s <= 60; s += 0.13 {
		d, v := c.at(s)
		gd, gv := got.at(s)
		near(t, "direction", between(d, gd).Degrees(), 0, 1e-4)
		near(t, "rate", gv.Sub(v).Norm()/degree, 0, 1e-3)
	}
	for _, bad := range [][]float64{{0}, {1, 2}, {0, 1, 1}} {
		if _, err := SampledCourse(bad, make([]station.Direction, len(bad))); err == nil {
			t.Errorf("%v was taken", bad)
		}
	}
	if _, err := SampledCourse([]float64{0, 1}, []station.Direction{{Elevation: unit.Degree}}); err == nil {
		t.Error("two instants and one direction were taken")
	}
}
