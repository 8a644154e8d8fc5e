package propagation

import (
	"math"
)

// GasAttenuation is the specific attenuation of gases in dB/km.
type GasAttenuation struct {
	Oxygen      float64 // dry air: oxygen lines, Debye spectrum and nitrogen
	WaterVapour float64
}

// Total returns the sum of both parts.
func (g GasAttenuation) Total() float64 { return g.Oxygen + g.WaterVapour }

// gasSpecificChecked returns the specific attenuation line by line, and warns; the dry
// pressure is that of the air without its vapour. The stated range is 1 to 1000 GHz. Source:
// Rec. ITU-R P.676-13 Annex 1 §1 (the lines of P.676-12 are the same).
func gasSpecificChecked(fGHz, dryHPa, tK, rho float64, n *notes) (GasAttenuation, error) {
	err := firstError(checkGasFrequency(fGHz, n), within("dry-air pressure", dryHPa, "hPa", 0, 1200, "give it in hPa, without the vapour's"),
		checkAirTemperature(tK), within("water vapour density", rho, "g/m3", 0, 100, ""))
	if err != nil {
		return GasAttenuation{}, err
	}
	return GasAttenuation{oxygenSpecific(fGHz, dryHPa, tK, rho), vapourSpecific(fGHz, dryHPa, tK, rho)}, nil
}

// checkGasFrequency refuses what is no frequency and warns outside the stated range.
func checkGasFrequency(fGHz float64, n *notes) error {
	if err := firstError(positive("frequency", fGHz, "GHz"), within("frequency", fGHz, "GHz", 0, 3000, "")); err != nil {
		return err
	}
	n.beyond("P.676-13", "frequency", fGHz, "GHz", 1, 1000)
	return nil
}

// oxygenSpecific returns the attenuation of dry air in dB/km: P.676-13 equations
// (1), (2a), (3), (5), (6a), (6b), (7), (8) and (9).
func oxygenSpecific(f, p, tK, rho float64) float64 {
	theta := 300 / tK
	lnTheta := math.Log(theta)
	e := vapourPressure(rho, tK)
	theta08 := math.Exp(0.8 * lnTheta)
	var sum float64
	lines := oxygenLines()
	for i := range lines {
		l := &lines[i]
		strength := l.a[0] * 1e-7 * p * theta * theta * theta * math.Exp(l.a[1]*(1-theta))
		scale := theta08
		if l.a[3] != 0 {
			scale = math.Exp((0.8 - l.a[3]) * lnTheta)
		}
		width := l.a[2] * 1e-4 * (p*scale + 1.1*e*theta)
		width = math.Sqrt(width*width + 2.25e-6) // Zeeman splitting
		delta := (l.a[4] + l.a[5]*theta) * 1e-4 * (p + e) * theta08
		sum += strength * lineShape(f, l.fGHz, width, delta)
	}
	d := 5.6e-4 * (p + e) * theta08
	debye := 6.14e-5 * d / (d*d + f*f) // equation (8) with d brought up, so that no air gives nothing
	nitrogen := 1.4e-12 * p * theta * math.Sqrt(theta) / (1 + 1.9e-5*f*math.Sqrt(f))
	sum += f * p * theta * theta * (debye + nitrogen)
	return 0.1820 * f * sum
}

// vapourSpecific returns the attenuation of water vapour in dB/km: P.676-13
// equations (1), (2b), (3), (5), (6a) and (6b).
func vapourSpecific(f, p, tK, rho float64) float64 {
	if rho == 0 {
		return 0
	}
	theta := 300 / tK
	lnTheta := math.Log(theta)
	e := vapourPressure(rho, tK)
	theta35 := math.Exp(3.5 * lnTheta)
	var sum float64
	lines := vapourLines()
	for i := range lines {
		l := &lines[i]
		strength := l.a[0] * 0.1 * e * theta35 * math.Exp(l.a[1]*(1-theta))
		width := l.a[2] * 1e-4 * (p*math.Exp(l.a[3]*lnTheta) + l.a[4]*e*math.Exp(l.a[5]*lnTheta))
		width = 0.535*width + math.Sqrt(0.217*width*width+2.1316e-12*l.fGHz*l.fGHz/theta) // Doppler
		sum += strength * lineShape(f, l.fGHz, width, 0)
	}
	return 0.1820 * f * sum
}

// lineShape is P.676-13 equation (5).
func lineShape(f, line, width, delta float64) float64 {
	below, above := line-f, line+f
	return f / line * ((width-delta*below)/(below*below+width*width) + (width-delta*above)/(above*above+width*width))
}
