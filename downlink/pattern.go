package downlink

import "slantwise/orbit/unit"

// PatternKind is the form of a transmit antenna's pattern.
type PatternKind int

// Forms of pattern.
const (
	Isotropic   PatternKind = iota // PeakGain in every direction
	CosinePower                    // PeakGain times cosⁿ of the off-boresight angle, BackLobe beyond 90°
	GainTable                      // linear in dB between the points of Table
)

// Pattern is the power gain of a transmit antenna against the angle off its
// boresight, the same all around it.
type Pattern struct {
	Kind     PatternKind
	PeakGain unit.DB        // dBi, of Isotropic and CosinePower
	Exponent float64        // n of CosinePower, 0 or greater
	BackLobe *unit.DB       // dBi, of CosinePower beyond 90°; nil: nothing is radiated there
	Table    []PatternPoint // of GainTable; angles rise from 0
}

// PatternPoint is a point of a measured pattern.
type PatternPoint struct {
	OffBoresight unit.Angle // [0°, 180°]
	Gain         unit.DB    // dBi
}
