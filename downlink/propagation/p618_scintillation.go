package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// Aperture is an antenna as scintillation sees it.
type Aperture struct {
	Diameter   unit.Length
	Efficiency float64 // (0, 1]; 0.5 is P.618's careful choice where it is not known
}

// ScintillationFade returns the fade of tropospheric scintillation exceeded for p of
// an average year, from the median wet refractivity in N-units, and warnings; 0
// where the aperture averages it out. The elevation must lie in (0°, 90°]; 5° and up,
// 4 to 55 GHz and 0.01 to 50 % is what the Recommendation covers. Source: Rec. ITU-R
// P.618-14 §2.4.1, steps 3 to 9, with the turbulent layer at 1 km.
func ScintillationFade(f unit.Frequency, elevation unit.Angle, a Aperture, wetRefractivity float64, p Exceedance) (unit.DB, []Note, error) {
	var n notes
	v, err := scintillationChecked(scintillation{f.Gigahertz(), a.Diameter.Metres(), a.Efficiency, wetRefractivity},
		elevation.Degrees(), p.Percents(), &n)
	return unit.DB(v), n, err
}

// scintillation holds what does not change with elevation and percentage.
type scintillation struct{ fGHz, diameterM, efficiency, wet float64 }

func scintillationChecked(s scintillation, elDeg, pPct float64, n *notes) (float64, error) {
	if err := firstError(s.check(n), checkElevationAbove0(elDeg), checkPercent(pPct)); err != nil {
		return 0, err
	}
	n.beyond("P.618-14 §2.4.1", "elevation", elDeg, "deg", 5, 90)
	n.beyond("P.618-14 §2.4.1", "exceeded percentage", pPct, "%", 0.01, 50)
	return math.Sqrt(s.fadeSquared(elDeg, pPct)), nil
}

func (s scintillation) check(n *notes) error {
	err := firstError(positive("frequency", s.fGHz, "GHz"), within("frequency", s.fGHz, "GHz", 0, 1000, ""),
		positive("antenna diameter", s.diameterM, "m"), within("antenna efficiency", s.efficiency, "", 1e-3, 1, "give a fraction"),
		within("wet refractivity", s.wet, "N-units", 0, 400, ""))
	if err == nil {
		n.beyond("P.618-14 §2.4.1", "frequency", s.fGHz, "GHz", 4, 55)
	}
	return err
}

const (
	turbulentLayerM = 1000 // step 4
	flatSky         = 2.35e-4
)

// fadeSquared returns the square of the fade in dB², equations (42) to (49). The
// square is what combines with the other terms, and it stays smooth where averaging
// takes the fade to 0, which the fade itself does not.
func (s scintillation) fadeSquared(elDeg, pPct float64) float64 {
	sinEl := math.Sin(radians(elDeg))
	g2 := averagingSquared(s.averagingArgument(sinEl))
	if g2 <= 0 { // step 6: no fade
		return 0
	}
	scale := s.timeFactor(pPct) * s.reference() / math.Pow(sinEl, 1.2)
	return scale * scale * g2
}

// reference returns the deviation of equation (42) times f^(7/12), in dB.
func (s scintillation) reference() float64 {
	return (3.6e-3 + 1e-4*s.wet) * math.Pow(s.fGHz, 7.0/12)
}

// averagingArgument returns x of equation (46).
func (s scintillation) averagingArgument(sinEl float64) float64 {
	l := 2 * turbulentLayerM / (math.Sqrt(sinEl*sinEl+flatSky) + sinEl) // equation (43)
	return 1.22 * s.efficiency * s.diameterM * s.diameterM * s.fGHz / l
}

// averagedOutFrom returns the elevation from which on the aperture averages all
// scintillation out, 90° if there is none: the path through the turbulence shortens
// with the elevation, so x rises.
func (s scintillation) averagedOutFrom() float64 {
	low, high := 0.0, 90.0
	for range 60 {
		if mid := (low + high) / 2; averagingSquared(s.averagingArgument(math.Sin(radians(mid)))) > 0 {
			low = mid
		} else {
			high = mid
		}
	}
	return high
}

// averagingSquared is the argument of the root in equation (45); not positive where
// the aperture averages scintillation out.
func averagingSquared(x float64) float64 {
	return 3.86*math.Pow(x*x+1, 11.0/12)*math.Sin(11.0/6*math.Atan2(1, x)) - 7.08*math.Pow(x, 5.0/6)
}

// timeFactor is equation (48). It is negative above some 50 %, where there is an
// enhancement and no fade: 0 is returned there.
func (s scintillation) timeFactor(pPct float64) float64 {
	l := math.Log10(pPct)
	return math.Max(0, -0.061*l*l*l+0.072*l*l-1.71*l+3.0)
}
