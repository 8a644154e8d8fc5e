package elements

import (
	"math"
	"strconv"

	"slantwise/orbit/unit"
)

// shortest writes a number with the fewest digits that read back as the same value,
// without an exponent where that stays readable.
func shortest(v float64) string {
	a := math.Abs(v)
	if a != 0 && (a < 1e-15 || a >= 1e15) {
		return strconv.FormatFloat(v, 'e', -1, 64)
	}
	return strconv.FormatFloat(v+0, 'f', -1, 64)
}

// shortestDegrees writes an angle in degrees with the fewest digits that read back
// as the same angle. A number of up to 15 digits that was read as degrees comes back
// as those digits: neighbouring numbers of 15 digits lie at least four steps of a
// float64 apart, so that the factor of π/180 cannot join them. An angle that no
// number of degrees gives exactly is written to 17 digits.
func shortestDegrees(a unit.Angle) string {
	deg := a.Degrees()
	for digits := 1; digits <= 17; digits++ {
		v, err := strconv.ParseFloat(strconv.FormatFloat(deg, 'e', digits-1, 64), 64)
		if err == nil && unit.Angle(v)*unit.Degree == a {
			return shortest(v)
		}
	}
	for _, v := range []float64{math.Nextafter(deg, 0), math.Nextafter(deg, 2*deg)} {
		if unit.Angle(v)*unit.Degree == a {
			return shortest(v)
		}
	}
	return shortest(deg)
}
