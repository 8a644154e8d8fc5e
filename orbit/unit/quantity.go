package unit

import "math"

// Angle is a plane angle in radians.
type Angle float64

// Units of Angle.
const (
	Radian    Angle = 1
	Degree    Angle = math.Pi / 180
	Arcsecond       = Degree / 3600
)

// Radians returns the angle in radians.
func (a Angle) Radians() float64 { return float64(a) }

// Degrees returns the angle in degrees.
func (a Angle) Degrees() float64 { return float64(a) * (180 / math.Pi) }

// Wrapped returns the angle brought into [0, 2π).
func (a Angle) Wrapped() Angle {
	w := math.Mod(float64(a), 2*math.Pi)
	if w < 0 {
		w += 2 * math.Pi
	}
	if w >= 2*math.Pi { // a tiny negative angle rounds up to a full turn
		w = 0
	}
	return Angle(w)
}

// AngularRate is a change of angle in radians per second.
type AngularRate float64

// DegreesPerSecond returns the rate in deg/s.
func (r AngularRate) DegreesPerSecond() float64 { return float64(r) * (180 / math.Pi) }

// Length is a length in metres.
type Length float64

// Units of Length.
const (
	Metre      Length = 1
	Kilometre  Length = 1000
	Millimetre Length = 1e-3
)

// Metres returns the length in metres.
func (l Length) Metres() float64 { return float64(l) }

// Kilometres returns the length in kilometres.
func (l Length) Kilometres() float64 { return float64(l) / 1000 }

// Speed is a speed in metres per second.
type Speed float64

// KilometresPerSecond returns the speed in km/s.
func (s Speed) KilometresPerSecond() float64 { return float64(s) / 1000 }

// Frequency is a frequency, bandwidth or symbol rate in hertz.
type Frequency float64

// Units of Frequency.
const (
	Hertz     Frequency = 1
	Kilohertz Frequency = 1e3
	Megahertz Frequency = 1e6
	Gigahertz Frequency = 1e9
)

// Hertz returns the frequency in Hz.
func (f Frequency) Hertz() float64 { return float64(f) }

// Megahertz returns the frequency in MHz.
func (f Frequency) Megahertz() float64 { return float64(f) / 1e6 }

// Gigahertz returns the frequency in GHz.
func (f Frequency) Gigahertz() float64 { return float64(f) / 1e9 }

// Wavelength returns the wavelength in vacuum; f must be positive.
func (f Frequency) Wavelength() Length { return Length(SpeedOfLight / float64(f)) }

// Temperature is an absolute (or noise) temperature in kelvin.
type Temperature float64

// Kelvin is the unit of Temperature.
const Kelvin Temperature = 1

// Kelvins returns the temperature in kelvin.
func (t Temperature) Kelvins() float64 { return float64(t) }

// BitRate is an information rate in bits per second.
type BitRate float64

// BitPerSecond is the unit of BitRate.
const BitPerSecond BitRate = 1

// BitsPerSecond returns the rate in bit/s.
func (r BitRate) BitsPerSecond() float64 { return float64(r) }

// AngularAcceleration is a change of angular rate in radians per second squared.
type AngularAcceleration float64

// DegreesPerSecond2 returns the acceleration in deg/s².
func (a AngularAcceleration) DegreesPerSecond2() float64 { return float64(a) * (180 / math.Pi) }
