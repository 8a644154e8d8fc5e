package sizing

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Family is how an antenna changes with its diameter. The zero value changes nothing
// but the diameter.
type Family struct {
	SurfaceShare float64 // surface error as a share of the diameter; 0: the antenna's own, the same for every diameter

	Pointing *unit.Angle // pointing error without wind; nil: the antenna's own
	Wind     *Wind       // what wind adds to it; nil: nothing

	Receiver *unit.Temperature // noise of the receiver at its input in place of the chain; nil: the chain

	Price *Price // nil: no price is known
}

// Wind is a pointing error that grows with the dish: Error at Diameter, as the power
// Exponent of the diameter. It adds to the other in squares.
type Wind struct {
	Error    unit.Angle
	Diameter unit.Length
	Exponent float64
}

// Price is the planner's own law a + b D^c, D in metres.
type Price struct {
	Fixed, Factor, Exponent float64
	Unit                    string // "thousand EUR"
}

// At returns the price of a diameter.
func (p *Price) At(d unit.Length) float64 {
	return p.Fixed + p.Factor*math.Pow(d.Metres(), p.Exponent)
}

// Check returns a *unit.RangeError for what is out of range.
func (f *Family) Check() error {
	bad := func(what string, v float64, u, allowed string) error {
		return &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed}
	}
	if !(f.SurfaceShare >= 0 && f.SurfaceShare <= 0.1) {
		return bad("surface error as a share of the diameter", f.SurfaceShare, "", "0 to 0.1")
	}
	if f.Pointing != nil && !(*f.Pointing >= 0 && *f.Pointing <= 90*unit.Degree) {
		return bad("pointing error", f.Pointing.Degrees(), "deg", "0 to 90 deg")
	}
	if w := f.Wind; w != nil {
		if !(w.Error >= 0 && w.Error <= 90*unit.Degree) {
			return bad("pointing error by wind", w.Error.Degrees(), "deg", "0 to 90 deg")
		}
		if !(w.Diameter > 0 && w.Diameter <= 1000) {
			return bad("diameter of the pointing error by wind", w.Diameter.Metres(), "m", "above 0 to 1000 m")
		}
		if !(w.Exponent >= 0 && w.Exponent <= 10) {
			return bad("exponent of the pointing error by wind", w.Exponent, "", "0 to 10")
		}
	}
	if f.Receiver != nil && !(*f.Receiver > 0 && *f.Receiver <= 1e6) {
		return bad("noise temperature of the receiver", f.Receiver.Kelvins(), "K", "above 0 to 1e6 K")
	}
	return nil
}

// Antenna returns the family's antenna of a diameter, made after a template. It fails
// where the template has no aperture of its own: a gain, beamwidth or G/T as measured
// does not follow the diameter.
func (f *Family) Antenna(template *station.Antenna, d unit.Length) (*station.Antenna, error) {
	if template.Kind != station.Dish || template.Gain != nil || template.GOverT != nil || template.Beamwidth > 0 || template.Efficiency == 0 {
		return nil, fmt.Errorf("antenna %q: a diameter can only be sought of a dish with diameter, efficiency and noise; gain, beamwidth and G/T as measured do not follow the diameter", template.Name)
	}
	a := *template
	if d != template.Diameter {
		a.Mount, _ = template.MountFor(d)
	}
	a.Diameter = d
	if f.SurfaceShare > 0 {
		a.SurfaceRMS = unit.Length(f.SurfaceShare * d.Metres())
	}
	if f.Pointing != nil {
		a.PointingRMS = *f.Pointing
	}
	if w := f.Wind; w != nil {
		blown := w.Error.Radians() * math.Pow(d.Metres()/w.Diameter.Metres(), w.Exponent)
		a.PointingRMS = unit.Angle(math.Hypot(a.PointingRMS.Radians(), blown))
	}
	if f.Receiver != nil && a.Noise != nil {
		n := *a.Noise
		n.Chain = []station.Stage{{Name: "receiver", Gain: 0, NoiseTemperature: f.Receiver}}
		a.Noise = &n
	}
	return &a, nil
}

// losses returns what pointing and surface take off an antenna's gain, in dB.
func losses(a *station.Antenna, f unit.Frequency) (pointing, surface float64) {
	if w, ok := a.BeamwidthAt(f); ok {
		pointing = float64(station.PointingLoss(a.PointingRMS, w))
	}
	return pointing, float64(station.SurfaceLoss(a.SurfaceRMS, f))
}
