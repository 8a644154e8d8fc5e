package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// Disc is the Sun or the Moon as an antenna sees it: evenly bright.
type Disc struct {
	Brightness unit.Temperature
	Diameter   unit.Angle // 0 < diameter <= 2°
}

// Mean apparent diameters of the Sun and the Moon (Astronomical Almanac, rounded). The
// radio Sun at decimetre waves is up to twice as wide, with little in its rim; a flux
// over the visible disc gives a narrow beam too much there.
const (
	SunDiameter  = 0.533 * unit.Degree
	MoonDiameter = 0.518 * unit.Degree
)

// Moon is the Moon over its phases at centimetre waves, 140 K when new and 280 K when
// full (P.372-8), evenly over the disc.
var Moon = Disc{Brightness: 210, Diameter: MoonDiameter}

// quietSun is the brightness of the quiet Sun in K at frequencies in GHz, read from
// P.372-14 figure 12 by eye (a published reading, two digits).
var quietSun = []struct{ ghz, kelvin float64 }{
	{0.05, 1e6}, {0.2, 1e6}, {1, 2e5}, {2, 9e4}, {3, 4.5e4}, {4, 2.9e4}, {5, 2e4}, {6, 1.6e4}, {7, 1.4e4}, {8, 1.3e4}, {9, 1.2e4}, {10, 1e4},
	{20, 7e3}, {30, 6.3e3}, {40, 6.2e3}, {50, 6e3}, {100, 6e3},
}

// QuietSun returns the quiet Sun at a frequency of 0.05 to 100 GHz, good to a factor
// of about 1.5; an active Sun is several times brighter under 10 GHz. Between the
// readings it is straight in the logarithms.
func QuietSun(f unit.Frequency) (Disc, error) {
	ghz := f.Gigahertz()
	last := len(quietSun) - 1
	if err := within("frequency", ghz, "GHz", quietSun[0].ghz, quietSun[last].ghz, "state the Sun's flux"); err != nil {
		return Disc{}, err
	}
	i := 1
	for i < last && quietSun[i].ghz < ghz {
		i++
	}
	a, b := quietSun[i-1], quietSun[i]
	w := math.Log(ghz/a.ghz) / math.Log(b.ghz/a.ghz)
	return Disc{unit.Temperature(geometric(a.kelvin, b.kelvin, w)), SunDiameter}, nil
}

// SolarFluxUnit is 1e-22 W/(m² Hz), the unit of Flux in SunOfFlux.
const SolarFluxUnit = 1e-22

// SunOfFlux returns the Sun whose flux density at a frequency is known, in W/(m² Hz):
// 2 k T/lambda² times the solid angle, both polarisations together.
func SunOfFlux(f unit.Frequency, flux float64) (Disc, error) {
	if err := firstError(positive("frequency", f.Gigahertz(), "GHz"), positive("solar flux", flux/SolarFluxUnit, "solar flux units")); err != nil {
		return Disc{}, err
	}
	lambda := f.Wavelength().Metres()
	return Disc{unit.Temperature(flux * lambda * lambda / (2 * unit.Boltzmann * solidAngle(SunDiameter))), SunDiameter}, nil
}

func solidAngle(diameter unit.Angle) float64 {
	s := math.Sin(diameter.Radians() / 4)
	return 4 * math.Pi * s * s
}

// AntennaRise returns how much a disc in or near the beam adds to an antenna's
// temperature in front of its losses: its brightness times the gain, integrated over
// the disc and divided by 4 pi. gain is on the axis, in dBi; the beam falls by
// 12 (angle/beamwidth)² dB. Side lobes are left out: two beamwidths from the disc's
// rim there is nothing. beamwidth > 0; the attenuation of the air in front is the
// caller's.
//
// A disc much smaller than the beam gives S lambda² G/(8 pi k), Rec. ITU-R S.733-2; one
// that fills it its brightness times the beam's share of the power.
func AntennaRise(d Disc, gain unit.DB, beamwidth, offAxis unit.Angle) (unit.Temperature, error) {
	err := firstError(notNegative("brightness", d.Brightness.Kelvins(), "K"), positive("beamwidth", beamwidth.Degrees(), "deg"),
		within("diameter of the disc", d.Diameter.Degrees(), "deg", 1e-3, 2, ""), within("angle off the axis", offAxis.Degrees(), "deg", 0, 180, ""))
	if err != nil {
		return 0, err
	}
	if math.IsNaN(float64(gain)) || math.IsInf(float64(gain), 0) {
		return 0, &unit.RangeError{Quantity: "gain", Value: float64(gain), Unit: "dBi", Allowed: "finite"}
	}
	radius, off, width := d.Diameter.Radians()/2, offAxis.Radians(), beamwidth.Radians()
	if off > radius+2*width {
		return 0, nil
	}
	// exp(-a (off² + r² + 2 off r cos phi)) over the disc, rings by Gauss-Legendre and
	// angles by the midpoint rule, which converges as fast on a circle; one half of the
	// circle mirrors the other.
	a := 1.2 * math.Ln10 / (width * width)
	const rings = 4
	var sum float64
	for ring := range rings {
		for k, x := range gaussNodes {
			r := radius * (float64(ring) + 0.5 + 0.5*x) / rings
			weight := gaussWeights[k] * radius / (2 * rings) * r * (2 * math.Pi / float64(len(halfCircle)))
			for _, c := range halfCircle {
				sum += weight * math.Exp(-a*(off*off+r*r+2*off*r*c))
			}
		}
	}
	return d.Brightness * unit.Temperature(gain.Ratio()*sum/(4*math.Pi)), nil
}

// Gauss-Legendre nodes and weights of order 4 (Abramowitz and Stegun, table 25.4).
var (
	gaussNodes   = [4]float64{-0.861136311594053, -0.339981043584856, 0.339981043584856, 0.861136311594053}
	gaussWeights = [4]float64{0.347854845137454, 0.652145154862546, 0.652145154862546, 0.347854845137454}
)

// halfCircle holds the cosines of the middles of sixteen equal arcs of half a circle.
var halfCircle = func() (c [16]float64) {
	for i := range c {
		c[i] = math.Cos(math.Pi * (float64(i) + 0.5) / float64(len(c)))
	}
	return c
}()
