package station

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
)

// example is a published example of testdata/link/noise_examples.csv: its inputs and
// results by quantity, one case after the other.
type example struct {
	inputs  map[string]float64
	results map[string]tableRow
}

func readExamples(t *testing.T) map[string]*example {
	all := map[string]*example{}
	for _, r := range readTable(t, "noise_examples.csv") {
		key := r["case"]
		if all[key] == nil {
			all[key] = &example{map[string]float64{}, map[string]tableRow{}}
		}
		switch {
		case r["role"] == "result":
			all[key].results[r["quantity"]] = r
		case r["published_value"] != "":
			all[key].inputs[r["quantity"]] = r.number(t, "published_value")
		}
	}
	return all
}

// stages makes a chain of noise temperatures in K and gains in dB, by turns.
func stages(v ...float64) []Stage {
	var out []Stage
	for i := 0; i+1 < len(v); i += 2 {
		out = append(out, Stage{Name: "stage", NoiseTemperature: kelvin(v[i]), Gain: unit.DB(v[i+1])})
	}
	return out
}

func ratioDB(r float64) unit.DB { return unit.DB(10 * math.Log10(r)) }

// The 15 examples of cascades and G/T. Each answer is compared with recomputed_value,
// from the printed inputs, to half its last digit; and with the printed answer where
// it was seen, to half of that one's last digit and 1e-3 for roundings on the way.
func TestPublishedNoiseExamples(t *testing.T) {
	all := readExamples(t)
	got := map[string]map[string]float64{}
	system := func(n Noise, antenna float64, feed unit.DB) float64 {
		return n.Cascade(feed, nil).SystemKelvin(antenna)
	}

	c := all["two stages"].inputs
	figure := Stage{Name: "receiver", NoiseFigure: db(c["receiver noise figure"])}
	got["two stages"] = map[string]float64{"noise temperature at lna input": system(Noise{Chain: append(stages(c["lna noise temperature"], c["lna gain"]), figure)}, 0, 0)}

	c = all["cable after lna"].inputs
	cable := Stage{Name: "cable", Gain: unit.DB(-c["cable loss after lna"])}
	figure = Stage{Name: "receiver", NoiseFigure: db(c["receiver noise figure"])}
	got["cable after lna"] = map[string]float64{"system noise temperature at lna input": system(Noise{Chain: append(stages(c["lna noise temperature"], c["lna gain"]), cable, figure)}, c["antenna noise temperature"], 0)}

	c = all["cable before lna"].inputs
	loss := unit.DB(c["cable loss before lna"])
	figure = Stage{Name: "receiver", NoiseFigure: db(c["receiver noise figure"])}
	got["cable before lna"] = map[string]float64{"system noise temperature at cable input (antenna flange)": loss.Ratio() * system(Noise{Chain: append(stages(c["lna noise temperature"], c["lna gain"]), figure)}, c["antenna noise temperature"], loss)}

	c = all["noise power"].inputs // which takes the Boltzmann constant as 1.38e-23 J/K
	k := 1.38e-23 * system(Noise{Chain: stages(c["receiver noise temperature"], 0)}, c["antenna noise temperature"], 0)
	got["noise power"] = map[string]float64{"noise density": k * 1e21, "noise power": k * c["bandwidth"] * 1e6 * 1e12}

	c = all["three stages"].inputs
	te := system(Noise{Chain: stages(c["rf stage noise temperature"], c["rf stage gain"], c["down-converter noise temperature"], c["down-converter gain"], c["if stage noise temperature"], c["if stage gain"])}, 0, 0)
	got["three stages"] = map[string]float64{"effective noise temperature": te, "noise factor": 1 + te/290}

	c = all["feeder before receiver"].inputs
	cas := (&Noise{PhysicalTemperature: unit.Temperature(c["feeder physical temperature"]), Chain: stages(c["receiver noise temperature"], 0)}).Cascade(ratioDB(c["feeder loss"]), nil)
	got["feeder before receiver"] = map[string]float64{
		"antenna contribution at receiver input": c["antenna noise temperature"] * cas.AntennaShare,
		"feeder contribution at receiver input":  cas.Parts[0].Kelvin,
		"total at receiver input":                cas.SystemKelvin(c["antenna noise temperature"])}

	c = all["feeder loss 0 and 1.5 dB"].inputs
	n := Noise{PhysicalTemperature: unit.Temperature(c["feeder physical temperature"]), Chain: stages(c["receiver noise temperature"], 0)}
	got["feeder loss 0 and 1.5 dB"] = map[string]float64{
		"system noise temperature case a (no feeder loss)": system(n, c["antenna noise temperature"], 0),
		"system noise temperature case b":                  system(n, c["antenna noise temperature"], ratioDB(c["feeder loss case b"]))}

	c = all["g/t at lna input"].inputs
	n = Noise{PhysicalTemperature: unit.Temperature(c["feeder physical temperature"]), Chain: stages(c["lna noise temperature"], c["lna gain"], c["later stages noise temperature"], 0)}
	loss = ratioDB(c["feeder loss as used"])
	ts := system(n, c["antenna noise temperature"], loss)
	// The example takes the gain down by the printed 0.5 dB at the first plane, and by nothing at the flange.
	got["g/t at lna input"] = map[string]float64{"system noise temperature at lna input": ts, "G/T": c["antenna gain"] - c["feeder loss"] - 10*math.Log10(ts)}
	flange := ts * loss.Ratio()
	got["g/t at antenna flange"] = map[string]float64{"system noise temperature at antenna flange": flange, "G/T": c["antenna gain"] - 10*math.Log10(flange)}

	c = all["earth station g/t"].inputs
	gain := float64(DishGain(unit.Length(c["dish diameter"]), unit.Frequency(c["frequency"])*unit.Megahertz, c["aperture efficiency"]/100))
	got["earth station g/t"] = map[string]float64{"antenna gain": gain,
		"G/T clear": gain - 10*math.Log10(c["system noise temperature clear sky"]),
		"G/T rain":  gain - 10*math.Log10(c["system noise temperature heavy rain"])}

	c = all["noise figure to temperature"].inputs
	got["noise figure to temperature"] = map[string]float64{"noise temperature": NoiseFigureTemperature(unit.DB(c["noise figure"])).Kelvins()}

	c = all["feed-horn loss"].inputs
	loss = unit.DB(c["loss before lna"])
	cas = (&Noise{Chain: stages(c["lna noise temperature"], 0)}).Cascade(loss, nil)
	atLNA := c["sky noise temperature"]*cas.AntennaShare + cas.Parts[0].Kelvin
	got["feed-horn loss"] = map[string]float64{"antenna noise temperature at lna input": atLNA,
		"G/T": c["antenna gain"] - float64(loss) - 10*math.Log10(cas.SystemKelvin(c["sky noise temperature"]))}

	c = all["three stages, mixer gain 0 dB"].inputs
	mixer := func(gain float64) float64 {
		// The example takes the 23 dB of the first stage as a ratio of 200.
		return system(Noise{Chain: stages(c["rf noise temperature"], 10*math.Log10(200), c["mixer noise temperature"], gain, c["if noise temperature"], 0)}, c["input noise temperature"], 0)
	}
	got["three stages, mixer gain 0 dB"] = map[string]float64{"system noise temperature": mixer(c["mixer gain"])}
	got["three stages, mixer loss 10 dB"] = map[string]float64{"system noise temperature": mixer(all["three stages, mixer loss 10 dB"].inputs["same inputs, mixer gain"])}

	c = all["waveguide before lna"].inputs
	n = Noise{PhysicalTemperature: unit.Temperature(c["waveguide physical temperature"]), Chain: stages(c["rf noise temperature"], c["rf gain"], c["mixer noise temperature"], c["mixer gain"], c["if noise temperature"], 0)}
	got["waveguide before lna"] = map[string]float64{"system noise temperature at lna input": system(n, c["input noise temperature"], unit.DB(c["waveguide loss"]))}

	for name, e := range all {
		for quantity, r := range e.results {
			v, ok := got[name][quantity]
			if !ok {
				t.Errorf("%s: %s is not checked", name, quantity)
				continue
			}
			if want := r.number(t, "recomputed_value"); math.Abs(v-want) > halfDigit(r["recomputed_value"])*1.02 {
				t.Errorf("%s, %s: got %.6g, want %s from the inputs", name, quantity, v, r["recomputed_value"])
			}
			if r["provenance"] != "seen-secondary" {
				continue
			}
			if want := r.number(t, "published_value"); math.Abs(v-want) > halfDigit(r["published_value"])+0.01 {
				t.Errorf("%s, %s: got %.6g, printed %s", name, quantity, v, r["published_value"])
			}
		}
	}
	if len(all) != 15 {
		t.Errorf("%d examples, want 15", len(all))
	}
}

