package orbit

import (
	"math"
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// twoLines reads the two lines of a published element set by their columns. It is
// for the tests' own sets and checks nothing.
func twoLines(t testing.TB, line1, line2 string) Elements {
	t.Helper()
	number := func(s string) float64 {
		v, err := strconv.ParseFloat(strings.TrimSpace(s), 64)
		if err != nil {
			t.Fatalf("test set %q: %v", line1, err)
		}
		return v
	}
	year := int(number(line1[18:20])) + 1900
	if year < 1957 {
		year += 100
	}
	day := number(line1[20:32])
	nanoseconds := math.Round((day - 1) * 86400e9)
	drag := number(line1[53:54]+"0."+line1[54:59]) * math.Pow(10, number(line1[59:61]))
	return Elements{
		CatalogNumber: int(number(line1[2:7])),
		Epoch:         time.Date(year, 1, 1, 0, 0, 0, 0, time.UTC).Add(time.Duration(nanoseconds)),
		Inclination:   unit.Angle(number(line2[8:16])) * unit.Degree,
		RAAN:          unit.Angle(number(line2[17:25])) * unit.Degree,
		Eccentricity:  number("0." + line2[26:33]),
		ArgPerigee:    unit.Angle(number(line2[34:42])) * unit.Degree,
		MeanAnomaly:   unit.Angle(number(line2[43:51])) * unit.Degree,
		MeanMotion:    number(line2[52:63]),
		BStar:         drag,
	}
}
