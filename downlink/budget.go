package downlink

import (
	"time"

	"slantwise/orbit/unit"
)

// Budget is a link budget at one instant. A number that does not exist is NaN in
// here (and empty or null in files): OffBoresight of a tumbling spacecraft, the Sun
// without a time, Eb/N0 without a data rate, margins without a required Eb/N0.
type Budget struct {
	Time         time.Time // zero for a stated geometry
	Azimuth      unit.Angle
	Elevation    unit.Angle
	Range        unit.Length
	OffBoresight unit.Angle

	AroundBoresight       unit.Angle // as in Geometry
	BodyOffZ, BodyAroundZ unit.Angle
	Sun, Moon             unit.Angle // off the beam's axis

	Terms            []Term  // adds up to ReceivedPowerDBm, bit for bit in this order
	ReceivedPowerDBm float64 // at the input of the first amplifier; NaN where the station's gain is not known
	PowerFluxDensity float64 // dB(W/m²), whole carrier in free space at the site
	SystemNoise      unit.Temperature
	NoiseParts       []NoisePart  // adds up to SystemNoise; with a measured G/T one part, the implied noise
	GOverT           unit.DB      // dB/K, the gain after pointing, feed and extra losses left out
	CN0              unit.DB      // dBHz
	CI               unit.DB      // dB, carrier to an equal carrier on the other polarisation; NaN where that is not in use
	EbN0             unit.DB      // dB
	RequiredEbN0     unit.DB      // dB, the code's own
	Margin           unit.DB      // EbN0 - implementation loss - RequiredEbN0
	MarginOver       unit.DB      // Margin - required margin
	DataRate         unit.BitRate // information bits of the chosen mode
	AchievableRate   unit.BitRate // at the required margin, 0 where the link is unusable
	AchievableLimit  RateLimit
	Usable           bool // false where the antenna points outside its main lobe

	// What the orbit's error does, one standard deviation each; NaN where it is not known.
	OrbitAlong, OrbitTotal unit.Angle     // of the direction, along the apparent motion and over both axes
	DopplerSpread          unit.Frequency // of the received frequency
	// SureError is how far off the beam's axis the spacecraft is at most with
	// SureProbability, by the orbit's error and the antenna's; NaN where the antenna does
	// not follow the prediction or its beamwidth is not known.
	SureError unit.Angle

	Cautions []string // what is doubtful at this geometry alone
}

// NoisePart is one contributor to the system noise, referred to the input of the
// first amplifier.
type NoisePart struct {
	Name        string
	Temperature unit.Temperature
	Source      string
}

// RateLimit says what holds the achievable rate.
type RateLimit int

// Limits of the achievable rate.
const (
	LimitPower       RateLimit = iota // the power received
	LimitBandwidth                    // the allotted bandwidth
	LimitTransmitter                  // the transmitter's highest rate
	LimitUnusable                     // nothing gets through: the antenna points outside its main lobe
	LimitUnknown                      // no mode, or none with a known threshold: there is no achievable rate
)
