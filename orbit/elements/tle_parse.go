package elements

import (
	"fmt"
	"strings"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// parseTLE reads one set; ok is false when anything was at fault.
func parseTLE(name *tleLine, one, two tleLine, rep *report) (orbit.Elements, bool) {
	before := rep.faults.Total
	el := orbit.Elements{Source: orbit.Source{File: rep.file, Line: one.number}}
	if name != nil {
		el.Source.Line = name.number
		el.Name = nameOf(name, rep)
	}
	soundOne, soundTwo := one.sound(rep), two.sound(rep)
	if soundOne {
		parseLineOne(&el, &tleFields{l: one, which: "line 1", rep: rep})
	}
	if soundTwo {
		parseLineTwo(&el, &tleFields{l: two, which: "line 2", rep: rep})
	}
	if soundOne && soundTwo {
		sameNumber(one, two, rep)
	}
	if rep.faults.Total > before {
		return el, false
	}
	return el, rep.valid(&el, one.number)
}

func parseLineOne(el *orbit.Elements, f *tleFields) {
	f.separators(2, 9, 18, 33, 44, 53, 62, 64)
	el.CatalogNumber = f.catalogue()
	el.Classification = f.classification()
	el.InternationalDesignator = f.designator()
	el.Epoch = f.epoch()
	el.MeanMotionDot = f.decimal(34, 43, "first derivative of mean motion", optionalField)
	el.MeanMotionDDot = f.exponential(45, 52, "second derivative of mean motion")
	el.BStar = f.exponential(54, 61, "B*")
	f.ephemerisType()
	el.ElementSetNo = f.integer(65, 68, "element set number")
}

func parseLineTwo(el *orbit.Elements, f *tleFields) {
	f.separators(2, 8, 17, 26, 34, 43, 52)
	el.Inclination = f.angle(9, 16, "inclination", 180)
	el.RAAN = f.angle(18, 25, "right ascension of the node", 360)
	el.Eccentricity = f.eccentricity()
	el.ArgPerigee = f.angle(35, 42, "argument of perigee", 360)
	el.MeanAnomaly = f.angle(44, 51, "mean anomaly", 360)
	el.MeanMotion = f.decimal(53, 63, "mean motion", requiredField)
	if !f.failed && !(el.MeanMotion > 0) {
		f.fault(53, 63, "mean motion", "must be greater than 0 revolutions a day", nextFetch)
	}
	el.RevolutionAtEpoch = f.integer(64, 68, "revolution number")
}

func sameNumber(one, two tleLine, rep *report) {
	a, errA := parseAlpha5(strings.TrimLeft(one.cols(3, 7), " "))
	b, errB := parseAlpha5(strings.TrimLeft(two.cols(3, 7), " "))
	if errB != nil {
		rep.fault(Fault{Line: two.number, Column: two.indent + 3, Field: "line 2, catalogue number",
			Text: two.cols(3, 7), Problem: errB.Error(), Next: nextFetch})
	}
	if errA == nil && errB == nil && a != b {
		rep.fault(Fault{Line: two.number, Column: two.indent + 3, Field: "line 2, catalogue number", Text: two.cols(3, 7),
			Problem: fmt.Sprintf("line 1 above is of object %s; both lines must be of one object", strings.TrimLeft(one.cols(3, 7), " ")),
			Next:    "put the lines of one set together"})
	}
}

// catalogue reads columns 3 to 7 of line 1; line 2 is compared in sameNumber.
func (f *tleFields) catalogue() int {
	n, err := parseAlpha5(strings.TrimLeft(f.l.cols(3, 7), " "))
	if err != nil {
		f.fault(3, 7, "catalogue number", err.Error(), nextFetch)
	}
	return n
}

func (f *tleFields) classification() string {
	switch c := f.l.cols(8, 8); c {
	case "U", "C", "S":
		return c
	case " ":
		return ""
	default:
		f.fault(8, 8, "classification", "must be U, C, S or blank", nextFetch)
		return ""
	}
}

func (f *tleFields) designator() string {
	s := strings.Trim(f.l.cols(10, 17), " ")
	long, ok := longForm(s)
	if !ok {
		f.rep.warn(f.l.number, fmt.Sprintf("international designator %q is not two digits of the year, three of the launch and a piece (26001A); kept as it is", s))
	}
	return long
}

func (f *tleFields) ephemerisType() {
	switch c := f.l.cols(63, 63); c {
	case "0", " ":
	case "2":
		f.rep.warn(f.l.number, "ephemeris type 2 says SGP4 outright; it is read as type 0, the published kind")
	case "4":
		f.unsupported(63, 63, "ephemeris type", "type 4 marks SGP4-XP elements, which plain SGP4 would place wrong by kilometres",
			"fetch SGP4 elements (type 0) of the object")
	default:
		f.unsupported(63, 63, "ephemeris type", "only type 0 (SGP4) is read", "fetch SGP4 elements (type 0) of the object")
	}
}

func (f *tleFields) angle(a, b int, field string, most float64) unit.Angle {
	v := f.decimal(a, b, field, requiredField)
	if !(v >= 0 && v <= most) {
		f.fault(a, b, field, fmt.Sprintf("must be 0 to %g deg", most), nextFetch)
	}
	return unit.Angle(v) * unit.Degree
}

// epoch reads year and day; a hundred-millionth of a day, the last printed digit,
// is 864 µs exactly, so that nothing is lost in a time.Time.
func (f *tleFields) epoch() time.Time {
	year := f.integer(19, 20, "epoch year")
	if strings.Trim(f.l.cols(19, 20), " ") == "" {
		f.fault(19, 20, "epoch year", "is blank; it must be two digits", nextFetch)
	}
	year = fullYear(year)
	whole, fraction, ok := f.dayOfYear()
	if !ok {
		return time.Time{}
	}
	if days := daysIn(year); whole < 1 || whole > days {
		f.fault(21, 32, "epoch day", fmt.Sprintf("must be 1 to less than %d in %d, which has %d days", days+1, year, days), nextFetch)
		return time.Time{}
	}
	return time.Date(year, 1, whole, 0, 0, 0, 0, time.UTC).Add(fraction)
}

func daysIn(year int) int {
	return time.Date(year, 12, 31, 0, 0, 0, 0, time.UTC).YearDay()
}
