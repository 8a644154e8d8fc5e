package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// earthRadiusKm is the Earth's radius in P.676-13 Annex 1 §2.2.1.
const earthRadiusKm = 6371

// Layers is the air above a height cut into thin spherical shells: 10 cm at the
// bottom, each 1 % thicker than the one below, up to 100 km. From sea level these
// are the shells of P.676-13 Annex 1 equations (14) and (15); from a higher station
// they start as thin again, where the Recommendation's grow thicker, and so lie
// nearer to the limit of many shells (TestLayersNearFineLimit). Each shell has the
// air of its middle. Immutable, safe for use by many goroutines.
type Layers struct {
	atmosphere Atmosphere
	baseKm     float64
	shells     []shell
	topKm      float64 // radius of the outer edge
}

// shell is one layer: inner radius in km, refractive index and air at mid height.
type shell struct {
	rKm, n          float64
	tK, dryHPa, rho float64
}

// shellBottomKm is the thickness of the lowest shell, P.676-13 Annex 1 equation (14).
const shellBottomKm = 1e-4

// NewLayers cuts the atmosphere above a station; height -0.5 to 9 km above mean sea
// level. It fails where the profile has no air at the station or bends rays so that
// they cannot leave.
func NewLayers(a Atmosphere, height unit.Length) (*Layers, error) {
	h := height.Kilometres()
	if a.at == nil {
		return nil, fmt.Errorf("layers: no atmosphere given; choose one of the reference atmospheres")
	}
	if err := checkStationHeight(h); err != nil {
		return nil, err
	}
	return newLayers(a, h, 0.01)
}

// newLayers cuts shells that grow by a factor of e^growth each; the lowest has
// 10 cm times growth/0.01.
func newLayers(a Atmosphere, baseKm, growth float64) (*Layers, error) {
	bottom := shellBottomKm * growth / 0.01
	ratio := math.Exp(growth)
	span := topKm - baseKm
	count := int(math.Ceil(math.Log(span/bottom*(ratio-1)+1) / growth))
	l := &Layers{atmosphere: a, baseKm: baseKm, shells: make([]shell, count)}
	thickness, h := bottom, baseKm
	for i := range l.shells {
		s := a.at(math.Min(h+thickness/2, topKm))
		if math.IsNaN(s.tK + s.hPa + s.rho) {
			return nil, fmt.Errorf("%s: no air known at %s km; let the profile start at or under the station", a.name, number(h))
		}
		dry := s.dry()
		l.shells[i] = shell{rKm: earthRadiusKm + h, n: 1 + 1e-6*refractivity(dry, vapourPressure(s.rho, s.tK), s.tK),
			tK: s.tK, dryHPa: dry, rho: s.rho}
		if s := l.shells; i > 0 && !(s[i].n*s[i].rKm > s[i-1].n*s[i-1].rKm) {
			return nil, fmt.Errorf("%s: the air at %s km bends rays stronger than the Earth curves (a duct); no slant path there",
				a.name, number(h))
		}
		h += thickness
		thickness *= ratio
	}
	l.topKm = earthRadiusKm + h
	return l, nil
}

// outer returns the outer radius of shell i.
func (l *Layers) outer(i int) float64 {
	if i+1 < len(l.shells) {
		return l.shells[i+1].rKm
	}
	return l.topKm
}

// absorption returns the specific attenuation of each shell in dB/km.
func (l *Layers) absorption(fGHz float64) []float64 {
	g := make([]float64, len(l.shells))
	for i, s := range l.shells {
		g[i] = oxygenSpecific(fGHz, s.dryHPa, s.tK, s.rho) + vapourSpecific(fGHz, s.dryHPa, s.tK, s.rho)
	}
	return g
}

// impact returns n r cos(elevation) at the bottom, which Snell's law keeps along the
// ray in spherical shells.
func (l *Layers) impact(apparentDeg float64) float64 {
	return l.shells[0].n * l.shells[0].rKm * math.Cos(radians(apparentDeg))
}

