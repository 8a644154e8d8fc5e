package propagation

import "slantwise/orbit/unit"

// ApparentElevation returns the elevation at which a satellite far above the
// atmosphere appears, from its geometric elevation, by the closed fit of Rec. ITU-R
// P.834-9 §4.2, equation (12). elevation -1° to 10° and height 0 to 3 km is what the
// fit covers; higher elevations are given with a warning. The layered ray of Layers
// has no such limits.
func ApparentElevation(geometric unit.Angle, height unit.Length) (unit.Angle, []Note, error) {
	el, h := geometric.Degrees(), height.Kilometres()
	if err := firstError(within("elevation", el, "deg", -1, 90, "use a layered ray below"), checkStationHeight(h)); err != nil {
		return 0, nil, err
	}
	var n notes
	n.beyond("P.834-9", "elevation", el, "deg", -1, 10)
	n.beyond("P.834-9", "station height", h, "km", 0, 3)
	return unit.Angle(apparentElevation(el, h)) * unit.Degree, n, nil
}

func apparentElevation(elDeg, heightKm float64) float64 {
	return elDeg + 1/spreadingDenominator(elDeg, heightKm)
}

func spreadingDenominator(el, h float64) float64 {
	return 1.728 + 0.5411*el + 0.03723*el*el +
		h*(0.1815+0.06272*el+0.01380*el*el) + h*h*(0.01727+0.008288*el)
}

// checkStationHeight bounds heights above mean sea level; the lowest shores of the
// Earth lie 0.43 km below it.
func checkStationHeight(hKm float64) error {
	return within("station height", hKm, "km", -0.5, 9, "give it above mean sea level")
}
