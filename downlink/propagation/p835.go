package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Season picks between the reference atmospheres of a latitude.
type Season int

// Seasons. Year is the mean of summer and winter at each height, which is a rule of
// this package: the Recommendation gives the two seasons only.
const (
	Year Season = iota
	Summer
	Winter
)

// String returns "year", "summer" or "winter".
func (s Season) String() string { return [...]string{"year", "summer", "winter"}[s] }

// air is the state of the air at a height: temperature in K, total pressure in hPa,
// density of water vapour in g/m³.
type air struct{ tK, hPa, rho float64 }

// dry returns the pressure of the air without its vapour, never below 0.
func (a air) dry() float64 { return math.Max(0, a.hPa-vapourPressure(a.rho, a.tK)) }

// Atmosphere is a vertical profile of the air, from 0.5 km below the sea to 100 km,
// where it ends. It is immutable.
type Atmosphere struct {
	name string
	at   func(hKm float64) air
}

// topKm is where the reference atmospheres and every profile here end.
const topKm = 100

// Name says what the profile is, in words for a report.
func (a Atmosphere) Name() string { return a.name }

// MeanAnnualGlobal returns the mean annual global reference atmosphere with a
// vapour density at sea level (7.5 g/m³ is the Recommendation's) that falls with a
// scale height of 2 km. Source: Rec. ITU-R P.835-6 Annex 1 §1.
func MeanAnnualGlobal(seaLevelVapour VapourDensity) (Atmosphere, error) {
	rho0 := seaLevelVapour.GramsPerCubicMetre()
	if err := within("water vapour density at sea level", rho0, "g/m3", 0, 50, ""); err != nil {
		return Atmosphere{}, err
	}
	return Atmosphere{name: fmt.Sprintf("P.835-6 mean annual global, %s g/m3 at sea level", number(rho0)),
		at: func(h float64) air { return globalAir(h, rho0) }}, nil
}

// ReferenceAtmosphere returns the reference atmosphere of a latitude and season:
// low (under 22°, no seasons), middle (22° to 45°) or high latitude. Source: Rec.
// ITU-R P.835-6 Annex 1 §2 to §4.
func ReferenceAtmosphere(latitude unit.Angle, season Season) (Atmosphere, error) {
	lat := math.Abs(latitude.Degrees())
	if err := checkLatitude(lat); err != nil {
		return Atmosphere{}, err
	}
	if season < Year || season > Winter {
		return Atmosphere{}, fmt.Errorf("season %d is not known; give year, summer or winter", int(season))
	}
	if lat < 22 {
		return Atmosphere{"P.835-6 low latitude", lowLatitude.at}, nil
	}
	name, summer, winter := "middle", middleSummer, middleWinter
	if lat > 45 {
		name, summer, winter = "high", highSummer, highWinter
	}
	switch season {
	case Summer:
		return Atmosphere{"P.835-6 " + name + " latitude, summer", summer.at}, nil
	case Winter:
		return Atmosphere{"P.835-6 " + name + " latitude, winter", winter.at}, nil
	}
	return Atmosphere{"P.835-6 " + name + " latitude, mean of summer and winter", func(h float64) air {
		s, w := summer.at(h), winter.at(h)
		return air{(s.tK + w.tK) / 2, (s.hPa + w.hPa) / 2, (s.rho + w.rho) / 2}
	}}, nil
}

// globalAir is P.835-6 Annex 1 §1: temperature and pressure of the U.S. Standard
// Atmosphere 1976 and exponential vapour, of which a pressure of 2e-6 of the whole
// is left at any height.
func globalAir(h, rho0 float64) air {
	t, p := globalTemperature(h), globalPressure(h)
	rho := rho0 * math.Exp(-h/2)
	if rho > 0 && vapourPressure(rho, t) < 2e-6*p {
		rho = 2e-6 * p * 216.7 / t
	}
	return air{t, p, rho}
}

// geopotential returns the geopotential height in km, P.835-6 equation (1a).
func geopotential(h float64) float64 { return 6356.766 * h / (6356.766 + h) }

func globalTemperature(h float64) float64 {
	if h >= 86 {
		if h < 91 {
			return 186.8673
		}
		u := (h - 91) / 19.9429
		return 263.1905 - 76.3232*math.Sqrt(1-u*u)
	}
	g := geopotential(h)
	switch {
	case g <= 11:
		return 288.15 - 6.5*g
	case g <= 20:
		return 216.65
	case g <= 32:
		return 216.65 + (g - 20)
	case g <= 47:
		return 228.65 + 2.8*(g-32)
	case g <= 51:
		return 270.65
	case g <= 71:
		return 270.65 - 2.8*(g-51)
	}
	return 214.65 - 2*(g-71)
}

func globalPressure(h float64) float64 {
	if h >= 86 {
		return math.Exp(95.571899 + h*(-4.011801+h*(6.424731e-2+h*(-4.789660e-4+h*1.340543e-6))))
	}
	g := geopotential(h)
	switch {
	case g <= 11:
		return 1013.25 * math.Pow(288.15/(288.15-6.5*g), -34.1632/6.5)
	case g <= 20:
		return 226.3226 * math.Exp(-34.1632*(g-11)/216.65)
	case g <= 32:
		return 54.74980 * math.Pow(216.65/(216.65+(g-20)), 34.1632)
	case g <= 47:
		return 8.680422 * math.Pow(228.65/(228.65+2.8*(g-32)), 34.1632/2.8)
	case g <= 51:
		return 1.109106 * math.Exp(-34.1632*(g-47)/270.65)
	case g <= 71:
		return 0.6694167 * math.Pow(270.65/(270.65-2.8*(g-51)), -34.1632/2.8)
	}
	return 0.03956649 * math.Pow(214.65/(214.65-2*(g-71)), -34.1632/2)
}
