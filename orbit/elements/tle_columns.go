package elements

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit/unit"
)

func (t *tleText) catalogue() string {
	s, ok := formatAlpha5(t.el.CatalogNumber)
	if !ok && len(t.errs) == 0 {
		t.fail(fmt.Sprintf("the catalogue number %d is above %d, the last that its five columns hold", t.el.CatalogNumber, maxAlpha5),
			"write an OMM")
	}
	return s
}

func (t *tleText) classification() string {
	if t.el.Classification == "" {
		return " "
	}
	return t.el.Classification
}

func (t *tleText) designator() string {
	s, ok := shortForm(t.el.InternationalDesignator)
	if !ok {
		t.round("OBJECT_ID %q left blank", t.el.InternationalDesignator)
	}
	return fmt.Sprintf("%-8s", s)
}

// tleTick is the last printed digit of an epoch, 1e-8 day.
const tleTick = 864 * time.Microsecond

func (t *tleText) epoch() string {
	epoch := t.el.Epoch.UTC()
	if y := epoch.Year(); y < firstYear || y > lastYear {
		t.fail(fmt.Sprintf("the epoch year %d is outside %d to %d, which two digits can say", y, firstYear, lastYear), "write an OMM")
		return ""
	}
	midnight := time.Date(epoch.Year(), epoch.Month(), epoch.Day(), 0, 0, 0, 0, time.UTC)
	part := epoch.Sub(midnight)
	ticks := part / tleTick
	if rest := part % tleTick; rest != 0 {
		if 2*rest >= tleTick {
			ticks++
		}
		rounded := midnight.Add(ticks * tleTick)
		t.round("EPOCH %s written as %s", formatEpoch(epoch), formatEpoch(rounded))
		if rounded.Year() > lastYear {
			t.fail("the epoch rounds up into a year that two digits cannot say", "write an OMM")
		}
		midnight = rounded.Truncate(24 * time.Hour)
		ticks = rounded.Sub(midnight) / tleTick
	}
	return fmt.Sprintf("%02d%03d.%08d", midnight.Year()%100, midnight.YearDay(), int64(ticks))
}

func (t *tleText) firstDerivative() string {
	v := t.el.MeanMotionDot
	s := strconv.FormatFloat(math.Abs(v), 'f', 8, 64)
	if s[0] != '0' {
		t.fail(fmt.Sprintf("MEAN_MOTION_DOT %s rev/day² is 1 or more, beyond its columns", shortest(v)), "write an OMM")
		return ""
	}
	t.compare("MEAN_MOTION_DOT", v, s, v < 0)
	sign := " "
	if v < 0 && strings.Trim(s, "0.") != "" {
		sign = "-"
	}
	return sign + s[1:]
}

// compare notes when the text does not read back as the value.
func (t *tleText) compare(key string, v float64, text string, negative bool) {
	back, err := strconv.ParseFloat(text, 64)
	if negative {
		back = -back
	}
	if err != nil || back != v {
		t.round("%s %s written as %s", key, shortest(v), shortest(back))
	}
}

// exponential writes sign, five digits with the decimal point implied in front, and
// a power of ten of one digit; a value too small for that keeps fewer digits.
func (t *tleText) exponential(key string, v float64, zero string) string {
	exponent := -9
	if a := math.Abs(v); a >= 1e-10 {
		s := strconv.FormatFloat(a, 'e', 4, 64)
		e, err := strconv.Atoi(s[strings.IndexByte(s, 'e')+1:])
		exponent = e + 1
		if err != nil || exponent > 9 {
			t.fail(fmt.Sprintf("%s %s is 1e9 or more, beyond its columns", key, shortest(v)), "write an OMM")
			return ""
		}
	}
	digits := mantissa(math.Abs(v), exponent)
	t.compare(key, v, "0."+digits+"e"+strconv.Itoa(exponent), v < 0)
	if digits == "00000" {
		return " " + zero
	}
	sign, power := " ", "-"
	if v < 0 {
		sign = "-"
	}
	if exponent > 0 {
		power = "+"
	}
	return sign + digits + power + strconv.Itoa(max(exponent, -exponent))
}

// mantissa returns the five digits of v = 0.ddddd × 10^exponent, for v below that
// power. The decimal form is rounded by strconv, since dividing by a power of ten
// would round twice.
func mantissa(v float64, exponent int) string {
	if exponent > -9 {
		s := strconv.FormatFloat(v, 'e', 4, 64)
		return s[:1] + s[2:6]
	}
	s := strconv.FormatFloat(v, 'f', 14, 64)
	return s[len(s)-5:]
}

func (t *tleText) degrees(key string, a unit.Angle) string {
	exact := shortestDegrees(a)
	v, err := strconv.ParseFloat(exact, 64)
	if err != nil {
		t.fail(key+" "+exact+" is not a number", "")
	}
	s := strconv.FormatFloat(v, 'f', 4, 64)
	t.compare(key, v, s, false)
	return fmt.Sprintf("%8s", s)
}

func (t *tleText) eccentricity() string {
	s := strconv.FormatFloat(t.el.Eccentricity, 'f', 7, 64)
	if s[0] != '0' {
		t.fail(fmt.Sprintf("ECCENTRICITY %s rounds to 1 in its seven digits", shortest(t.el.Eccentricity)), "write an OMM")
		return ""
	}
	t.compare("ECCENTRICITY", t.el.Eccentricity, s, false)
	return s[2:]
}

func (t *tleText) meanMotion() string {
	v := t.el.MeanMotion
	s := strconv.FormatFloat(v, 'f', 8, 64)
	if len(s) > 11 || strings.Trim(s, "0.") == "" {
		t.fail(fmt.Sprintf("MEAN_MOTION %s rev/day is outside 0.00000001 to 99.99999999, which its columns hold", shortest(v)), "write an OMM")
		return ""
	}
	t.compare("MEAN_MOTION", v, s, false)
	return fmt.Sprintf("%11s", s)
}

// setNumber and revolution count on from 0 when their columns overflow, as the
// trade's own files do.
func (t *tleText) setNumber() string {
	return t.count("ELEMENT_SET_NO", t.el.ElementSetNo, 10_000, "%4d")
}

func (t *tleText) revolution() string {
	return t.count("REV_AT_EPOCH", t.el.RevolutionAtEpoch, 100_000, "%5d")
}

func (t *tleText) count(key string, n, limit int, format string) string {
	if n >= limit {
		t.round("%s %d written as %d, counting on from 0 after %d", key, n, n%limit, limit-1)
	}
	return fmt.Sprintf(format, n%limit)
}
