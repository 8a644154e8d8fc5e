package propagation

import "math"

// gasAnnex2v12 returns the approximate attenuation of gases in dB by the superseded
// P.676-12 (08/2019) Annex 2, with the vapour as an integrated column; kept for
// figures that were published with it. The height is the station's above mean sea level.
func gasAnnex2v12(fGHz, elDeg, dryHPa, tK, rho, vapourKgM2, heightKm float64, n *notes) (float64, error) {
	g, err := gasSpecificChecked(fGHz, dryHPa, tK, rho, n)
	if err := firstError(err, checkElevationAbove0(elDeg)); err != nil {
		return 0, err
	}
	wet, err := zenithVapourV12(fGHz, heightKm, vapourKgM2, n)
	if err != nil {
		return 0, err
	}
	n.beyond("P.676-12 Annex 2", "elevation", elDeg, "deg", 5, 90)
	h0 := oxygenHeightV12(fGHz, dryHPa+vapourPressure(rho, tK), tK)
	return (g.Oxygen*h0 + wet) / math.Sin(radians(elDeg)), nil
}

// oxygenHeightV12 is P.676-12 Annex 2 equations (30) to (34), in km.
func oxygenHeightV12(f, totalHPa, tK float64) float64 {
	rp := totalHPa / 1013.25
	u := (f - 59.7) / (2.87 + 12.4*math.Exp(-7.9*rp))
	t1 := 5.1040 / (1 + 0.066*math.Pow(rp, -2.3)) * math.Exp(-u*u)
	var t2 float64
	for _, c := range [...]struct{ c, f float64 }{ // Table 3
		{0.1597, 118.750334}, {0.1066, 368.498246}, {0.1325, 424.763020}, {0.1242, 487.249273},
		{0.0938, 715.392902}, {0.1448, 773.839490}, {0.1374, 834.145546},
	} {
		d := f - c.f
		t2 += c.c * math.Exp(2.12*rp) / (d*d + 0.025*math.Exp(2.2*rp))
	}
	t3 := 0.0114 * f / (1 + 0.14*math.Pow(rp, -2.6)) *
		(15.02*f*f - 1353*f + 5.333e4) / (f*f*f - 151.3*f*f + 9629*f - 6803)
	h0 := 6.1 * (0.7832 + 0.00709*(tK-273.15)) / (1 + 0.17*math.Pow(rp, -1.1)) * (1 + t1 + t2 + t3)
	if f < 70 {
		h0 = math.Min(h0, 10.7*math.Pow(rp, 0.3)) // the Recommendation's own limit
	}
	return h0
}

// zenithVapourV12 returns the zenith attenuation of water vapour in dB from its
// integrated column: P.676-12 Annex 2 §2.3, equations (39) to (41). Heights count
// from 0 to 4 km there, as the Recommendation says.
func zenithVapourV12(f, heightKm, vapourKgM2 float64, n *notes) (float64, error) {
	err := firstError(checkGasFrequency(f, n), checkStationHeight(heightKm),
		within("integrated water vapour", vapourKgM2, "kg/m2", 0, 150, ""))
	if err != nil || vapourKgM2 == 0 {
		return 0, err
	}
	n.beyond("P.676-12 Annex 2", "frequency", f, "GHz", 1, 350)
	rho := vapourKgM2 / 2.38
	t := 14*math.Log(0.22*vapourKgM2/2.38) + 3 + 273.15
	const pRef, fRef = 845, 20.6
	if err := checkAirTemperature(t); err != nil {
		return 0, err
	}
	a := 0.0176 * vapourKgM2 * vapourSpecific(f, pRef, t, rho) / vapourSpecific(fRef, pRef, t, rho)
	if f < 20 {
		return a, nil
	}
	gaussian := func(c, f0, w float64) float64 { u := (f - f0) / w; return c * math.Exp(-u*u) }
	slope := gaussian(0.2048, 22.43, 3.097) + gaussian(0.2326, 183.5, 4.096) + gaussian(0.2073, 325, 3.651) - 0.1113
	power := 8.741e4*math.Exp(-0.587*f) + 312.2*math.Pow(f, -2.38) + 0.723
	h := math.Max(0, math.Min(4, heightKm))
	return a * (slope*math.Pow(h, power) + 1), nil
}
