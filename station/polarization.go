package station

import "slantwise/orbit/unit"

// PolarizationKind is the form of a wave's polarisation.
type PolarizationKind int

// Kinds of polarisation. Vertical and Horizontal are Linear with a known tilt.
const (
	RightHandCircular PolarizationKind = iota
	LeftHandCircular
	Linear
)

// Polarization is the polarisation of an antenna, as IEEE Std 145 defines the hand:
// right-hand circular turns clockwise as seen from the transmitter.
type Polarization struct {
	Kind       PolarizationKind
	AxialRatio *unit.DB    // 0 dB is a circle; nil: 0 dB when circular, a line when linear
	Tilt       *unit.Angle // of the major axis against the horizontal across the line of sight at the station (horizontal 0°, vertical 90°); nil: not known
}
