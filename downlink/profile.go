package downlink

import (
	"time"

	"slantwise/orbit/unit"
)

// Profile holds the budget along a pass, one column a quantity, all of the length
// of Seconds. NaN marks a number that does not exist.
type Profile struct {
	Start   time.Time // Seconds counts from here, the AOS
	Seconds []float64 // rising; the last is LOS

	AzimuthDeg, ElevationDeg, ApparentElevationDeg []float64
	RangeKm, RangeRateKmS                          []float64
	OffBoresightDeg                                []float64
	// Of the station in the antenna's and the body's axes; nil where no gain depends on them.
	AroundBoresightDeg, BodyOffZDeg, BodyAroundZDeg []float64
	DopplerHz                                       []float64

	SunDeg, MoonDeg []float64 // off the beam's axis; NaN where they are not known

	// What the orbit's error does, as in Budget; NaN where it is not known.
	OrbitAlongDeg, OrbitTotalDeg, DopplerSpreadHz, SureErrorDeg []float64

	Terms      []TermInfo
	TermValues [][]float64 // by term, then by sample

	NoiseParts []NoisePart // their temperatures are not used
	NoiseK     [][]float64 // by part, then by sample; adds up to SystemNoiseK

	ReceivedPowerDBm, FluxDensityDBWM2 []float64
	SystemNoiseK, GOverTDBK            []float64
	CN0DBHz, EbN0DB                    []float64
	MarginDB, MarginOverDB             []float64
	AchievableRateBps                  []float64
	AchievableLimit                    []RateLimit
	Usable                             []bool
	DataRate                           unit.BitRate // of the chosen mode
	RequiredMarginDB                   float64

	Volume Volume

	// While the Sun, the Moon is up and its disc touches the half-power beam; empty: never,
	// nil: where they stand or the beamwidth is not known.
	SunInBeam, MoonInBeam []Interval

	HalfBeamDeg float64 // from the axis to the half-power point; NaN where the beamwidth is not known

	// BeamUnsure is while the beam is too narrow to be sure of: SureErrorDeg beyond the
	// half-power point. Empty: never; nil: the orbit does not lead the beam.
	BeamUnsure []Interval

	sunUpDeg, moonUpDeg []float64 // SunDeg, MoonDeg while they are up, else NaN

	limited   bool // Permit was called
	permitted []span
}

// Volume is what a pass brings down, in bytes, and while what.
type Volume struct {
	AchievableBytes float64    // the integral of the achievable rate
	ModeBytes       float64    // the chosen mode while its margin holds
	Closes          []Interval // when the margin is at least what is required
}

// Interval is a span of time.
type Interval struct{ From, To time.Time }
