package propagation

import "math"

// OxygenHeight holds the coefficients of the equivalent height of oxygen at one
// frequency, from the table that belongs to P.676-13 Annex 2 ("Part 1"): the height
// in km is A0 + B0 T + C0 P + D0 rho, with T in K, P the total pressure in hPa and
// rho in g/m³.
type OxygenHeight struct{ A0, B0, C0, D0 float64 }

func (h OxygenHeight) km(tK, totalHPa, rho float64) float64 {
	return h.A0 + h.B0*tK + h.C0*totalHPa + h.D0*rho
}

// gasAnnex2 returns the approximate attenuation of gases in dB from the air at the
// surface, and notes; the elevation must lie in (0°, 90°], 5° and up and 1 to
// 350 GHz is what the Recommendation covers. Source: Rec. ITU-R P.676-13 Annex 2
// §1.1 and §2.1 (method 1, Table 4).
func gasAnnex2(fGHz, elDeg, dryHPa, tK, rho float64, oxygen OxygenHeight, n *notes) (float64, error) {
	g, err := gasSpecificChecked(fGHz, dryHPa, tK, rho, n)
	if err := firstError(err, checkElevationAbove0(elDeg)); err != nil {
		return 0, err
	}
	h0 := oxygen.km(tK, dryHPa+vapourPressure(rho, tK), rho)
	if err := notNegative("equivalent height of oxygen", h0, "km"); err != nil {
		return 0, err
	}
	n.beyond("P.676-13 Annex 2", "frequency", fGHz, "GHz", 1, 350)
	n.beyond("P.676-13 Annex 2", "elevation", elDeg, "deg", 5, 90)
	return (g.Oxygen*h0 + g.WaterVapour*vapourHeightKm(fGHz)) / math.Sin(radians(elDeg)), nil
}

// vapourHeightKm is the equivalent height of water vapour, P.676-13 Annex 2 §2.1
// with Table 4.
func vapourHeightKm(f float64) float64 {
	h := 5.6585e-5*f + 1.8348
	for _, w := range [...]struct{ f, a, b float64 }{
		{22.235080, 2.6846, 2.7649}, {183.310087, 5.8905, 4.9219}, {325.152888, 2.9810, 3.0748},
	} {
		d := f - w.f
		h += w.a / (d*d + w.b)
	}
	return h
}
