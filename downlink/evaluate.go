package downlink

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// scratch is the working space of one evaluation after the other: a goroutine has
// its own.
type scratch struct {
	geometry     Geometry // here, as a model could keep it and so it would be allocated for each sample
	terms, noise []float64
	rangeDB      float64 // 20 log10 of the range in m
	result       result
}

// sphereDB is 10 log10(4π), the spreading loss at 1 m in dB(m²).
var sphereDB = 10 * math.Log10(4*math.Pi)

func (l *Link) newScratch() *scratch {
	return &scratch{terms: make([]float64, len(l.terms)), noise: make([]float64, len(l.noise.parts))}
}

// result is the numbers of one evaluation beside the terms and the noise parts.
type result struct {
	receivedDBm, fluxDBWM2            float64
	systemK, gOverT, cn0, ebn0        float64
	margin, marginOver, achievableBps float64
	limit                             RateLimit
	usable                            bool
	pointing                          unit.Angle         // off the beam's axis, all errors together
	look                              station.LookSpread // by the orbit's error; NaN where it is not known
	sureError                         unit.Angle         // not exceeded with SureProbability; NaN where the orbit does not lead the beam
}

// evaluate is the one evaluator behind Budget and Profile; the geometry is the
// scratch's.
func (l *Link) evaluate(s *scratch) error {
	g, r := &s.geometry, &s.result
	if err := l.fillTerms(g, s); err != nil {
		return err
	}
	received, radiated := 0.0, 0.0
	for i := range l.terms {
		if i == l.eirpTerms {
			radiated = received
		}
		// The conversion keeps a fused multiply-add from changing the sum.
		received += float64(float64(l.terms[i].Sign) * s.terms[i])
	}
	g.bodies = l.lookAtBodies(g)
	r.fluxDBWM2 = radiated - 30 - sphereDB - s.rangeDB
	if err := l.noiseAndRatio(g, s, received); err != nil {
		return err
	}
	l.marginAndRate(r)
	return nil
}

// fillTerms writes the value of every term.
func (l *Link) fillTerms(g *Geometry, s *scratch) error {
	v := s.terms
	copy(v, l.base)
	if l.pattern != nil {
		gain, ok := l.transmitGain(g)
		if !ok {
			return l.noTransmitGain(g)
		}
		v[l.slots.craftGain] = float64(gain)
	}
	s.rangeDB = 20 * math.Log10(g.Range.Metres())
	v[l.slots.freeSpace] = l.waveNumberDB + s.rangeDB
	at := l.slots.path
	for i, m := range l.spec.PathModels {
		n := l.pathCounts[i]
		if err := m.Losses(g, v[at:at+n]); err != nil {
			return err
		}
		at += n
	}
	if i := l.slots.stationGain; i >= 0 {
		v[i] = l.gain.Value(g.Elevation)
	}
	return l.fillPointing(g, s)
}

// transmitGain is the gain of an antenna that depends on the direction.
func (l *Link) transmitGain(g *Geometry) (unit.DB, bool) {
	if l.spin != nil {
		return l.spin.at(g.BodyOffZ.Radians())
	}
	return l.pattern.gainToward(g.OffBoresight.Radians(), g.AroundBoresight.Radians())
}

// fillPointing finds how far off the beam's axis the spacecraft stands.
func (l *Link) fillPointing(g *Geometry, s *scratch) error {
	a := l.spec.Antenna
	e := a.PointingRMS
	if l.slots.pointing >= 0 {
		if math.IsNaN(g.Azimuth.Radians()) && a.Boresight.Elevation != 90*unit.Degree {
			return errNoAzimuth
		}
		to := station.Direction{Azimuth: g.Azimuth, Elevation: g.Elevation}
		if math.IsNaN(g.Azimuth.Radians()) {
			to.Azimuth = a.Boresight.Azimuth // from the zenith every azimuth is the same
		}
		off := station.AngleBetween(a.Boresight, to).Radians()
		e = unit.Angle(math.Sqrt(off*off + e.Radians()*e.Radians()))
		s.terms[l.slots.pointing] = float64(station.PointingLoss(e, l.beamwidth))
	}
	e, err := l.fillOrbitPointing(g, s, e)
	if err != nil {
		return err
	}
	s.result.pointing = e
	s.result.usable = l.beamwidth == 0 || station.InMainLobe(e, l.beamwidth)
	return nil
}

// noiseAndRatio fills received power, noise, G/T and C/N0. sum is that of all terms.
func (l *Link) noiseAndRatio(g *Geometry, s *scratch, sum float64) error {
	r := &s.result
	k := float64(unit.BoltzmannDB)
	if l.noise.kind == noiseUnknown {
		r.receivedDBm, r.systemK = math.NaN(), math.NaN()
		r.gOverT = l.noise.first.Value(g.Elevation)
		r.cn0 = sum - 30 + r.gOverT - k
		return nil
	}
	gain, loss := l.receiving(g, s)
	t, err := l.evaluateNoise(g, gain, s.noise)
	if err != nil {
		return err
	}
	if !(t > 0) {
		return &unit.RangeError{Quantity: "system noise temperature", Value: t, Unit: "K", Allowed: "greater than 0 K", Next: "give the receiver's stages their noise"}
	}
	tDB := 10 * math.Log10(t)
	r.receivedDBm, r.systemK = sum, t
	r.gOverT = gain - loss - tDB
	r.cn0 = sum - 30 - k - tDB
	return nil
}

// marginAndRate fills what follows from C/N0.
func (l *Link) marginAndRate(r *result) {
	t := &l.spec.Transmitter
	r.ebn0, r.margin, r.marginOver = math.NaN(), math.NaN(), math.NaN()
	if rate := l.dataRate(); rate > 0 {
		r.ebn0 = r.cn0 - 10*math.Log10(rate.BitsPerSecond())
		r.margin = r.ebn0 - float64(t.ImplementationLoss) - float64(l.mode.Required)
		r.marginOver = r.margin - float64(t.RequiredMargin)
	}
	r.achievableBps, r.limit = l.achievable(r.cn0, r.usable)
}
