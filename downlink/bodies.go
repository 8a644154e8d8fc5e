package downlink

import (
	"fmt"
	"math"
	"time"

	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Bodies gives where the Sun and the Moon stand. It is prepared once for a span of
// time, which need not hold every instant asked for, and is safe for use by many
// goroutines.
type Bodies struct {
	from  time.Time
	span  float64 // s
	sun   *orbit.SunTrack
	moon  *orbit.MoonTrack
	earth orbit.EarthOrientation
}

// NewBodies prepares the Sun and the Moon for [from, to]; at other instants they are
// worked out one by one, which takes microseconds.
func NewBodies(from, to time.Time, earth orbit.EarthOrientation) *Bodies {
	return &Bodies{from: from, span: max(0, to.Sub(from).Seconds()), sun: orbit.NewSunTrack(from, to, earth), moon: orbit.NewMoonTrack(from, to, earth), earth: earth}
}

// positions returns the Earth-fixed positions in m.
func (b *Bodies) positions(t time.Time) (sun, moon orbit.Vec3) {
	if s := t.Sub(b.from).Seconds(); s >= 0 && s <= b.span {
		return b.sun.PositionAt(s), b.moon.PositionAt(s)
	}
	return orbit.SunPosition(t, b.earth), orbit.MoonPosition(t, b.earth)
}

// bodyAngles are the angles of the Sun and the Moon off the beam's axis; NaN where
// they are not known.
type bodyAngles struct {
	sun, moon     unit.Angle
	sunUp, moonUp bool // above the horizon, the refraction there taken in
}

var noAngles = bodyAngles{sun: unit.Angle(math.NaN()), moon: unit.Angle(math.NaN())}

// sinHorizon is the sine of the geometric elevation at which a body appears on a level
// horizon: the mean refraction there is 34' (Astronomical Almanac).
var sinHorizon = -math.Sin(34.0 / 60 * math.Pi / 180)

// lookAtBodies returns the angles to the beam, which points at the spacecraft, or for
// a fixed antenna at its boresight.
func (l *Link) lookAtBodies(g *Geometry) bodyAngles {
	az, el := g.Azimuth, g.Elevation
	if a := l.spec.Antenna; a.Kind == station.Fixed {
		az, el = a.Boresight.Azimuth, a.Boresight.Elevation
	}
	if l.spec.Bodies == nil || l.spec.Frame == nil || g.Time.IsZero() || math.IsNaN(az.Radians()) {
		return noAngles
	}
	f := l.spec.Frame
	sinA, cosA := math.Sincos(az.Radians())
	sinE, cosE := math.Sincos(el.Radians())
	beam := f.East.Scale(sinA * cosE).Add(f.North.Scale(cosA * cosE)).Add(f.Up.Scale(sinE))
	sun, moon := l.spec.Bodies.positions(g.Time)
	sun, moon = sun.Sub(f.Origin).Unit(), moon.Sub(f.Origin).Unit()
	between := func(a orbit.Vec3) unit.Angle { return unit.Angle(math.Acos(max(-1, min(1, a.Dot(beam))))) } // rounding only
	return bodyAngles{between(sun), between(moon), sun.Dot(f.Up) > sinHorizon, moon.Dot(f.Up) > sinHorizon}
}

// bodyNoise is what the Sun and the Moon add to the antenna temperature of a link. It
// is a NoiseModel.
type bodyNoise struct {
	link      *Link
	sun, moon *riseCurve // nil: left out
}

// addBodies adds the noise of the Sun and the Moon where they are asked for and the
// antenna's gain and beamwidth are known.
func (l *Link) addBodies() error {
	if l.spec.Bodies == nil || l.spec.Sun == nil && l.spec.Moon == nil || l.gain == nil || l.beamwidth == 0 {
		return nil
	}
	n := &bodyNoise{link: l}
	var err error
	if d := l.spec.Sun; d != nil {
		if n.sun, err = newRiseCurve(*d, l.beamwidth); err != nil {
			return err
		}
	}
	if d := l.spec.Moon; d != nil {
		if n.moon, err = newRiseCurve(*d, l.beamwidth); err != nil {
			return err
		}
	}
	// A new slice: the caller's must not change.
	l.spec.NoiseModels = append(append([]NoiseModel(nil), l.spec.NoiseModels...), n)
	return nil
}

// Parts implements NoiseModel.
func (n *bodyNoise) Parts() []NoisePart {
	var out []NoisePart
	add := func(c *riseCurve, name string) {
		if c != nil {
			out = append(out, NoisePart{Name: name, Source: "brightness over the disc times the antenna's pattern, through the air"})
		}
	}
	add(n.sun, "Sun")
	add(n.moon, "Moon")
	return out
}

// Kelvins implements NoiseModel.
func (n *bodyNoise) Kelvins(g *Geometry, into []float64) error {
	l, i := n.link, 0
	put := func(c *riseCurve, off unit.Angle, up bool) {
		if c == nil {
			return
		}
		into[i] = 0
		if up && off <= c.last { // never for an angle that is not known
			into[i] = c.at(off) * unit.DB(l.gain.Value(g.Elevation)-l.gainLoss).Ratio() * g.throughAir(l.spec.ClearSky)
		}
		i++
	}
	put(n.sun, g.bodies.sun, g.bodies.sunUp)
	put(n.moon, g.bodies.moon, g.bodies.moonUp)
	return nil
}

// throughAir is the share of a body's noise that gets through the air; 1 without a
// path.
func (g *Geometry) throughAir(clear bool) float64 {
	switch {
	case g.airOf == nil:
		return 1
	case clear:
		return transmission(g.air.ClearGas)
	}
	return transmission(g.air.Gas + g.air.Cloud + g.air.Rain)
}

// Notes implements NoiseModel.
func (n *bodyNoise) Notes() []Note {
	var out []Note
	if n.sun != nil {
		d := n.link.spec.Sun
		out = append(out, Note{Assumption, fmt.Sprintf("the Sun in the beam: %.4g K evenly over its disc, dimmed by the air; side lobes are left out", d.Brightness.Kelvins())})
	}
	return out
}

// riseCurve is the rise of the antenna temperature in K at a gain of 0 dBi, over the
// angle off the axis.
type riseCurve struct {
	last  unit.Angle // beyond it there is nothing
	step  float64
	value []float64
}

// riseNodes keeps the cubic between the nodes within 1e-4 of the rise on the axis
// (TestRiseCurve).
const riseNodes = 96

func newRiseCurve(d propagation.Disc, beamwidth unit.Angle) (*riseCurve, error) {
	last := min(d.Diameter/2+2*beamwidth, 180*unit.Degree)
	c := &riseCurve{last: last, step: last.Radians() / (riseNodes - 1), value: make([]float64, riseNodes)}
	for i := range c.value {
		off := min(unit.Angle(float64(i)*c.step), last)
		t, err := propagation.AntennaRise(d, 0, beamwidth, off)
		if err != nil {
			return nil, err
		}
		c.value[i] = t.Kelvins()
	}
	return c, nil
}

// at returns the rise at an angle of 0 to last, cubic through four nodes.
func (c *riseCurve) at(off unit.Angle) float64 {
	x := off.Radians() / c.step
	i := max(0, min(int(x), riseNodes-2))
	u := x - float64(i)
	before := c.value[1] // the curve is even about the axis
	if i > 0 {
		before = c.value[i-1]
	}
	after := 0.0
	if i+2 < riseNodes {
		after = c.value[i+2]
	}
	a, b := c.value[i], c.value[i+1]
	return max(0, a+u*((b-before)/2+u*(before-2.5*a+2*b-after/2+u*(1.5*(a-b)+(after-before)/2))))
}
