package propagation

import (
	"math"
)

// bump is a Gaussian in log10 of the frequency: a exp(-((x-b)/c)²).
type bump struct{ a, b, c float64 }

// curve is one of P.838-3 equations (2) and (3): Gaussians and a straight line in
// log10 of the frequency in GHz.
type curve struct {
	bumps []bump
	m, c  float64
}

func (q curve) at(logF float64) float64 {
	s := q.m*logF + q.c
	for _, g := range q.bumps {
		u := (logF - g.b) / g.c
		s += g.a * math.Exp(-u*u)
	}
	return s
}

// P.838-3 (03/2005), Tables 1 to 4.
var (
	logKH = curve{[]bump{{-5.33980, -0.10008, 1.13098}, {-0.35351, 1.26970, 0.45400},
		{-0.23789, 0.86036, 0.15354}, {-0.94158, 0.64552, 0.16817}}, -0.18961, 0.71147}
	logKV = curve{[]bump{{-3.80595, 0.56934, 0.81061}, {-3.44965, -0.22911, 0.51059},
		{-0.39902, 0.73042, 0.11899}, {0.50167, 1.07319, 0.27195}}, -0.16398, 0.63297}
	alphaH = curve{[]bump{{-0.14318, 1.82442, -0.55187}, {0.29591, 0.77564, 0.19822},
		{0.32177, 0.63773, 0.13164}, {-5.37610, -0.96230, 1.47828}, {16.1721, -3.29980, 3.43990}}, 0.67849, -1.95537}
	alphaV = curve{[]bump{{-0.07771, 2.33840, -0.76284}, {0.56727, 0.95545, 0.54039},
		{-0.20238, 1.14520, 0.26809}, {-48.2991, 0.791669, 0.116226}, {48.5833, 0.791459, 0.116479}}, -0.053739, 0.83433}
)

// rainLaw holds k and alpha of both linear polarisations at one frequency.
type rainLaw struct{ kH, kV, aH, aV float64 }

func rainLawAt(fGHz float64) rainLaw {
	x := math.Log10(fGHz)
	return rainLaw{math.Pow(10, logKH.at(x)), math.Pow(10, logKV.at(x)), alphaH.at(x), alphaV.at(x)}
}

// combine returns k and alpha by P.838-3 equations (4) and (5); weight is
// cos²(elevation) cos(2 tilt).
func (l rainLaw) combine(weight float64) (k, alpha float64) {
	k = (l.kH + l.kV + (l.kH-l.kV)*weight) / 2
	alpha = (l.kH*l.aH + l.kV*l.aV + (l.kH*l.aH-l.kV*l.aV)*weight) / (2 * k)
	return k, alpha
}

func rainWeight(elDeg, tiltDeg float64) float64 {
	c := math.Cos(radians(elDeg))
	return c * c * math.Cos(radians(2*tiltDeg))
}

// rainCoefficients returns k and alpha of the law gamma = k R^alpha, gamma in dB/km
// and R in mm/h, for a path at an elevation and a tilt of the polarisation against
// the horizontal (45° for circular). The frequency must lie in 1 to 1000 GHz: the
// curves are fits, and mean nothing outside it. Source: Rec. ITU-R P.838-3.
func rainCoefficients(fGHz, elDeg, tiltDeg float64) (k, alpha float64, err error) {
	err = firstError(checkRainFrequency(fGHz),
		within("elevation", elDeg, "deg", -90, 90, ""), checkTilt(tiltDeg))
	if err != nil {
		return 0, 0, err
	}
	k, alpha = rainLawAt(fGHz).combine(rainWeight(elDeg, tiltDeg))
	return k, alpha, nil
}

// rainSpecific returns the attenuation of rain in dB/km; the rain rate
// must be 0 or greater. Source: Rec. ITU-R P.838-3, equation (1).
func rainSpecific(rateMmH, fGHz, elDeg, tiltDeg float64) (float64, error) {
	k, alpha, err := rainCoefficients(fGHz, elDeg, tiltDeg)
	if err := firstError(err, notNegative("rain rate", rateMmH, "mm/h")); err != nil {
		return 0, err
	}
	return k * math.Pow(rateMmH, alpha), nil
}

func checkRainFrequency(fGHz float64) error {
	return within("frequency", fGHz, "GHz", 1, 1000, "Rec. ITU-R P.838-3 is a fit to this span; leave rain out below it")
}

func checkTilt(tiltDeg float64) error {
	return within("polarisation tilt", tiltDeg, "deg", -180, 180, "give the angle against the horizontal, 45 deg for circular")
}

func radians(deg float64) float64 { return deg * (math.Pi / 180) }

func degrees(rad float64) float64 { return rad * (180 / math.Pi) }
