package station

import "slantwise/orbit/unit"

// Noise describes where a station's noise comes from: the antenna temperature with
// the receiver's stages, or the system noise temperature as measured at the first
// amplifier's input.
type Noise struct {
	PhysicalTemperature unit.Temperature // of the feed, of passive stages and dissipative losses; 0: 290 K, said in the notes
	AntennaTemperature  *Tabulated       // K at the antenna's flange, clear sky and spill-over in it
	Chain               []Stage          // from the first amplifier on
	SpillOver           *Tabulated       // share of the pattern's power that meets the ground, 0 to 1; in place of AntennaTemperature, which is then worked out from the sky
	GroundTemperature   unit.Temperature // brightness of the ground beside SpillOver; 0: as PhysicalTemperature
	SystemTemperature   *Tabulated       // K as measured; in place of AntennaTemperature and Chain
}

// Ground returns how bright the ground is.
func (n *Noise) Ground() unit.Temperature {
	if n.GroundTemperature > 0 {
		return n.GroundTemperature
	}
	return n.Physical()
}

// Stage is one stage of a receiver. A stage with a gain below 0 dB and neither
// noise temperature nor noise figure is passive and at the physical temperature.
type Stage struct {
	Name             string
	Gain             unit.DB           // of the last stage it does not matter
	NoiseTemperature *unit.Temperature // referred to the stage's own input
	NoiseFigure      *unit.DB          // against 290 K
}
