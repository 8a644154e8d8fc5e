package station

import (
	"math"
	"testing"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// A site's position goes the other way, so a place must come back from it.
func TestPlaceBelow(t *testing.T) {
	for _, lat := range []float64{-90, -89.9, -45, -1e-3, 0, 30, 58.4, 89.999, 90} {
		for _, height := range []float64{-100e3, -400, 0, 550e3, 35786e3, 4e8} {
			for _, lon := range []float64{-179.9, -6, 0, 90, 180} {
				site := Site{Latitude: unit.Angle(lat) * unit.Degree, Longitude: unit.Angle(lon) * unit.Degree, Altitude: unit.Length(height)}
				frame := site.Frame()
				got := PlaceBelow(frame.Origin)
				if d := math.Abs(float64(got.Latitude-site.Latitude)) * EquatorialRadius; d > 1e-6 {
					t.Errorf("%v, %v, %v m: the latitude is off by %g m", lat, lon, height, d)
				}
				if d := math.Abs(float64(got.Height) - height); d > 1e-6 {
					t.Errorf("%v, %v, %v m: the height is off by %g m", lat, lon, height, d)
				}
				if d := math.Abs(math.Remainder(float64(got.Longitude-site.Longitude), 2*math.Pi)) * math.Cos(float64(site.Latitude)); d > 1e-12 {
					t.Errorf("%v, %v, %v m: the longitude is off by %g rad", lat, lon, height, d)
				}
			}
		}
	}
}

// What stands over the place, at that height, is seen in the direction asked for; and
// from a site at the pole the circle agrees with the closed form of the sphere.
func TestAbove(t *testing.T) {
	site := Site{Latitude: 58.4 * unit.Degree, Longitude: -6.1 * unit.Degree, Altitude: 42}
	frame := site.Frame()
	for _, height := range []unit.Length{200e3, 550e3, 35786e3} {
		for az := 0.0; az < 360; az += 45 {
			for _, el := range []float64{0, 5, 40, 90} {
				want := Direction{unit.Angle(az) * unit.Degree, unit.Angle(el) * unit.Degree}
				p := frame.Above(want, height)
				there := Site{Latitude: p.Latitude, Longitude: p.Longitude, Altitude: height}
				origin := there.Frame().Origin
				gotAz, gotEl, _ := frame.Direction(origin)
				off := AngleBetween(want, Direction{gotAz, gotEl}).Degrees()
				if off > 1e-6 {
					t.Errorf("%v km, azimuth %v, elevation %v: seen %g deg off", height.Kilometres(), az, el, off)
				}
			}
		}
	}
	// Earth's central angle of a spacecraft at elevation e over a sphere: acos(R cos e / (R + h)) - e,
	// plane trigonometry. Over the ellipsoid it differs by about the flattening.
	p := frame.Above(Direction{90 * unit.Degree, 5 * unit.Degree}, 550e3)
	there := Site{Latitude: p.Latitude, Longitude: p.Longitude}
	a, b := frame.Up, there.Frame().Up
	want := math.Acos(6371e3*math.Cos(5*math.Pi/180)/(6371e3+550e3)) - 5*math.Pi/180
	if got := math.Acos(a.Dot(b)); math.Abs(got-want) > want/150 {
		t.Errorf("the circle reaches %g rad, on the sphere %g", got, want)
	}
}

var placeSink Place

func BenchmarkPlaceBelow(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		placeSink = PlaceBelow(orbit.Vec3{X: 3e6, Y: -4e6, Z: 5e6})
	}
}
