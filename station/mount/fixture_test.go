package mount

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

const degree = math.Pi / 180

// circle is a pass along a great circle at a constant rate: it culminates half way, at
// an azimuth, so far from the zenith, and goes clockwise as seen from above.
func circle(fromZenithDeg, azimuthDeg, rateDegS, length float64) *Course {
	z, a, w := fromZenithDeg*degree, azimuthDeg*degree, rateDegS*degree
	top := orbit.Vec3{X: math.Sin(z) * math.Sin(a), Y: math.Sin(z) * math.Cos(a), Z: math.Cos(z)}
	along := orbit.Vec3{X: math.Cos(a), Y: -math.Sin(a)}
	return &Course{length: length, at: func(t float64) (orbit.Vec3, orbit.Vec3) {
		sin, cos := math.Sincos(w * (t - length/2))
		return top.Scale(cos).Add(along.Scale(sin)), top.Scale(-w * sin).Add(along.Scale(w * cos))
	}}
}

// level is a target that goes round the horizon at an elevation.
func level(elDeg, fromDeg, rateDegS, length float64) *Course {
	el, w := elDeg*degree, rateDegS*degree
	return &Course{length: length, at: func(t float64) (orbit.Vec3, orbit.Vec3) {
		sin, cos := math.Sincos(fromDeg*degree + w*t)
		return orbit.Vec3{X: math.Cos(el) * sin, Y: math.Cos(el) * cos, Z: math.Sin(el)},
			orbit.Vec3{X: w * math.Cos(el) * cos, Y: -w * math.Cos(el) * sin}
	}}
}

func axis(low, high, rate, acceleration float64) station.Axis {
	return station.Axis{Low: unit.Angle(low) * unit.Degree, High: unit.Angle(high) * unit.Degree,
		Rate: unit.AngularRate(rate * degree), Acceleration: unit.AngularAcceleration(acceleration * degree)}
}

// drive is an elevation-over-azimuth mount: azimuth range and rate, the elevation to
// 90°, accelerations of 5 and 3 deg/s².
func drive(t interface{ Fatal(...any) }, low, high, rate float64, change ...func(*station.Mount)) *Drive {
	m := &station.Mount{Lower: axis(low, high, rate, 5), Upper: axis(0, 90, 5, 3)}
	for _, c := range change {
		c(m)
	}
	d, err := New(m)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func atOnce(m *station.Mount) {
	m.Lower.Acceleration, m.Upper.Acceleration = unit.AngularAcceleration(math.Inf(1)), unit.AngularAcceleration(math.Inf(1))
}

func overTop(m *station.Mount) { m.Upper.High = 180 * unit.Degree }

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.9g, want %.9g, off by %.3g, more than %g", what, got, want, got-want, tolerance)
	}
}

// drawPass draws a pass along a great circle at the rates of low orbits.
func drawPass(t *rapid.T) *Course {
	return circle(rapid.Float64Range(0.01, 70).Draw(t, "from zenith deg"), rapid.Float64Range(0, 360).Draw(t, "azimuth deg"),
		rapid.Float64Range(0.1, 1.2).Draw(t, "rate deg/s"), rapid.Float64Range(40, 300).Draw(t, "length s"))
}
