package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// CosmicBackground is the brightness of the sky behind everything, P.618-14 equation
// (69) and P.372-16 equation (14).
const CosmicBackground unit.Temperature = 2.7

// DefaultMeanRadiating is the mean radiating temperature where the surface
// temperature is not known, P.618-14 §3.
const DefaultMeanRadiating unit.Temperature = 275

// MeanRadiatingTemperature returns the mean temperature at which the air above a site
// radiates, from the surface temperature; for clear and cloudy weather. Source: Rec.
// ITU-R P.618-14 equation (70).
func MeanRadiatingTemperature(surface unit.Temperature) (unit.Temperature, error) {
	if err := within("surface temperature", surface.Kelvins(), "K", 180, 340, "give it in kelvin"); err != nil {
		return 0, err
	}
	return unit.Temperature(37.34 + 0.81*surface.Kelvins()), nil
}

// SkyBrightness returns the brightness of the sky through a medium of an attenuation
// (gas, cloud and rain; scintillation does not emit) that radiates at a mean
// temperature, in front of a background. background must be at least the cosmic one.
// Source: Rec. ITU-R P.618-14 equation (69).
func SkyBrightness(attenuation unit.DB, medium, background unit.Temperature) (unit.Temperature, error) {
	err := firstError(notNegative("attenuation", float64(attenuation), "dB"), checkMedium(medium), checkBackground(background))
	if err != nil {
		return 0, err
	}
	return unit.Temperature(brightness(float64(attenuation), medium.Kelvins(), background.Kelvins())), nil
}

func brightness(attenuationDB, mediumK, backgroundK float64) float64 {
	passed := math.Exp(-attenuationDB * (math.Ln10 / 10))
	return mediumK*(1-passed) + backgroundK*passed
}

func checkMedium(t unit.Temperature) error {
	return within("temperature of the medium", t.Kelvins(), "K", 100, 400, "see MeanRadiatingTemperature")
}

func checkBackground(t unit.Temperature) error {
	return within("background", t.Kelvins(), "K", CosmicBackground.Kelvins(), 1e9, "the cosmic background is always there")
}
