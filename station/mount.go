package station

import (
	"math"
	"sort"

	"slantwise/orbit/unit"
)

// MountKind tells how the two axes that turn an antenna stand on one another.
type MountKind int

// Kinds of mount.
const (
	// ElevationOverAzimuth carries a horizontal axis on a vertical one. What it
	// cannot follow lies around the zenith.
	ElevationOverAzimuth MountKind = iota
	// YOverX carries its second axis on a horizontal one. What it cannot follow lies
	// around the two ends of that axis, on the horizon.
	YOverX
)

// String returns the kind as the scenario writes it.
func (k MountKind) String() string {
	if k == YOverX {
		return "x_y"
	}
	return "elevation_over_azimuth"
}

// Axis is one axis of a mount.
type Axis struct {
	Low, High    unit.Angle               // where it stops; High - Low up to ten turns
	Rate         unit.AngularRate         // the fastest it turns, greater than 0
	Acceleration unit.AngularAcceleration // the hardest it is driven; +Inf: the rate is reached at once
}

// Holds tells whether the axis can stand at an angle.
func (a Axis) Holds(at unit.Angle) bool { return at >= a.Low-holdSlack && at <= a.High+holdSlack }

// holdSlack is what rounding may take a limit too far: a millionth of a degree.
const holdSlack = 1e-6 * unit.Degree

// AxisAngles is where the axes of a mount stand. The lower axis stands on the ground:
// azimuth, or X; the upper one is carried by it: elevation, or Y.
type AxisAngles struct{ Lower, Upper unit.Angle }

// Mount is what turns an antenna.
//
// Elevation over azimuth: Lower is the azimuth, clockwise from north seen from above, as
// the cable counts it: outside [0°, 360°) too, where the range goes there. Upper is the
// elevation, beyond 90° over the top.
//
// Y over X: the X axis lies level along XAxisAzimuth. At X = Y = 0 the antenna looks up.
// X turns toward XAxisAzimuth + 90°, Y toward XAxisAzimuth.
//
// TiltAngle leans the whole mount toward TiltAzimuth about a level axis across it,
// without turning it about its own.
type Mount struct {
	Kind         MountKind
	Lower, Upper Axis
	XAxisAzimuth unit.Angle  // YOverX: [-360°, 360°]
	TiltAzimuth  unit.Angle  // [-360°, 360°]
	TiltAngle    unit.Angle  // [0°, 90°]
	Stow         *AxisAngles // where it stands when it is not used; nil: not said
	Settle       float64     // s that it takes to come to rest after a slew
	Tolerance    unit.Angle  // the greatest error on the sky that counts as followed; 0: by the beam
	// ByDiameter says how fast the mounts of other dishes turn, by rising diameter; empty:
	// as this one.
	ByDiameter []MountRates
}

// MountRates are the greatest rates of the axes of a mount for a dish.
type MountRates struct {
	Diameter     unit.Length
	Lower, Upper unit.AngularRate
}

// ForDiameter returns the mount of a dish of another diameter: with the rates of
// ByDiameter, straight between two rows, those of the first and the last row beyond them.
// beyond tells that the diameter lies outside the rows.
func (m *Mount) ForDiameter(d unit.Length) (of Mount, beyond bool) {
	of = *m
	rows := m.ByDiameter
	if len(rows) == 0 {
		return of, false
	}
	i := sort.Search(len(rows), func(i int) bool { return rows[i].Diameter >= d })
	switch {
	case i == len(rows):
		of.Lower.Rate, of.Upper.Rate = rows[i-1].Lower, rows[i-1].Upper
		return of, true
	case i == 0 || rows[i].Diameter == d:
		of.Lower.Rate, of.Upper.Rate = rows[i].Lower, rows[i].Upper
		return of, rows[i].Diameter != d
	}
	a, b := rows[i-1], rows[i]
	share := unit.AngularRate((d - a.Diameter) / (b.Diameter - a.Diameter))
	of.Lower.Rate, of.Upper.Rate = a.Lower+share*(b.Lower-a.Lower), a.Upper+share*(b.Upper-a.Upper)
	return of, false
}

// Validate returns every fault of the mount at once, nil when it can be used.
func (m *Mount) Validate() error {
	var c checker
	lower, upper := m.AxisNames()
	m.Lower.check(&c, lower, 3600)
	m.Upper.check(&c, upper, 360)
	c.within("azimuth of the X axis", asGiven(m.XAxisAzimuth), -360, 360, "deg")
	c.within("azimuth of the tilt", asGiven(m.TiltAzimuth), -360, 360, "deg")
	c.within("tilt", asGiven(m.TiltAngle), 0, 90, "deg")
	c.within("settling time", m.Settle, 0, 3600, "s")
	c.within("following error", asGiven(m.Tolerance), 0, 90, "deg")
	if s := m.Stow; s != nil && !(m.Lower.Holds(s.Lower) && m.Upper.Holds(s.Upper)) {
		c.say("the stow position, %s %g deg and %s %g deg, lies outside the ranges of the axes; give one that the mount reaches", lower, asGiven(s.Lower), upper, asGiven(s.Upper))
	}
	return c.joined()
}

// AxisNames returns what the axes are called.
func (m *Mount) AxisNames() (lower, upper string) {
	if m.Kind == YOverX {
		return "X", "Y"
	}
	return "azimuth", "elevation"
}

func (a Axis) check(c *checker, name string, widest float64) {
	switch {
	case !(a.High > a.Low) || math.IsInf(float64(a.High-a.Low), 1):
		c.say("%s: %g to %g deg is not a range; give its lower end first", name, asGiven(a.Low), asGiven(a.High))
	case asGiven(a.High-a.Low) > widest:
		c.say("%s: %g to %g deg is wider than %g deg", name, asGiven(a.Low), asGiven(a.High), widest)
	}
	c.above(name+" rate", a.Rate.DegreesPerSecond(), 0, 1000, "deg/s")
	if !(a.Acceleration > 0) {
		c.above(name+" acceleration", a.Acceleration.DegreesPerSecond2(), 0, 10_000, "deg/s2")
	}
}

// asGiven returns the degrees of an angle as someone may have written them: the way to
// radians and back leaves digits behind.
func asGiven(a unit.Angle) float64 { return math.Round(a.Degrees()*1e9) / 1e9 }
