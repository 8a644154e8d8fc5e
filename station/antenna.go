package station

import "slantwise/orbit/unit"

// AntennaKind tells how an antenna's gain is known and whether it follows the
// spacecraft.
type AntennaKind int

// Kinds of antenna.
const (
	Dish      AntennaKind = iota // follows; gain from diameter and efficiency, or as measured
	Directive                    // follows; gain and beamwidth as measured
	Fixed                        // looks at its boresight; gain and beamwidth as measured
)

// String returns the kind as the scenario writes it.
func (k AntennaKind) String() string {
	switch k {
	case Dish:
		return "dish"
	case Directive:
		return "directive"
	case Fixed:
		return "fixed"
	}
	return "unknown kind of antenna"
}

// Follows tells by what a steered antenna is led.
type Follows int

// Ways to follow a spacecraft.
const (
	FollowsPrediction Follows = iota // the orbit as predicted: its errors are errors of pointing
	FollowsSignal                    // the signal itself, once it is found: PointingRMS holds all that is left
)

// String returns the way as the scenario writes it.
func (f Follows) String() string {
	if f == FollowsSignal {
		return "signal"
	}
	return "prediction"
}

// DefaultBeamwidthFactor is k of the half-power beamwidth k λ/D where the scenario
// gives none: 70°, common practice for a tapered illumination (books have 58° for a
// uniform one to 73°).
const DefaultBeamwidthFactor = 70 * unit.Degree

// Antenna is a station's antenna with its losses and its noise. Gain is known from
// Diameter and Efficiency (a dish), or from Gain as measured; noise is known from
// Noise, or from GOverT as measured. Validate says what is missing.
type Antenna struct {
	Name string
	Kind AntennaKind

	Diameter         unit.Length // greater than 0 for a dish without Gain
	Efficiency       float64     // (0, 1], of the aperture, surface error and blockage apart
	SurfaceRMS       unit.Length // deviation from the ideal surface, 0 for a perfect one
	BlockageFraction float64     // [0, 1): share of the aperture's area in shadow
	BeamwidthFactor  unit.Angle  // k of k λ/D; 0: DefaultBeamwidthFactor

	Gain        *Tabulated   // dBi as measured, holding surface error and blockage; nil: from the diameter
	Beamwidth   unit.Angle   // between the half-power points; 0: from the diameter
	GOverT      *Tabulated   // dB/K as measured; nil: from Noise
	Measurement *Measurement // when and in what weather the figures above were taken; nil: not said

	GOverTElevation *unit.Angle // elevation at which a single G/T figure was taken; nil: not said

	Boresight    Direction     // of a fixed antenna
	PointingRMS  unit.Angle    // pointing error, root mean square over both axes together
	Follows      Follows       // how a steered antenna finds the spacecraft
	Polarization *Polarization // nil: left out
	Bands        []Band        // empty: any frequency
	FeedLoss     unit.DB       // between antenna and first amplifier, at the physical temperature
	ExtraLosses  []Loss        // each a term of its own
	Noise        *Noise        // nil with a measured G/T
	Mount        *Mount        // what turns it; nil: it follows whatever it is asked to
	Transmit     *Transmit     // nil: the antenna receives alone
}

// Direction is a direction in the sky of a site.
type Direction struct{ Azimuth, Elevation unit.Angle }

// Band is a span of frequencies that an antenna takes, both ends included.
type Band struct{ Low, High unit.Frequency }

// Holds tells whether f lies in the band.
func (b Band) Holds(f unit.Frequency) bool { return f >= b.Low && f <= b.High }

// Loss is a named loss between the antenna and its feed. A dissipative one turns
// the signal into heat and so also emits noise at the physical temperature.
type Loss struct {
	Name        string
	Loss        unit.DB // 0 or greater
	Dissipative bool
}

// Measurement tells when and in what weather a measured figure was taken.
type Measurement struct {
	Date    string // as the scenario gives it
	Weather string // in words
}
