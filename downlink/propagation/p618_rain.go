package propagation

import "math"

// effectiveEarthKm is the effective radius of the Earth in P.618-14 §2.2.1.1.
const effectiveEarthKm = 8500

// rainSite is what the rain attenuation of a site depends on, in the units of the printed equations:
// the station's height and the rain height (P.839-4) above mean sea level, the rain rate exceeded for
// 0.01 % of an average year.
type rainSite struct{ latDeg, stationKm, rainKm, rateMmH float64 }

func (s rainSite) check() error {
	return firstError(checkLatitude(s.latDeg), checkStationHeight(s.stationKm),
		within("rain height", s.rainKm, "km", -5, 10, "give it above mean sea level"),
		within("rain rate exceeded for 0.01 %", s.rateMmH, "mm/h", 0, 1000, ""))
}

// rainAttenuationChecked returns the attenuation of rain in dB exceeded for p of an average
// year at an elevation of 0° to 90°, and notes outside 0.001 % to 5 % and above 55 GHz. It
// rises and falls with elevation and with p where the Recommendation makes it do so.
// Source: Rec. ITU-R P.618-14 §2.2.1.1 (the same in P.618-13).
func rainAttenuationChecked(s rainSite, fGHz, elDeg, tiltDeg, pPct float64, n *notes) (float64, error) {
	err := firstError(s.check(), checkRainFrequency(fGHz), within("elevation", elDeg, "deg", 0, 90, "rain has no model under the horizon"),
		checkTilt(tiltDeg), checkPercent(pPct))
	if err != nil {
		return 0, err
	}
	n.beyond("P.618-14 §2.2.1.1", "frequency", fGHz, "GHz", 1, 55)
	n.beyond("P.618-14 §2.2.1.1", "exceeded percentage", pPct, "%", 0.001, 5)
	path := newRainPath(s, fGHz, tiltDeg)
	return path.attenuation(elDeg, pPct), nil
}

// rainPath holds what does not change with elevation and percentage.
type rainPath struct {
	site    rainSite
	fGHz    float64
	law     rainLaw
	cosTilt float64 // cos of twice the tilt
}

func newRainPath(s rainSite, fGHz, tiltDeg float64) rainPath {
	return rainPath{s, fGHz, rainLawAt(fGHz), math.Cos(radians(2 * tiltDeg))}
}

// attenuation is P.618-14 §2.2.1.1 steps 2 to 10, in dB.
func (r *rainPath) attenuation(elDeg, pPct float64) float64 {
	h := r.site.rainKm - r.site.stationKm
	if h <= 0 || r.site.rateMmH == 0 {
		return 0
	}
	sinEl, cosEl := math.Sincos(radians(elDeg))
	a001 := r.attenuation001(elDeg, sinEl, cosEl, h)
	lat := math.Abs(r.site.latDeg)
	var beta float64 // step 10
	if pPct < 1 && lat < 36 {
		beta = -0.005 * (lat - 36)
		if elDeg < 25 {
			beta += 1.8 - 4.25*sinEl
		}
	}
	// equation (8), A001 (p/0.01)^-(...)
	power := -(0.655 + 0.033*math.Log(pPct) - 0.045*math.Log(a001) - beta*(1-pPct)*sinEl)
	return a001 * math.Exp(power*math.Log(pPct/0.01))
}

// attenuation001 is steps 2 to 9: the attenuation exceeded for 0.01 %.
func (r *rainPath) attenuation001(elDeg, sinEl, cosEl, h float64) float64 {
	gamma, lg, r001 := r.reduction(elDeg, sinEl, cosEl, h)
	lr := h / sinEl // step 7
	if steeper(elDeg, h, lg*r001) {
		lr = lg * r001 / cosEl
	}
	chi := math.Max(0, 36-math.Abs(r.site.latDeg))
	v001 := 1 / (1 + math.Sqrt(sinEl)*(31*(1-math.Exp(-elDeg/(1+chi)))*math.Sqrt(lr*gamma)/(r.fGHz*r.fGHz)-0.45))
	return gamma * lr * v001 // equations (6) and (7)
}

// reduction is steps 2 to 6: the specific attenuation, the horizontal projection of
// the path below the rain height, and its reduction factor.
func (r *rainPath) reduction(elDeg, sinEl, cosEl, h float64) (gamma, lg, r001 float64) {
	lg = slantBelow(elDeg, sinEl, h) * cosEl // equation (3)
	k, alpha := r.law.combine(cosEl * cosEl * r.cosTilt)
	gamma = k * math.Pow(r.site.rateMmH, alpha)                                 // equation (4)
	r001 = 1 / (1 + 0.78*math.Sqrt(lg*gamma/r.fGHz) - 0.38*(1-math.Exp(-2*lg))) // equation (5)
	return gamma, lg, r001
}

// steeper tells whether the angle zeta of step 7 exceeds the elevation.
func steeper(elDeg, h, reducedKm float64) bool { return degrees(math.Atan2(h, reducedKm)) > elDeg }

// steep tells which branch of step 7 an elevation takes.
func (r *rainPath) steep(elDeg float64) bool {
	sinEl, cosEl := math.Sincos(radians(elDeg))
	h := r.site.rainKm - r.site.stationKm
	_, lg, r001 := r.reduction(elDeg, sinEl, cosEl, h)
	return steeper(elDeg, h, lg*r001)
}

// slantBelow returns the path below a height h above the station in km, P.618-14
// equations (1) and (2).
func slantBelow(elDeg, sinEl, h float64) float64 {
	if elDeg >= 5 {
		return h / sinEl
	}
	return curvedSlant(sinEl, h)
}

func curvedSlant(sinEl, h float64) float64 {
	return 2 * h / (math.Sqrt(sinEl*sinEl+2*h/effectiveEarthKm) + sinEl)
}
