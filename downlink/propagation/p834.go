package propagation

// apparentElevation returns the elevation in degrees at which a satellite far above
// the atmosphere appears, by the closed fit of Rec. ITU-R P.834-9 §4, equation (12),
// which P.618-14 §2.4 asks for. It was made for -1° to 10° and stations to 3 km;
// everything else here follows the layered ray.
func apparentElevation(elDeg, heightKm float64) float64 {
	h := heightKm
	return elDeg + 1/(1.728+0.5411*elDeg+0.03723*elDeg*elDeg+
		h*(0.1815+0.06272*elDeg+0.01380*elDeg*elDeg)+h*h*(0.01727+0.008288*elDeg))
}

// checkStationHeight bounds heights above mean sea level; the lowest shores of the
// Earth lie 0.43 km below it.
func checkStationHeight(hKm float64) error {
	return within("station height", hKm, "km", -0.5, 9, "give it above mean sea level")
}
