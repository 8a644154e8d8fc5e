package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

// goodDish is an invented antenna that can be used.
func goodDish() Antenna {
	return Antenna{Name: "dish", Kind: Dish, Diameter: 3.7, Efficiency: 0.6, Noise: &Noise{
		AntennaTemperature: Constant(60), Chain: []Stage{{Name: "amplifier", Gain: 40, NoiseTemperature: kelvin(50)}}}}
}

func TestValidateAntenna(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name   string
		change func(*Antenna)
		want   string // "": no fault
	}{
		{"a good dish", func(*Antenna) {}, ""},
		{"efficiency 1.2", func(a *Antenna) { a.Efficiency = 1.2 }, "efficiency: 1.2 is not allowed; it must be 0 to 1"},
		{"efficiency not a number", func(a *Antenna) { a.Efficiency = nan }, "efficiency: NaN"},
		{"diameter negative", func(a *Antenna) { a.Diameter = -1 }, "diameter: -1 m"},
		{"diameter infinite", func(a *Antenna) { a.Diameter = unit.Length(math.Inf(1)) }, "diameter: +Inf m"},
		{"feed loss negative", func(a *Antenna) { a.FeedLoss = -0.1 }, "feed loss: -0.1 dB"},
		{"whole aperture in shadow", func(a *Antenna) { a.BlockageFraction = 1 }, "blockage fraction: 1"},
		{"extra loss negative", func(a *Antenna) { a.ExtraLosses = []Loss{{Name: "radome", Loss: -1}} }, `extra loss "radome": -1 dB`},
		{"band upside down", func(a *Antenna) { a.Bands = []Band{{8400, 8025}} }, "band 1"},
		{"a dish of no size", func(a *Antenna) { a.Diameter = 0 }, "a dish needs diameter and efficiency"},
		{"directive without gain", func(a *Antenna) { a.Kind = Directive }, "a directive antenna needs its gain as measured"},
		{"fixed without beamwidth", func(a *Antenna) { a.Kind, a.Diameter, a.Gain = Fixed, 0, Constant(8) }, "needs the beamwidth"},
		{"no noise", func(a *Antenna) { a.Noise = nil }, "the noise is not known"},
		{"no antenna temperature", func(a *Antenna) { a.Noise.AntennaTemperature = nil }, "lacks the antenna temperature"},
		{"no chain", func(a *Antenna) { a.Noise.Chain = nil }, "lacks the receiver chain"},
		{"antenna temperature negative", func(a *Antenna) { a.Noise.AntennaTemperature = Constant(-3) }, "antenna temperature: -3 K"},
		{"spill-over alone", func(a *Antenna) { a.Noise.AntennaTemperature, a.Noise.SpillOver = nil, Constant(0.1) }, ""},
		{"spill-over beside antenna temperature", func(a *Antenna) { a.Noise.SpillOver = Constant(0.1) }, "stands beside a spill-over"},
		{"spill-over in percent", func(a *Antenna) { a.Noise.AntennaTemperature, a.Noise.SpillOver = nil, Constant(10) }, "spill-over: 10 is not allowed"},
		{"G/T beside noise", func(a *Antenna) { a.GOverT = Constant(20) }, "stands beside a noise description"},
		{"system noise beside a chain", func(a *Antenna) { a.Noise.SystemTemperature = Constant(100) }, "stands beside antenna temperature"},
		{"system noise of 0 K", func(a *Antenna) { a.Noise = &Noise{SystemTemperature: Constant(0)} }, "system noise temperature: 0 K"},
		{"gain stage without noise", func(a *Antenna) { a.Noise.Chain[0].NoiseTemperature = nil }, "needs its noise temperature or noise figure"},
		{"stage with both", func(a *Antenna) { a.Noise.Chain[0].NoiseFigure = db(1) }, "both noise temperature and noise figure"},
		{"axial ratio negative", func(a *Antenna) { a.Polarization = &Polarization{AxialRatio: db(-1)} }, "axial ratio: -1 dB"},
		{"G/T alone", func(a *Antenna) { *a = Antenna{Kind: Directive, GOverT: Constant(20)} }, ""},
	} {
		a := goodDish()
		c.change(&a)
		err := a.Validate()
		switch {
		case c.want == "" && err != nil:
			t.Errorf("%s: %v", c.name, err)
		case c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)):
			t.Errorf("%s: got %v, want %q in it", c.name, err, c.want)
		}
	}
}

func TestValidateTellsAllFaults(t *testing.T) {
	a := goodDish()
	a.Efficiency, a.FeedLoss = 2, -1
	err := a.Validate()
	if err == nil || !strings.Contains(err.Error(), "efficiency") || !strings.Contains(err.Error(), "feed loss") {
		t.Errorf("got %v, want both faults", err)
	}
}
