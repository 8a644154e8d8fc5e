package propagation

import (
	"math"

	"gonum.org/v1/gonum/mathext"

	"slantwise/orbit/unit"
)

// CloudLogNormal describes the statistics of a site's integrated cloud liquid water:
// it exceeds L for Probability Q((ln L - Mean)/Sigma), L in kg/m².
type CloudLogNormal struct {
	Mean        float64    // of ln of the content in kg/m²
	Sigma       float64    // of the same, greater than 0
	Probability Exceedance // of cloud liquid water at all
}

// cloudDirect returns the attenuation in dB of the cloud liquid water that is
// exceeded at the percentage sought, and notes. The elevation must lie in (0°,
// 90°]; 5° and up, and 1 to 200 GHz, is what the Recommendation covers. Source: Rec.
// ITU-R P.840-9 §3.1 and §3.2, or P.840-8 §3 (edition 8).
func cloudDirect(fGHz, elDeg, liquidKgM2 float64, edition int, n *notes) (float64, error) {
	err := firstError(checkCloud(fGHz, elDeg, edition, n), notNegative("cloud liquid water", liquidKgM2, "kg/m2"))
	if err != nil {
		return 0, err
	}
	return cloudMassAbsorption(fGHz, edition) * liquidKgM2 / math.Sin(radians(elDeg)), nil
}

// cloudLogNormal returns the attenuation in dB of cloud exceeded at p by the
// log-normal approximation; 0 where cloud is rarer than p. Source: Rec. ITU-R
// P.840-9 §3.3.
func cloudLogNormal(fGHz, elDeg, pPct, mean, sigma, probabilityPct float64, edition int, n *notes) (float64, error) {
	err := firstError(checkCloud(fGHz, elDeg, edition, n), checkPercent(pPct),
		within("mean of ln of the cloud liquid water", mean, "", -30, 10, ""),
		positive("sigma of ln of the cloud liquid water", sigma, ""),
		within("probability of cloud liquid water", probabilityPct, "%", 0, 100, ""))
	if err != nil {
		return 0, err
	}
	return cloudMassAbsorption(fGHz, edition) * liquidLogNormal(pPct, mean, sigma, probabilityPct) / math.Sin(radians(elDeg)), nil
}

// liquidLogNormal returns the content in kg/m² exceeded for p %. The map's floor of
// 0.02 % is the Recommendation's.
func liquidLogNormal(pPct, mean, sigma, probabilityPct float64) float64 {
	if probabilityPct <= 0.02 || pPct >= probabilityPct {
		return 0
	}
	return math.Exp(mean + sigma*inverseQ(pPct/probabilityPct))
}

// inverseQ returns x of which the standard normal distribution leaves the share q
// above, q in (0, 1).
func inverseQ(q float64) float64 { return -mathext.NormalQuantile(q) }

// cloudMassAbsorption returns the attenuation of liquid water in dB per kg/m²:
// P.840-9 §3.1 K_L, three terms over K_l at 273.75 K; P.840-8 K_l at 273.15 K.
func cloudMassAbsorption(fGHz float64, edition int) float64 {
	if edition == 8 {
		return liquidWaterCoefficient(fGHz, 273.15)
	}
	gaussian := func(a, f0, s float64) float64 { d := fGHz - f0; return a * math.Exp(-d*d/s) }
	return liquidWaterCoefficient(fGHz, 273.75) *
		(gaussian(0.1522, -23.9589, 3.2991e3) + gaussian(11.51, 219.2096, 2.7595e6) - 10.4912)
}

// liquidWaterCoefficient returns K_l in (dB/km)/(g/m³) at a temperature, by the
// double-Debye permittivity of water. Source: Rec. ITU-R P.840-9 §2.
func liquidWaterCoefficient(fGHz, tK float64) float64 {
	d := 300/tK - 1
	eps0 := 77.66 + 103.3*d
	eps1 := 0.0671 * eps0
	const eps2 = 3.52
	fp := 20.20 - 146*d + 316*d*d
	fs := 39.8 * fp
	rp, rs := fGHz/fp, fGHz/fs
	imag := (eps0-eps1)*rp/(1+rp*rp) + (eps1-eps2)*rs/(1+rs*rs)
	real := (eps0-eps1)/(1+rp*rp) + (eps1-eps2)/(1+rs*rs) + eps2
	eta := (2 + real) / imag
	return 0.819 * fGHz / (imag * (1 + eta*eta))
}

func checkCloud(fGHz, elDeg float64, edition int, n *notes) error {
	err := firstError(positive("frequency", fGHz, "GHz"),
		within("frequency", fGHz, "GHz", 0, 1000, "small droplets scatter above; no model here"),
		checkElevationAbove0(elDeg))
	if err == nil {
		model := cloudEditionName(edition)
		n.beyond(model, "frequency", fGHz, "GHz", 1, 200)
		n.beyond(model, "elevation", elDeg, "deg", 5, 90)
	}
	return err
}

func cloudEditionName(edition int) string {
	if edition == 8 {
		return "P.840-8"
	}
	return "P.840-9"
}

func checkElevationAbove0(elDeg float64) error {
	if elDeg > 0 && elDeg <= 90 {
		return nil
	}
	return &unit.RangeError{Quantity: "elevation", Value: elDeg, Unit: "deg", Allowed: "above 0 to 90 deg",
		Next: "the flat layers of this model have no path at or below the horizon"}
}

func checkPercent(pPct float64) error {
	if pPct > 0 && pPct <= 100 {
		return nil
	}
	return &unit.RangeError{Quantity: "exceeded percentage", Value: pPct, Unit: "%", Allowed: "above 0 to 100 %"}
}
