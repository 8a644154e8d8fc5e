package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func goodMount() Mount {
	a := Axis{Low: -270 * unit.Degree, High: 270 * unit.Degree, Rate: 0.1, Acceleration: unit.AngularAcceleration(math.Inf(1))}
	return Mount{Lower: a, Upper: Axis{High: 90 * unit.Degree, Rate: 0.1, Acceleration: 0.05}}
}

// TestMountValidate finds every fault at once.
func TestMountValidate(t *testing.T) {
	m := goodMount()
	if err := m.Validate(); err != nil {
		t.Fatal(err)
	}
	m.Lower.Rate, m.Upper.Acceleration, m.Upper.High, m.TiltAngle = 0, unit.AngularAcceleration(math.NaN()), -1, 2
	m.Stow, m.Tolerance = &AxisAngles{Lower: 5}, -1
	err := m.Validate()
	for _, want := range []string{"azimuth rate", "elevation acceleration", "elevation: 0 to", "tilt", "stow position", "following error"} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is missing in: %v", want, err)
		}
	}
	m = goodMount()
	m.Kind, m.Lower.High = YOverX, m.Lower.Low+4000*unit.Degree
	if err := m.Validate(); err == nil || !strings.Contains(err.Error(), "X: -270 to 3730 deg is wider than 3600 deg") {
		t.Errorf("too wide: %v", err)
	}
}

// TestMountForDiameter goes straight between the planner's rows and holds their ends.
func TestMountForDiameter(t *testing.T) {
	m := goodMount()
	if of, beyond := m.ForDiameter(9); beyond || of.Lower.Rate != 0.1 {
		t.Errorf("without rows: %v %v", of.Lower.Rate, beyond)
	}
	m.ByDiameter = []MountRates{{2, 0.2, 0.1}, {6, 0.1, 0.06}, {10, 0.04, 0.03}}
	for _, c := range []struct {
		d, lower, upper float64
		beyond          bool
	}{{1, 0.2, 0.1, true}, {2, 0.2, 0.1, false}, {4, 0.15, 0.08, false}, {6, 0.1, 0.06, false}, {9, 0.055, 0.0375, false}, {10, 0.04, 0.03, false}, {12, 0.04, 0.03, true}} {
		of, beyond := m.ForDiameter(unit.Length(c.d))
		if math.Abs(float64(of.Lower.Rate)-c.lower) > 1e-12 || math.Abs(float64(of.Upper.Rate)-c.upper) > 1e-12 || beyond != c.beyond {
			t.Errorf("%g m: %v %v %v, want %+v", c.d, of.Lower.Rate, of.Upper.Rate, beyond, c)
		}
	}
}