// Kolawole's rule by hand for every kind of part: a dissipative loss of 3 dB in front
// of a feed of 3 dB halves the antenna's noise twice (derived).
func TestCascadeOrder(t *testing.T) {
	three := unit.DB(10 * math.Log10(2))
	n := Noise{PhysicalTemperature: 300, Chain: []Stage{
		{Name: "amplifier", NoiseTemperature: kelvin(50), Gain: 20},
		{Name: "cable", Gain: -three},
		{Name: "receiver", NoiseFigure: &three},
	}}
	c := n.Cascade(three, []Loss{{"radome", three, true}, {"misfit", 1, false}})
	want := map[string]float64{"radome": 300 * 0.5 * 0.5, "feed loss": 150, "amplifier": 50, "cable": 300.0 / 100, "receiver": 290.0 / 50}
	if math.Abs(c.AntennaShare-0.25) > 1e-12 {
		t.Errorf("the antenna's share is %g, want 0.25", c.AntennaShare)
	}
	sum := 100 * 0.25
	for _, p := range c.Parts {
		if w, ok := want[p.Name]; !ok || math.Abs(p.Kelvin-w) > 1e-9 {
			t.Errorf("%s: got %g K, want %g K", p.Name, p.Kelvin, w)
		}
		sum += p.Kelvin
	}
	if len(c.Parts) != len(want) || c.SystemKelvin(100) != sum {
		t.Errorf("%d parts, %g K in all; want %d and %g", len(c.Parts), c.SystemKelvin(100), len(want), sum)
	}
}
