package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// CosmicBackground is the brightness of the sky behind everything, P.618-14 equation
// (69) and P.372-16 equation (14).
const CosmicBackground unit.Temperature = 2.7

// MeanRadiatingTemperature returns the mean temperature at which the air above a site
// radiates, from the surface temperature; for clear and cloudy weather. Source: Rec.
// ITU-R P.618-14 equation (70).
func MeanRadiatingTemperature(surface unit.Temperature) (unit.Temperature, error) {
	if err := within("surface temperature", surface.Kelvins(), "K", 180, 340, "give it in kelvin"); err != nil {
		return 0, err
	}
	return unit.Temperature(37.34 + 0.81*surface.Kelvins()), nil
}

// brightness returns the brightness of the sky in K through a medium of an attenuation
// (gas, cloud and rain; scintillation does not emit) that radiates at a mean
// temperature, in front of a background. Source: Rec. ITU-R P.618-14 equation (69).
func brightness(attenuationDB, mediumK, backgroundK float64) float64 {
	passed := math.Exp(-attenuationDB * (math.Ln10 / 10))
	return mediumK*(1-passed) + backgroundK*passed
}
