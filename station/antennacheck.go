package station

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Validate returns every fault of the antenna at once, nil when it can be used.
func (a *Antenna) Validate() error {
	var c checker
	c.within("diameter", a.Diameter.Metres(), 0, 1000, "m")
	c.within("efficiency", a.Efficiency, 0, 1, "")
	c.within("surface error", a.SurfaceRMS.Metres()*1000, 0, 1000, "mm")
	c.less("blockage fraction", a.BlockageFraction, 0, 1, "")
	c.within("beamwidth factor", a.BeamwidthFactor.Degrees(), 0, 360, "deg")
	c.within("beamwidth", a.Beamwidth.Degrees(), 0, 360, "deg")
	c.within("pointing error", a.PointingRMS.Degrees(), 0, 180, "deg")
	c.within("boresight elevation", a.Boresight.Elevation.Degrees(), -90, 90, "deg")
	c.within("boresight azimuth", a.Boresight.Azimuth.Degrees(), -360, 360, "deg")
	c.within("feed loss", float64(a.FeedLoss), 0, 100, "dB")
	for _, l := range a.ExtraLosses {
		c.within(fmt.Sprintf("extra loss %q", l.Name), float64(l.Loss), 0, 1000, "dB")
	}
	c.bands("band", a.Bands)
	if a.Transmit != nil {
		c.add(a.Transmit.Validate())
	}
	a.checkGain(&c)
	a.checkNoise(&c)
	if a.Polarization != nil {
		a.Polarization.check(&c)
	}
	if a.Mount != nil {
		c.faults = append(c.faults, a.Mount.Validate())
	}
	return c.joined()
}

func (a *Antenna) checkGain(c *checker) {
	switch {
	case a.Kind == Dish && a.Gain == nil && a.GOverT == nil && !a.hasAperture():
		c.say("a dish needs diameter and efficiency, or its gain as measured")
	case a.Kind != Dish && a.Gain == nil && a.GOverT == nil:
		c.say("a %s antenna needs its gain as measured", a.Kind)
	}
	_, known := a.BeamwidthAt(unit.Gigahertz)
	if !known && (a.PointingRMS > 0 || a.Kind == Fixed) {
		c.say("the pointing loss needs the beamwidth as measured or the diameter")
	}
}

func (a *Antenna) checkNoise(c *checker) {
	n := a.Noise
	switch {
	case a.GOverT != nil && n != nil && (n.AntennaTemperature != nil || len(n.Chain) > 0 || n.SystemTemperature != nil):
		c.say("a measured G/T stands beside a noise description; give one of the two (the physical temperature may stand beside G/T)")
	case a.GOverT == nil && n == nil:
		c.say("the noise is not known; give noise, or G/T as measured")
	}
	if n == nil {
		return
	}
	if p := n.PhysicalTemperature.Kelvins(); n.PhysicalTemperature != 0 {
		c.above("physical temperature", p, 0, 1000, "K")
	}
	switch {
	case a.GOverT != nil:
	case n.SystemTemperature != nil:
		if n.AntennaTemperature != nil || len(n.Chain) > 0 {
			c.say("a measured system noise temperature stands beside antenna temperature and receiver chain; give one of the two")
		}
		if least, _ := n.SystemTemperature.bounds(); !(least > 0) {
			c.above("system noise temperature", least, 0, 1e6, "K")
		}
	case n.AntennaTemperature == nil && n.SpillOver == nil:
		c.say("the noise lacks the antenna temperature")
	case n.AntennaTemperature != nil && n.SpillOver != nil:
		c.say("an antenna temperature stands beside a spill-over; give one of the two")
	case len(n.Chain) == 0:
		c.say("the noise lacks the receiver chain; give at least the first amplifier")
	case n.SpillOver != nil:
		least, greatest := n.SpillOver.bounds()
		c.within("spill-over", least, 0, 1, "")
		c.within("spill-over", greatest, 0, 1, "")
		c.within("ground temperature", n.GroundTemperature.Kelvins(), 0, 1000, "K")
	default:
		least, greatest := n.AntennaTemperature.bounds()
		c.within("antenna temperature", least, 0, 1e6, "K")
		c.within("antenna temperature", greatest, 0, 1e6, "K")
	}
	for i, s := range n.Chain {
		s.check(c, i)
	}
}

func (s Stage) check(c *checker, i int) {
	name := fmt.Sprintf("stage %d (%s)", i+1, s.Name)
	c.within(name+": gain", float64(s.Gain), -200, 200, "dB")
	switch {
	case s.NoiseTemperature != nil && s.NoiseFigure != nil:
		c.say("%s: both noise temperature and noise figure are given; give one", name)
	case s.NoiseTemperature != nil:
		c.within(name+": noise temperature", s.NoiseTemperature.Kelvins(), 0, 1e7, "K")
	case s.NoiseFigure != nil:
		c.within(name+": noise figure", float64(*s.NoiseFigure), 0, 100, "dB")
	case !(s.Gain <= 0):
		c.say("%s: a stage with gain needs its noise temperature or noise figure", name)
	}
}

// Check returns every fault of the polarisation.
func (a *Polarization) Check() error {
	var c checker
	a.check(&c)
	return c.joined()
}

func (a *Polarization) check(c *checker) {
	if a.AxialRatio != nil {
		c.within("axial ratio", float64(*a.AxialRatio), 0, 100, "dB")
	}
	if a.Tilt != nil {
		c.within("polarisation tilt", a.Tilt.Degrees(), -360, 360, "deg")
	}
}

// checker gathers faults.
type checker struct{ faults []error }

func (c *checker) say(format string, args ...any) {
	c.faults = append(c.faults, fmt.Errorf(format, args...))
}

// add takes an error, or each of those joined in it.
func (c *checker) add(err error) {
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		c.faults = append(c.faults, joined.Unwrap()...)
	} else if err != nil {
		c.faults = append(c.faults, err)
	}
}

func (c *checker) bands(what string, list []Band) {
	for i, b := range list {
		if !(b.Low > 0 && b.High >= b.Low && !math.IsInf(float64(b.High), 1)) {
			c.say("%s %d: %g to %g MHz is not a band; give its lower end, above 0, then its upper end", what, i+1, b.Low.Megahertz(), b.High.Megahertz())
		}
	}
}

func (c *checker) within(what string, v, low, high float64, u string) {
	if !(v >= low && v <= high) {
		c.outside(what, v, u, fmt.Sprintf("%g to %g", low, high))
	}
}

func (c *checker) less(what string, v, low, high float64, u string) {
	if !(v >= low && v < high) {
		c.outside(what, v, u, fmt.Sprintf("%g or greater and less than %g", low, high))
	}
}

func (c *checker) above(what string, v, low, high float64, u string) {
	if !(v > low && v <= high) {
		c.outside(what, v, u, fmt.Sprintf("greater than %g and at most %g", low, high))
	}
}

func (c *checker) outside(what string, v float64, u, allowed string) {
	if u != "" {
		allowed += " " + u
	}
	c.faults = append(c.faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
}

func (c *checker) joined() error { return errors.Join(c.faults...) }