// attenuation sums the path through each shell times its absorption: P.676-13 Annex
// 1 equations (13), (17) and (19b). apparentDeg is 0 to 90.
func (l *Layers) attenuation(absorption []float64, apparentDeg float64) float64 {
	k := l.impact(apparentDeg)
	var sum float64
	for i := range l.shells {
		sum += absorption[i] * l.chord(i, k, l.outer(i))
	}
	return sum
}

// chord returns the path through shell i up to the radius outer.
func (l *Layers) chord(i int, k, outer float64) float64 {
	x := k / l.shells[i].n
	return halfChord(outer, x) - halfChord(l.shells[i].rKm, x)
}

// halfChord returns sqrt(r² - x²), 0 where rounding takes r under x at the lowest
// point of a ray.
func halfChord(r, x float64) float64 { return math.Sqrt(math.Max(0, (r-x)*(r+x))) }

// belowTo returns the attenuation from the lowest shell's bottom up to a height
// inside, for a ray that is horizontal at the bottom, and the angle at the Earth's
// centre between them.
func (l *Layers) belowTo(absorption []float64, heightKm float64) (attenuation, centre float64) {
	k := l.impact(0)
	r := earthRadiusKm + heightKm
	for i := range l.shells {
		s := &l.shells[i]
		outer := math.Min(l.outer(i), r)
		x := k / s.n
		chord := halfChord(outer, x) - halfChord(s.rKm, x)
		attenuation += absorption[i] * chord
		centre += centreAngle(chord, x, s.rKm, outer)
		if outer == r {
			break
		}
	}
	return attenuation, centre
}

// centreAngle returns the angle at the Earth's centre over a chord of impact x
// between two radii. Its sine is chord x/(inner outer), under 0.02, where three terms of
// the arcsine are exact to 1e-13.
func centreAngle(chord, x, inner, outer float64) float64 {
	z := chord * x / (inner * outer)
	return z * (1 + z*z*(1.0/6+z*z*(3.0/40)))
}

// trace follows the ray that appears at apparentDeg: its attenuation in dB, the angle
// at the Earth's centre between the bottom of the shells and their outer edge, and
// the ray's angle to the vertical in the vacuum there. absorption may be nil.
func (l *Layers) trace(absorption []float64, apparentDeg float64) (attenuation, centre, exit float64) {
	k := l.impact(apparentDeg)
	for i := range l.shells {
		s := &l.shells[i]
		x := k / s.n
		outer := l.outer(i)
		chord := halfChord(outer, x) - halfChord(s.rKm, x)
		if absorption != nil {
			attenuation += absorption[i] * chord
		}
		centre += centreAngle(chord, x, s.rKm, outer)
	}
	return attenuation, centre, math.Atan2(k, halfChord(l.topKm, k))
}

// geometricDeg returns the elevation of the straight line to a satellite which
// appears at apparentDeg (0 to 90).
func (l *Layers) geometricDeg(apparentDeg, satelliteRadiusKm float64) float64 {
	_, centre, exit := l.trace(nil, apparentDeg)
	return l.straight(apparentDeg, centre, exit, satelliteRadiusKm)
}

// straight returns the elevation of the straight line to a satellite whose ray was
// traced: the ray's direction where it has left the air, for a satellite far away
// (infinite radius), or the line to the point where the ray meets the radius.
func (l *Layers) straight(apparentDeg, centre, exit, satelliteRadiusKm float64) float64 {
	return straightLine(l.impact(apparentDeg), l.shells[0].rKm, centre, exit, satelliteRadiusKm)
}

// straightLine is straight for a ray of impact k from a station at radius r1.
func straightLine(k, r1, centre, exit, satelliteRadiusKm float64) float64 {
	if math.IsInf(satelliteRadiusKm, 1) {
		return 90 - degrees(centre+exit)
	}
	centre += exit - math.Atan2(k, halfChord(satelliteRadiusKm, k))
	return degrees(math.Atan2(satelliteRadiusKm*math.Cos(centre)-r1, satelliteRadiusKm*math.Sin(centre)))
}
