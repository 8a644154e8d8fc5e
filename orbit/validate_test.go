package orbit

import (
	"errors"
	"math"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

func TestValidate(t *testing.T) {
	for _, c := range []struct {
		field  string
		change func(*Elements)
	}{
		{"catalogue number", func(e *Elements) { e.CatalogNumber = 1e9 }},
		{"catalogue number", func(e *Elements) { e.CatalogNumber = -1 }},
		{"epoch", func(e *Elements) { e.Epoch = time.Date(1956, 12, 31, 23, 59, 59, 0, time.UTC) }},
		{"epoch", func(e *Elements) { e.Epoch = time.Date(2057, 1, 1, 0, 0, 0, 0, time.UTC) }},
		{"epoch", func(e *Elements) { e.Epoch = time.Time{} }},
		{"mean motion", func(e *Elements) { e.MeanMotion = 0 }},
		{"mean motion", func(e *Elements) { e.MeanMotion = math.NaN() }},
		{"mean motion", func(e *Elements) { e.MeanMotion = 20.1 }},
		{"eccentricity", func(e *Elements) { e.Eccentricity = 1 }},
		{"eccentricity", func(e *Elements) { e.Eccentricity = math.NaN() }},
		{"inclination", func(e *Elements) { e.Inclination = 180.001 * unit.Degree }},
		{"right ascension of the ascending node", func(e *Elements) { e.RAAN = -0.001 * unit.Degree }},
		{"argument of perigee", func(e *Elements) { e.ArgPerigee = 360.001 * unit.Degree }},
		{"mean anomaly", func(e *Elements) { e.MeanAnomaly = unit.Angle(math.Inf(1)) }},
		{"drag term B*", func(e *Elements) { e.BStar = 11 }},
		{"first derivative of the mean motion", func(e *Elements) { e.MeanMotionDot = math.NaN() }},
		{"second derivative of the mean motion", func(e *Elements) { e.MeanMotionDDot = math.Inf(-1) }},
	} {
		el := orbitKinds[0].elements()
		if err := el.Validate(); err != nil {
			t.Fatal(err)
		}
		c.change(&el)
		var ee *ElementError
		if err := el.Validate(); !errors.As(err, &ee) || ee.Field != c.field {
			t.Errorf("%s: got %v", c.field, err)
		}
		if _, err := NewEphemeris(el, testEpoch, testEpoch, EarthOrientation{}); !errors.As(err, &ee) {
			t.Errorf("%s: NewEphemeris gave %v, want the *ElementError", c.field, err)
		}
	}
}

func TestValidateNamesEveryFault(t *testing.T) {
	err := (&Elements{Epoch: testEpoch, MeanMotion: -1, Eccentricity: 2}).Validate()
	want := "mean motion: -1 rev/day is not allowed; it must be 1e-08 to 20 rev/day\n" +
		"eccentricity: 2 is not allowed; it must be 0 to 0.9999999"
	if err == nil || err.Error() != want {
		t.Errorf("got %q, want %q", err, want)
	}
}

func TestValidateTakesTheLimits(t *testing.T) {
	el := orbitKinds[0].elements()
	el.Inclination, el.RAAN, el.ArgPerigee, el.MeanAnomaly = 180*unit.Degree, 360*unit.Degree, 360*unit.Degree, 360*unit.Degree
	el.CatalogNumber, el.Eccentricity = 999999999, 0
	if err := el.Validate(); err != nil {
		t.Error(err)
	}
}
