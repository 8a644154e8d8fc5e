package scenario

import (
	"fmt"
	"math"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var mountKeys = []string{
	"type", "azimuth_range_deg", "elevation_range_deg", "azimuth_rate_deg_s", "elevation_rate_deg_s",
	"azimuth_acceleration_deg_s2", "elevation_acceleration_deg_s2",
	"x_axis_azimuth_deg", "x_range_deg", "y_range_deg", "x_rate_deg_s", "y_rate_deg_s", "x_acceleration_deg_s2", "y_acceleration_deg_s2",
	"tilt_azimuth_deg", "tilt_deg", "stow_deg", "settle_s", "following_error_deg", "rates_by_diameter",
}

// axisKeys are the keys of one axis, with the range that it has where none is given.
type axisKeys struct {
	name        string
	low, high   float64 // deg, common practice
	least, most float64 // deg, that a range may reach
}

var (
	azimuthAxis   = axisKeys{"azimuth", -270, 270, -1800, 1800}
	elevationAxis = axisKeys{"elevation", 0, 90, -90, 180}
	xAxis         = axisKeys{"x", -90, 90, -180, 180}
	yAxis         = axisKeys{"y", -90, 90, -90, 180}
)

// mount reads what turns an antenna, nil where nothing is said.
func (o object) mount(kind station.AntennaKind) *station.Mount {
	if !o.has("mount") {
		return nil
	}
	if kind == station.Fixed {
		o.useless("with kind: fixed, which does not turn", "mount")
		return nil
	}
	c := o.child("mount", mountKeys)
	c.about = o.about + ", mount"
	if c.node == nil {
		return nil
	}
	m := &station.Mount{}
	word, _ := c.word("type", "elevation_over_azimuth", "x_y")
	if !c.has("type") {
		c.missing("type", "elevation_over_azimuth or x_y")
	}
	lower, upper := azimuthAxis, elevationAxis
	if word == "x_y" {
		m.Kind = station.YOverX
		lower, upper = xAxis, yAxis
		c.useless("with type: x_y", azimuthAxis.keys()...)
		c.useless("with type: x_y", elevationAxis.keys()...)
		m.XAxisAzimuth = unit.Angle(c.required("x_axis_azimuth_deg", span{low: -360, high: 360, unit: "deg"}, "the azimuth along which the X axis lies")) * unit.Degree
	} else {
		c.useless("with type: elevation_over_azimuth", xAxis.keys()...)
		c.useless("with type: elevation_over_azimuth", yAxis.keys()...)
		c.useless("with type: elevation_over_azimuth", "x_axis_azimuth_deg")
	}
	m.Lower, m.Upper = c.axis(lower), c.axis(upper)
	c.tilt(m)
	c.stow(m, lower, upper)
	m.Settle = c.numberOr("settle_s", atLeast(0, 3600, "s"), 0)
	m.Tolerance = unit.Angle(c.numberOr("following_error_deg", above(0, 90, "deg"), 0)) * unit.Degree
	if !c.has("following_error_deg") {
		c.assume("following_error_deg left out: a pass counts as followed within a tenth of the half-power beamwidth, 0.12 dB")
	}
	c.ratesByDiameter(m)
	return m
}

func (a axisKeys) keys() []string {
	return []string{a.name + "_range_deg", a.name + "_rate_deg_s", a.name + "_acceleration_deg_s2"}
}

func (o object) axis(k axisKeys) station.Axis {
	keys := k.keys()
	a := station.Axis{Low: unit.Angle(k.low) * unit.Degree, High: unit.Angle(k.high) * unit.Degree, Acceleration: unit.AngularAcceleration(math.Inf(1))}
	if !o.has(keys[0]) {
		o.assume("%s left out: %g to %g deg", keys[0], k.low, k.high)
	} else if r, ok := o.two(keys[0], span{low: k.least, high: k.most, unit: "deg"}); ok {
		if !(r[1] > r[0]) {
			o.fault(o.get(keys[0]), keys[0], "%g to %g deg is not a range", "give the lower end first", r[0], r[1])
		}
		a.Low, a.High = unit.Angle(r[0])*unit.Degree, unit.Angle(r[1])*unit.Degree
	}
	a.Rate = unit.AngularRate(o.required(keys[1], above(0, 1000, "deg/s"), "the greatest rate of the axis") * unit.Degree.Radians())
	if !o.has(keys[2]) {
		o.assume("%s left out: the axis is at its rate at once", keys[2])
	} else if v, ok := o.number(keys[2], above(0, 10_000, "deg/s2")); ok {
		a.Acceleration = unit.AngularAcceleration(v * unit.Degree.Radians())
	}
	return a
}

func (o object) tilt(m *station.Mount) {
	if !o.has("tilt_deg") {
		o.useless("without tilt_deg", "tilt_azimuth_deg")
		o.assume("tilt_deg left out: the mount stands upright")
		return
	}
	m.TiltAngle = unit.Angle(o.numberOr("tilt_deg", atLeast(0, 90, "deg"), 0)) * unit.Degree
	m.TiltAzimuth = unit.Angle(o.required("tilt_azimuth_deg", span{low: -360, high: 360, unit: "deg"}, "the azimuth toward which the mount leans")) * unit.Degree
}

func (o object) stow(m *station.Mount, lower, upper axisKeys) {
	if !o.has("stow_deg") {
		o.assume("stow_deg left out: between passes it looks up, the %s in the middle of its range", lower.name)
		return
	}
	s, ok := o.two("stow_deg", span{low: -1800, high: 1800, unit: "deg"})
	if !ok {
		return
	}
	at := station.AxisAngles{Lower: unit.Angle(s[0]) * unit.Degree, Upper: unit.Angle(s[1]) * unit.Degree}
	if !m.Lower.Holds(at.Lower) || !m.Upper.Holds(at.Upper) {
		o.fault(o.get("stow_deg"), "stow_deg", "%s %g deg, %s %g deg lies outside the ranges of the axes", "give a position that the mount reaches", lower.name, s[0], upper.name, s[1])
		return
	}
	m.Stow = &at
}

// ratesByDiameter reads how fast mounts of other dishes turn: the planner's own numbers.
func (o object) ratesByDiameter(m *station.Mount) {
	keyed := span{low: 0, high: 1000, lowOpen: true}
	for i, n := range o.items("rates_by_diameter", "rows of [diameter in m, rate of the lower axis, rate of the upper axis in deg/s]", maxRows) {
		name := fmt.Sprintf("rates_by_diameter[%d]", i)
		row, ok := o.numbersAt(n, name, 3, keyed, "[diameter in m, rate of the lower axis, rate of the upper axis in deg/s]")
		if !ok {
			return
		}
		r := station.MountRates{Diameter: unit.Length(row[0]), Lower: unit.AngularRate(row[1] * unit.Degree.Radians()), Upper: unit.AngularRate(row[2] * unit.Degree.Radians())}
		if k := len(m.ByDiameter); k > 0 && !(r.Diameter > m.ByDiameter[k-1].Diameter) {
			o.fault(n, name, "diameter %g m does not rise over %g m", "sort the rows by diameter, each once", row[0], m.ByDiameter[k-1].Diameter.Metres())
			return
		}
		m.ByDiameter = append(m.ByDiameter, r)
	}
}

// numbersAt reads a row of numbers that share a range.
func (o object) numbersAt(n *tree.Node, name string, count int, in span, of string) ([]float64, bool) {
	if n.Kind != tree.List || len(n.Items) != count {
		o.fault(n, name, "%s is not allowed; it must be %s", "", showRow(n), of)
		return nil, false
	}
	out, good := make([]float64, count), true
	for i, item := range n.Items {
		v, ok := o.numberAt(item, fmt.Sprintf("%s[%d]", name, i), in)
		out[i], good = v, good && ok
	}
	return out, good
}
