package downlink

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Direction tells which end of the link sends.
func (l *Link) Direction() Direction {
	if l.spec.Receiver != nil {
		return Up
	}
	return Down
}

func (l *Link) up() bool { return l.spec.Receiver != nil }

// who names the spacecraft's end of the link, antennaName its antenna.
func (l *Link) who() string { return [...]string{"transmitter", "uplink"}[l.Direction()] }
func (l *Link) antennaName() string {
	return [...]string{"transmit", "receive"}[l.Direction()] + " antenna"
}

// addSent adds the terms of a station that sends, up to its EIRP.
func (l *Link) addSent() {
	a, t := l.spec.Antenna, l.spec.Antenna.Transmit
	l.add("transmit power", 1, "dBm", t.Power.DBm(), "scenario, at the station")
	l.loss("transmit line loss", t.LineLoss, "scenario, at the station")
	l.addStationGain()
	if l.beamwidth > 0 {
		l.addPointing()
	}
	l.addStationLosses()
	l.setGainLoss(a)
}

// addArrived adds the terms of the spacecraft that receives. Where its antenna is not
// known (a G/T alone) they end with what falls on it.
func (l *Link) addArrived() {
	r := l.spec.Receiver
	if !r.AntennaUnknown {
		l.addCraftGain()
		l.loss("line loss", r.LineLoss, "scenario, at the spacecraft")
	}
	for _, x := range r.ExtraLosses {
		l.loss(x.Name, x.Loss, "scenario, at the spacecraft")
	}
}

// buildCraftNoise lays the noise of the spacecraft's receiver down: it does not change
// with the geometry.
func (l *Link) buildCraftNoise() {
	r, p := l.spec.Receiver, &l.noise
	p.kind, p.share = noiseOfCraft, 1
	switch n := r.Noise; {
	case r.AntennaUnknown:
		p.kind, p.first = noiseUnknown, station.Constant(float64(*r.GOverT))
		return
	case r.GOverT != nil:
		gain, _ := r.Pattern.gainToward(0, 0)
		t := unit.DB(float64(gain) - float64(r.LineLoss) - float64(*r.GOverT)).Ratio()
		p.add(NoisePart{"system, implied", unit.Temperature(t), "gain on boresight after the line loss less the stated G/T"})
	case r.Sensitivity != nil:
		s := r.Sensitivity
		p.add(NoisePart{"system, implied", r.ImpliedNoise(), fmt.Sprintf("the sensitivity of %g dBm over its rate of %g bit/s, the required Eb/N0, the implementation loss and Boltzmann's constant", roundTo(s.Power.DBm(), 9), s.Rate.BitsPerSecond())})
	case n.SystemTemperature != nil:
		p.add(NoisePart{"system, as stated", unit.Temperature(n.SystemTemperature.Value(0)), "scenario"})
	default:
		c := n.Cascade(r.LineLoss, nil)
		p.add(NoisePart{"antenna", unit.Temperature(n.AntennaTemperature.Value(0) * c.AntennaShare), fmt.Sprintf("antenna temperature, times %.4f for the losses in front of the receiver", c.AntennaShare)})
		for _, s := range c.Parts {
			p.add(NoisePart{s.Name, unit.Temperature(s.Kelvin), s.Source})
		}
	}
	p.models = len(p.parts)
}

// receiving returns the gain of the receiving antenna after surface and blockage, and
// the loss from there to the receiver, in dB.
func (l *Link) receiving(g *Geometry, s *scratch) (gain, loss float64) {
	if l.up() {
		return s.terms[l.slots.craftGain], float64(l.spec.Receiver.LineLoss)
	}
	return l.gain.Value(g.Elevation) - l.gainLoss, float64(l.spec.Antenna.FeedLoss)
}

// noteReceiver says what is taken for granted of the spacecraft's receiver.
func (l *Link) noteReceiver() {
	r := l.spec.Receiver
	l.note(Assumption, "uplink: the station sends; received power and system noise are at the input of the spacecraft's receiver, after its line loss")
	l.note(Assumption, "power flux density: the whole carrier in free space at the spacecraft, all losses of the station taken off")
	if r.AntennaUnknown {
		l.note(Warning, "the spacecraft's G/T is used unchanged in every direction; its antenna is not known, so that received power and system noise do not exist")
		return
	}
	l.noteCraftAntenna()
	switch {
	case r.GOverT != nil:
		l.note(Assumption, "G/T of the spacecraft as stated holds on its antenna's boresight; off it the gain falls by the pattern and the noise stays")
	case r.Sensitivity != nil:
		l.noteSensitivity()
	case r.Noise.SystemTemperature == nil:
		l.note(Assumption, "system noise of the spacecraft: a cascade with all temperatures referred to the receiver's input; the antenna temperature is the one stated, whatever the Earth and the Sun do in its beam")
	}
	if r.Attitude == AttitudeTumbling {
		l.note(Assumption, "attitude tumbling: the gain in the budget may not be had at the moment in which a command is sent; send it more than once")
	}
}

func (l *Link) noteSensitivity() {
	r := l.spec.Receiver
	m, _ := r.sensitiveMode()
	t := r.ImpliedNoise().Kelvins()
	l.note(Assumption, "sensitivity %g dBm at %g bit/s in mode %q, understood as: there Eb/N0 is the required %.2f dB and the implementation loss of %g dB, so that the system noise at the receiver's input is %.4g K; at that rate the margin is the received power over the sensitivity",
		roundTo(r.Sensitivity.Power.DBm(), 9), r.Sensitivity.Rate.BitsPerSecond(), m.Name, float64(m.Required), float64(r.ImplementationLoss), t)
	if t < referenceNoise {
		l.note(Warning, "the sensitivity implies a system noise of %.4g K, less than the 290 K of the source that receivers are measured with: no receiver does so; look at its rate, its mode and the implementation loss", t)
	}
}

// referenceNoise is the temperature of the source that noise figures and sensitivities
// are measured with (IEEE), K.
const referenceNoise = 290.0

// roundTo rounds to so many decimals, for figures that went through a conversion.
func roundTo(v float64, decimals int) float64 {
	p := math.Pow(10, float64(decimals))
	return math.Round(v*p) / p
}
