package downlink

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// noisePlan is how a link's system noise is put together, in K at the first
// amplifier's input: what the antenna brings, the models' additions, the rest.
type noisePlan struct {
	parts  []NoisePart        // in their order; temperatures as in base
	base   []float64          // 0 where it changes with the geometry
	models int                // place of the models' first contribution
	counts []int              // how many parts each model has
	share  float64            // of what comes in at the antenna that reaches the amplifier
	first  *station.Tabulated // the first part's own quantity, see kind; nil: the models bring it
	kind   noiseKind
}

type noiseKind int

const (
	noiseCascade noiseKind = iota // first is the antenna temperature, to be taken times share
	noiseSystem                   // first is the system noise temperature as measured
	noiseGOverT                   // first is G/T in dB/K, the noise is the one implied
	noiseUnknown                  // first is G/T, and the gain is not known: there is no noise to show
	noiseOfCraft                  // of the spacecraft's receiver in an uplink, all of it in base
)

func (l *Link) buildNoise() {
	if l.up() {
		l.buildCraftNoise()
		return
	}
	a, f := l.spec.Antenna, l.Frequency()
	bare := &station.Noise{PhysicalTemperature: a.Noise.Physical()}
	front := bare.Cascade(a.FeedLoss, a.ExtraLosses) // losses alone
	p := &l.noise
	p.share = front.AntennaShare
	var rest []station.NoiseSource
	first := NoisePart{}
	switch n := a.Noise; {
	case a.GOverT != nil:
		p.kind, p.first = noiseGOverT, a.GOverT.AtFrequency(f)
		first = NoisePart{Name: "system, implied", Source: "gain after the feed loss less the measured G/T" + measuredWhen(a.Measurement)}
		rest = front.Parts
		if a.FeedLoss > 0 { // the last part; a measured G/T holds the feed's noise
			rest = rest[:len(rest)-1]
		}
		if l.gain == nil {
			p.kind = noiseUnknown
			return
		}
	case n.SystemTemperature != nil:
		p.kind, p.first = noiseSystem, n.SystemTemperature.AtFrequency(f)
		first = NoisePart{Name: "system, as measured", Source: "scenario" + measuredWhen(a.Measurement)}
	case n.AntennaTemperature == nil: // the noise models bring all that the antenna takes in
		p.kind = noiseCascade
		rest = n.Cascade(a.FeedLoss, a.ExtraLosses).Parts
	default:
		p.kind, p.first = noiseCascade, n.AntennaTemperature.AtFrequency(f)
		first = NoisePart{Name: "antenna", Source: fmt.Sprintf("antenna temperature, clear sky and spill-over in it, times %.4f for the losses in front of the amplifier", p.share)}
		rest = n.Cascade(a.FeedLoss, a.ExtraLosses).Parts
	}
	if p.first != nil {
		p.add(first)
	}
	p.models = len(p.parts)
	for _, m := range l.spec.NoiseModels {
		parts := m.Parts()
		p.counts = append(p.counts, len(parts))
		for _, part := range parts {
			part.Temperature = 0
			p.add(part)
		}
	}
	for _, s := range rest {
		p.add(NoisePart{s.Name, unit.Temperature(s.Kelvin), s.Source})
	}
}

func (p *noisePlan) add(part NoisePart) {
	p.parts = append(p.parts, part)
	p.base = append(p.base, part.Temperature.Kelvins())
}

// firstNoise is the part that stands in a table, in K.
func (l *Link) firstNoise(g *Geometry, gainDBi float64) float64 {
	p := &l.noise
	v := p.first.Value(g.Elevation)
	switch p.kind {
	case noiseCascade:
		return v * p.share
	case noiseGOverT:
		return math.Pow(10, (gainDBi-float64(l.spec.Antenna.FeedLoss)-v)/10)
	}
	return v
}

// evaluateNoise fills into with the parts at a geometry; gainDBi is the antenna's
// gain after surface and blockage. It returns their sum in K, NaN where the noise is
// not known.
func (l *Link) evaluateNoise(g *Geometry, gainDBi float64, into []float64) (float64, error) {
	p := &l.noise
	if p.kind == noiseUnknown {
		return math.NaN(), nil
	}
	copy(into, p.base)
	if p.first != nil {
		into[0] = l.firstNoise(g, gainDBi)
	}
	at := p.models
	for i, m := range l.spec.NoiseModels {
		n := p.counts[i]
		if err := m.Kelvins(g, into[at:at+n]); err != nil {
			return 0, err
		}
		for i := at; i < at+n; i++ {
			into[i] *= p.share
		}
		at += n
	}
	sum := 0.0
	for _, k := range into {
		sum += k
	}
	return sum, nil
}
