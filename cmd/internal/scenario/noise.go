package scenario

import (
	"slantwise/orbit/unit"
	"slantwise/station"
)

var (
	noiseKeys = []string{"physical_temperature_k", "antenna_temperature_k", "spill_over_fraction", "ground_temperature_k", "system_temperature_k", "receiver_chain"}
	stageKeys = []string{"name", "gain_db", "noise_temperature_k", "noise_figure_db"}
)

// defaultPhysicalTemperature is the reference of noise figures, IEEE's 290 K.
const defaultPhysicalTemperature = 290 * unit.Kelvin

// noise reads where a station's noise comes from, nil where nothing is said.
func (o object) noise(measuredGOverT bool) *station.Noise {
	if !o.has("noise") {
		if !measuredGOverT {
			o.missing("noise", "antenna temperature and receiver chain, or g_over_t_db_k as measured")
		}
		return nil
	}
	c := o.child("noise", noiseKeys)
	n := &station.Noise{PhysicalTemperature: defaultPhysicalTemperature}
	if v, ok := c.number("physical_temperature_k", above(0, 1000, "K")); ok {
		n.PhysicalTemperature = unit.Temperature(v)
	} else if c.node != nil && !c.has("physical_temperature_k") {
		c.assume("physical_temperature_k left out: %g K", float64(defaultPhysicalTemperature))
	}
	if measuredGOverT {
		c.useless("beside g_over_t_db_k, which holds all noise", "antenna_temperature_k", "spill_over_fraction", "ground_temperature_k", "system_temperature_k", "receiver_chain")
		return n
	}
	if c.has("system_temperature_k") {
		c.useless("beside system_temperature_k, which holds it", "antenna_temperature_k", "spill_over_fraction", "ground_temperature_k", "receiver_chain")
		n.SystemTemperature = c.tabulated("system_temperature_k", above(0, 1e6, "K"))
		return n
	}
	switch which, _ := c.exclusive("antenna_temperature_k", "spill_over_fraction"); which {
	case "antenna_temperature_k":
		n.AntennaTemperature = c.tabulated(which, atLeast(0, 1e6, "K"))
		c.useless("beside antenna_temperature_k, which holds the ground", "ground_temperature_k")
	case "spill_over_fraction":
		n.SpillOver = c.tabulated(which, atLeast(0, 1, ""))
		n.GroundTemperature = unit.Temperature(c.numberOr("ground_temperature_k", above(0, 400, "K"), 0))
		if !c.has("ground_temperature_k") {
			c.assume("ground_temperature_k left out: as bright as the physical temperature")
		}
	default:
		c.missing("antenna_temperature_k", "one figure, or rows of [elevation in deg, K]; or spill_over_fraction, for an antenna temperature that is worked out from the sky")
	}
	n.Chain = c.chain()
	return n
}

func (o object) chain() []station.Stage {
	if !o.has("receiver_chain") {
		o.missing("receiver_chain", "the stages from the first amplifier on")
	}
	items := o.objects("receiver_chain", "stages", maxParts, stageKeys)
	called := names("stage", items)
	var out []station.Stage
	for i, it := range items {
		s := station.Stage{Name: called[i]}
		s.Gain = unit.DB(it.required("gain_db", span{low: -200, high: 200, unit: "dB"}, "the stage's gain, negative for a loss"))
		which, given := it.exclusive("noise_temperature_k", "noise_figure_db")
		switch {
		case !given:
			if s.Gain > 0 {
				it.missing("noise_temperature_k", "the noise of a stage with gain, or noise_figure_db")
			}
		case which == "noise_temperature_k":
			if v, ok := it.number(which, atLeast(0, 1e7, "K")); ok {
				t := unit.Temperature(v)
				s.NoiseTemperature = &t
			}
		default:
			if v, ok := it.number(which, atLeast(0, 100, "dB")); ok {
				f := unit.DB(v)
				s.NoiseFigure = &f
			}
		}
		out = append(out, s)
	}
	return out
}
