package station

import (
	"fmt"

	"slantwise/orbit/unit"
)

// Cascade is the noise of a station referred to the input of the first amplifier:
// the antenna temperature falls by the losses in front of it, each dissipative loss
// emits at the physical temperature, and each later stage counts less by the gain
// before it. Ts = Ta/L + Tp (1 - 1/L) + Te (Kolawole, Satellite Communication
// Engineering, Marcel Dekker 2002, eqs 3.50 to 3.55); Te = T1 + T2/G1 + ….
type Cascade struct {
	AntennaShare float64 // of the antenna temperature that reaches the amplifier, (0, 1]
	Parts        []NoiseSource
}

// NoiseSource is one contributor, in K at the first amplifier's input.
type NoiseSource struct {
	Name   string
	Kelvin float64
	Source string
}

// SystemKelvin returns the system noise temperature for an antenna temperature: the
// antenna's share first, then the parts in their order.
func (c *Cascade) SystemKelvin(antenna float64) float64 {
	sum := antenna * c.AntennaShare
	for i := range c.Parts {
		sum += c.Parts[i].Kelvin
	}
	return sum
}

// Cascade prepares the noise of an antenna: extra losses stand in front of the feed
// loss; those that are not dissipative neither attenuate noise nor emit.
func (n *Noise) Cascade(feed unit.DB, extra []Loss) *Cascade {
	c := &Cascade{AntennaShare: 1}
	physical := n.Physical().Kelvins()
	for _, l := range extra {
		if l.Dissipative {
			c.emit(l.Name, l.Loss, physical)
		}
	}
	c.emit("feed loss", feed, physical)
	gain := 1.0
	for _, s := range n.Chain {
		t, source := s.kelvin(physical)
		c.Parts = append(c.Parts, NoiseSource{s.Name, t / gain, source})
		gain *= s.Gain.Ratio()
	}
	return c
}

// emit puts a passive loss behind what is there already.
func (c *Cascade) emit(name string, loss unit.DB, physical float64) {
	if loss == 0 {
		return
	}
	share := 1 / loss.Ratio()
	c.AntennaShare *= share
	for i := range c.Parts {
		c.Parts[i].Kelvin *= share
	}
	c.Parts = append(c.Parts, NoiseSource{name, physical * (1 - share),
		fmt.Sprintf("%.2f dB at %g K", float64(loss), physical)})
}

// Physical returns the physical temperature of what is passive, 290 K where the
// input left it out.
func (n *Noise) Physical() unit.Temperature {
	if n == nil || n.PhysicalTemperature == 0 {
		return unit.ReferenceTemperature
	}
	return n.PhysicalTemperature
}

// kelvin returns the stage's noise temperature at its own input.
func (s Stage) kelvin(physical float64) (t float64, source string) {
	switch {
	case s.NoiseTemperature != nil:
		return s.NoiseTemperature.Kelvins(), fmt.Sprintf("noise temperature %g K", s.NoiseTemperature.Kelvins())
	case s.NoiseFigure != nil:
		return NoiseFigureTemperature(*s.NoiseFigure).Kelvins(), fmt.Sprintf("noise figure %g dB against 290 K", float64(*s.NoiseFigure))
	}
	return physical * (1/s.Gain.Ratio() - 1), fmt.Sprintf("passive, %g dB at %g K", -float64(s.Gain), physical)
}

// NoiseFigureTemperature returns 290 K (F - 1).
func NoiseFigureTemperature(f unit.DB) unit.Temperature {
	return unit.Temperature(unit.ReferenceTemperature.Kelvins() * (f.Ratio() - 1))
}
