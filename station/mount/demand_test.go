package mount

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// tenSeconds samples a course as a year's passes are.
func tenSeconds(c *Course) (seconds []float64, at []station.Direction) {
	n := max(1, int(math.Ceil(c.length/10)))
	for i := range n + 1 {
		t := c.length * float64(i) / float64(n)
		dir, _ := c.at(t)
		seconds, at = append(seconds, t), append(at, directionOf(dir))
	}
	return seconds, at
}

// drawMount draws a mount of any kind and speed.
func drawMount(t *rapid.T) *Drive {
	rate := func(name string) float64 { return rapid.Float64Range(0.3, 20).Draw(t, name) }
	m := &station.Mount{Lower: axis(-270, 270, rate("lower"), rate("lower acceleration")), Upper: axis(rapid.Float64Range(-5, 20).Draw(t, "upper from"), rapid.Float64Range(60, 180).Draw(t, "upper to"), rate("upper"), rate("upper acceleration"))}
	if rapid.Bool().Draw(t, "narrow") {
		m.Lower.Low, m.Lower.High = -100*unit.Degree, 130*unit.Degree
	}
	if rapid.Bool().Draw(t, "X-Y") {
		m.Kind, m.XAxisAzimuth = station.YOverX, unit.Angle(rapid.Float64Range(0, 180).Draw(t, "x"))*unit.Degree
		m.Upper.Low = -90 * unit.Degree
	}
	if rapid.Bool().Draw(t, "tilted") {
		m.TiltAngle, m.TiltAzimuth = 10*unit.Degree, unit.Angle(rapid.Float64Range(0, 360).Draw(t, "tilt"))*unit.Degree
	}
	d, err := New(m)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// What is certain is followed: the search agrees.
func TestCertainIsFollowed(t *testing.T) {
	certain := 0
	rapid.Check(t, func(t *rapid.T) {
		d, c := drawMount(t), drawPass(t)
		if !d.Certain(d.Demand(tenSeconds(c))) {
			return
		}
		certain++
		if p := d.Plan(c, Options{}); !p.Reached || p.LostSeconds() > 0 {
			t.Fatalf("certain, and %g s of %g are lost", p.LostSeconds(), c.length)
		}
	})
	if certain < 5 {
		t.Errorf("%d courses were certain", certain)
	}
}

// A fast mount with room is certain of a pass that stays clear of the zenith, so that the
// estimate is of use.
func TestCertainOfTheUsual(t *testing.T) {
	d := drive(t, -270, 270, 6)
	for z := 20.0; z < 80; z += 5 {
		if c := circle(z, 40, 0.8, 120); !d.Certain(d.Demand(tenSeconds(c))) {
			t.Errorf("not certain %g deg from the zenith", z)
		}
	}
	if c := circle(2, 40, 0.8, 120); d.Certain(d.Demand(tenSeconds(c))) {
		t.Error("certain in the keyhole")
	}
}

// Rows 4 s apart are within 2e-5 deg of the course.
func TestResampled(t *testing.T) {
	for _, z := range []float64{0.01, 1, 30} {
		c := circle(z, 40, 1.2, 300)
		r := c.Resampled(4)
		for s := 0.0; s <= c.length; s += 0.37 {
			a, _ := c.at(s)
			b, _ := r.at(s)
			near(t, "direction", between(a, b).Degrees(), 0, 2e-5)
		}
	}
}
