package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// CrossPolarDiscrimination returns the discrimination between two orthogonal
// polarisations that is not exceeded for p of an average year, from the rain
// attenuation exceeded for the same p, and warnings. It is interference where the
// other polarisation is in use, and no loss. 6 to 55 GHz, and 4 to 6 GHz by the
// scaling of §4.3; elevation 0° to 60° is what the Recommendation covers; p from
// 0.001 to 1 %. Source: Rec. ITU-R P.618-14 §4.1 (the same in P.618-13).
func CrossPolarDiscrimination(f unit.Frequency, elevation, tilt unit.Angle, p Exceedance, rain unit.DB) (unit.DB, []Note, error) {
	var n notes
	x, err := crossPolar(f.Gigahertz(), elevation.Degrees(), tilt.Degrees(), p.Percents(), float64(rain), &n)
	return unit.DB(x), n, err
}

func crossPolar(fGHz, elDeg, tiltDeg, pPct, rainDB float64, n *notes) (float64, error) {
	err := firstError(within("frequency", fGHz, "GHz", 4, 55, "the method has no value there"), checkTilt(tiltDeg),
		checkPercent(pPct), positive("rain attenuation", rainDB, "dB"))
	if err == nil && !(elDeg >= 0 && elDeg < 90) {
		err = &unit.RangeError{Quantity: "elevation", Value: elDeg, Unit: "deg", Allowed: "0 to under 90 deg", Next: "at the zenith the method has no value"}
	}
	if err != nil {
		return 0, err
	}
	n.beyond("P.618-14 §4.1", "elevation", elDeg, "deg", 0, 60)
	n.beyond("P.618-14 §4.1", "exceeded percentage", pPct, "%", 0.001, 1)
	if !tabulatedCanting(pPct) {
		n.add(Assumption, "P.618-14 §4.1 gives the canting angle at 0.001, 0.01, 0.1 and 1 %% only; between them it is linear in the logarithm of p")
	}
	f := math.Max(fGHz, 6) // scaled down at the end
	rainXPD := frequencyTerm(f) - attenuationFactor(f)*math.Log10(rainDB) - 10*math.Log10(tiltTerm(tiltDeg)) -
		40*math.Log10(math.Cos(radians(elDeg))) + 0.0053*cantingDeg(pPct)*cantingDeg(pPct)
	xpd := rainXPD - rainXPD*(0.3+0.1*math.Log10(pPct))/2 // equations (77) and (78)
	return xpd - 20*math.Log10(fGHz/f), nil               // equation (79) at the same tilt
}

// frequencyTerm is Cf of equation (71).
func frequencyTerm(f float64) float64 {
	switch {
	case f < 9:
		return 60*math.Log10(f) - 28.3
	case f < 36:
		return 26*math.Log10(f) + 4.1
	}
	return 35.9*math.Log10(f) - 11.3
}

// attenuationFactor is V(f) of equation (72).
func attenuationFactor(f float64) float64 {
	switch {
	case f < 9:
		return 30.8 * math.Pow(f, -0.21)
	case f < 20:
		return 12.8 * math.Pow(f, 0.19)
	case f < 40:
		return 22.6
	}
	return 13.0 * math.Pow(f, 0.15)
}

// tiltTerm is the argument of the logarithm in equation (73).
func tiltTerm(tiltDeg float64) float64 { return 1 - 0.484*(1+math.Cos(radians(4*tiltDeg))) }

// cantingDeg is the effective standard deviation of the raindrops' canting angle,
// step 5: 0°, 5°, 10° and 15° at 1, 0.1, 0.01 and 0.001 %. A straight line in the
// logarithm of p passes through all four and so stands for what lies between; above
// 1 % the deviation is 0.
func cantingDeg(pPct float64) float64 { return math.Max(0, -5*math.Log10(pPct)) }

func tabulatedCanting(pPct float64) bool {
	return pPct == 1 || pPct == 0.1 || pPct == 0.01 || pPct == 0.001
}
