package elements

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// gmWGS72 is the Earth's gravitational parameter of WGS-72 in km³/s², the one that
// SGP4 elements are made with (AIAA 2006-6753).
const gmWGS72 = 398600.8

func (d *draft) readTexts() {
	if e, ok := d.given["OBJECT_NAME"]; ok && e.value != unknownText {
		checkName(e.value, e.line, e.column, d.rep)
		d.el.Name = e.value
	}
	if e, ok := d.given["OBJECT_ID"]; ok && e.value != unknownText {
		checkName(e.value, e.line, e.column, d.rep)
		if !longDesignator.MatchString(e.value) {
			d.rep.warn(e.line, fmt.Sprintf("OBJECT_ID %q is not year, launch and piece (2026-001A); kept as it is", e.value))
		}
		d.el.InternationalDesignator = e.value
	}
	if e, ok := d.given["CLASSIFICATION_TYPE"]; ok {
		if !oneOf(e.value, []string{"U", "C", "S"}) {
			d.fault(e, "must be U, C or S", "correct it or leave it out")
		}
		d.el.Classification = e.value
	}
}

func (d *draft) readEpoch() {
	e, ok := d.given["EPOCH"]
	if !ok {
		return
	}
	t, exact, problem, next := parseEpoch(e.value)
	if problem != "" {
		d.fault(e, problem, next)
		return
	}
	if !exact {
		d.rep.warn(e.line, fmt.Sprintf("EPOCH %q: rounded to the nanosecond", e.value))
	}
	d.el.Epoch = t
}

func (d *draft) readCounts() {
	for _, c := range []struct {
		key  string
		most int
		to   *int
	}{
		{"NORAD_CAT_ID", 999_999_999, &d.el.CatalogNumber},
		{"ELEMENT_SET_NO", 999_999_999, &d.el.ElementSetNo},
		{"REV_AT_EPOCH", 999_999_999, &d.el.RevolutionAtEpoch},
	} {
		e, ok := d.given[c.key]
		if !ok {
			continue
		}
		n, problem, next := parseCount(e.value, c.most)
		if problem != "" {
			d.fault(e, problem, next)
		}
		*c.to = n
	}
}

// value reads the number of a keyword in [least, most]; NaN when it is missing or
// at fault.
func (d *draft) value(key string, least, most float64, allowed string) float64 {
	e, ok := d.given[key]
	if !ok {
		return math.NaN()
	}
	v, problem, next := parseNumber(e.value)
	if problem == "" && !(v >= least && v <= most) {
		problem, next = "must be "+allowed, "fetch the message again"
	}
	if problem != "" {
		d.fault(e, problem, next)
		return math.NaN()
	}
	return v
}

func (d *draft) angle(key string, most float64) unit.Angle {
	return unit.Angle(d.value(key, 0, most, fmt.Sprintf("0 to %g deg", most))) * unit.Degree
}

func (d *draft) readNumbers() {
	const any = math.MaxFloat64
	belowOne := math.Nextafter(1, 0)
	d.el.Inclination = d.angle("INCLINATION", 180)
	d.el.RAAN = d.angle("RA_OF_ASC_NODE", 360)
	d.el.ArgPerigee = d.angle("ARG_OF_PERICENTER", 360)
	d.el.MeanAnomaly = d.angle("MEAN_ANOMALY", 360)
	d.el.Eccentricity = d.value("ECCENTRICITY", 0, belowOne, "0 to below 1")
	d.el.BStar = d.value("BSTAR", -any, any, "finite")
	d.el.MeanMotionDot = d.value("MEAN_MOTION_DOT", -any, any, "finite")
	d.el.MeanMotionDDot = d.value("MEAN_MOTION_DDOT", -any, any, "finite")
	d.el.MeanMotion = d.value("MEAN_MOTION", math.SmallestNonzeroFloat64, any, "greater than 0 rev/day")
	d.readSemiMajorAxis()
}

// readSemiMajorAxis takes the mean motion from the semi-major axis by Kepler's third
// law, n = sqrt(GM/a³), when the message gives that.
func (d *draft) readSemiMajorAxis() {
	gm := gmWGS72
	if _, ok := d.given["GM"]; ok {
		gm = d.value("GM", math.SmallestNonzeroFloat64, math.MaxFloat64, "greater than 0 km**3/s**2")
	}
	e, ok := d.given["SEMI_MAJOR_AXIS"]
	if _, both := d.given["MEAN_MOTION"]; both || !ok {
		return
	}
	a := d.value("SEMI_MAJOR_AXIS", math.SmallestNonzeroFloat64, math.MaxFloat64, "greater than 0 km")
	n := math.Sqrt(gm/a/a/a) * 86400 / (2 * math.Pi)
	if math.IsNaN(a) || math.IsNaN(gm) {
		return
	}
	if !(n > 0) || math.IsInf(n, 0) {
		d.fault(e, "gives no mean motion that can be held", "check the unit: it must be km")
		return
	}
	d.el.MeanMotion = n
	d.rep.warn(e.line, fmt.Sprintf("SEMI_MAJOR_AXIS %s km taken as a mean motion of %.8f rev/day with GM = %s km³/s²", e.value, n, shortest(gm)))
}
