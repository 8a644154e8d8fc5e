package propagation

import (
	"math"
)

// wetRefractivity returns the wet term of the radio refractivity in N-units from a
// temperature and a density of water vapour. Source: Rec. ITU-R P.453-14, equations
// (2) and (10), e = rho T/216.7.
//
// From the surface's annual figures it only estimates the median that the
// Recommendation's map holds: within 5 % at sea level, 18 % low at a site 2.5 km high.
func wetRefractivity(tK, rhoGM3 float64) (float64, error) {
	if err := firstError(checkAirTemperature(tK), notNegative("water vapour density", rhoGM3, "g/m3")); err != nil {
		return 0, err
	}
	return wetTerm(vapourPressure(rhoGM3, tK), tK), nil
}

func wetTerm(eHPa, tK float64) float64 { return 72*eHPa/tK + 3.75e5*eHPa/(tK*tK) }

// refractivity returns N of air by P.453-14 equation (2).
func refractivity(dryHPa, eHPa, tK float64) float64 { return 77.6*dryHPa/tK + wetTerm(eHPa, tK) }

// vapourPressure returns the partial pressure of water vapour in hPa, P.453-14
// equation (10).
func vapourPressure(rhoGM3, tK float64) float64 { return rhoGM3 * tK / 216.7 }

// wetOfHumidity returns the wet term in N-units from a temperature of
// -40 °C to 50 °C, a relative humidity over liquid water as a fraction, and the total
// pressure: P.618-14 §2.4.1 steps 1 and 2. Source: Rec. ITU-R P.453-14, equations (8)
// and (9) with the coefficients for water.
func wetOfHumidity(tK, relativeHumidity, totalHPa float64) (float64, error) {
	err := firstError(within("temperature", tK, "K", 233.15, 323.15, "give it in kelvin"),
		within("relative humidity", relativeHumidity, "", 0, 1, "give a fraction"), within("pressure", totalHPa, "hPa", 1, 1200, "give it in hPa"))
	if err != nil {
		return 0, err
	}
	return wetTerm(relativeHumidity*saturationPressure(tK-273.15, totalHPa), tK), nil
}

// saturationPressure returns the saturation vapour pressure over liquid water in hPa
// at a temperature in °C.
func saturationPressure(c, totalHPa float64) float64 {
	enhancement := 1 + 1e-4*(7.2+totalHPa*(0.0320+5.9e-6*c*c))
	return enhancement * 6.1121 * math.Exp((18.678-c/234.5)*c/(c+257.14))
}

func checkAirTemperature(tK float64) error {
	return within("temperature", tK, "K", 100, 400, "give it in kelvin")
}
