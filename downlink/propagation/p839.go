package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// RainHeight returns the mean annual rain height above mean sea level from the mean
// height of the 0 °C isotherm. Source: Rec. ITU-R P.839-4, hR = h0 + 0.36 km.
func RainHeight(zeroDegreeIsotherm unit.Length) (unit.Length, error) {
	km, err := rainHeight(zeroDegreeIsotherm.Kilometres())
	return unit.Length(km) * unit.Kilometre, err
}

func rainHeight(isothermKm float64) (float64, error) {
	// The lowest map value lies below the sea in Antarctica; ten kilometres are beyond any.
	if err := within("height of the 0 degree isotherm", isothermKm, "km", -5, 10, "give it above mean sea level"); err != nil {
		return 0, err
	}
	return isothermKm + 0.36, nil
}

// RainHeightByLatitude returns the rain height that the superseded Rec. ITU-R
// P.839-1 (1997) gave by latitude alone; it stands in where a site states none.
// Coefficients as the textbooks print them (from memory).
func RainHeightByLatitude(latitude unit.Angle) (unit.Length, error) {
	lat := latitude.Degrees()
	if err := checkLatitude(lat); err != nil {
		return 0, err
	}
	km := 5.0
	switch {
	case lat > 23:
		km = 5 - 0.075*(lat-23)
	case lat < -21:
		km = math.Max(0, 5+0.1*(lat+21)) // the rule itself has 0 km south of 71° S
	}
	return unit.Length(km) * unit.Kilometre, nil
}

func checkLatitude(latDeg float64) error {
	return within("latitude", latDeg, "deg", -90, 90, "give it in degrees, north positive")
}
