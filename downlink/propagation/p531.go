package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// ElectronContent is a number of electrons over an area, in 1/m².
type ElectronContent float64

// TypicalElectronContent and TypicalField stand in where a path states none: a
// middling daytime content, and the field along the path at middle latitudes that
// P.531-14 §4.2 suggests (50 µT). A high content at low latitudes is 1e18 1/m².
const (
	TypicalElectronContent ElectronContent = 2e17
	TypicalField           float64         = 5e-5 // T
)

// Faraday is the rotation of a linear polarisation in the ionosphere and what it
// costs between two linear antennas. A circular polarisation loses nothing.
type Faraday struct {
	Rotation unit.Angle // the largest: the content swings between little and the stated one
	MeanLoss unit.DB    // of the mean power, the rotation being anywhere from 0 to Rotation
	Loss90   unit.DB    // not exceeded for 90 % of these rotations
}

// FaradayRotation returns the order of magnitude of the rotation along a slant path
// that holds the stated electron content, in a mean field along the path in tesla.
// 0.1 to 10 GHz. Source: Rec. ITU-R P.531-14 §4.2, 2.36e-14 B N/f² in radians with f
// in GHz; the losses follow from the mean of cos² and the order of |cos|.
func FaradayRotation(f unit.Frequency, n ElectronContent, fieldTesla float64) (Faraday, error) {
	err := firstError(within("frequency", f.Gigahertz(), "GHz", 0.1, 10, "leave the rotation out above; below it is many turns"),
		within("electron content", float64(n), "1/m2", 0, 1e20, ""), within("magnetic field", fieldTesla, "T", 0, 1e-4, "give it in tesla"))
	if err != nil {
		return Faraday{}, err
	}
	top := 2.36e-14 * fieldTesla * float64(n) / (f.Gigahertz() * f.Gigahertz())
	if top == 0 {
		return Faraday{}, nil
	}
	mean := 0.5 + math.Sin(2*top)/(4*top)
	return Faraday{unit.Angle(top), unit.DB(-10 * math.Log10(mean)), unit.DB(-20 * math.Log10(math.Cos(foldedQuantile(top))))}, nil
}

// foldedQuantile returns the angle to the antenna's plane, 0 to 90°, under which the
// polarisation stays for 90 % of the rotations from 0 to top.
func foldedQuantile(top float64) float64 {
	switch {
	case top >= math.Pi: // the plane lies anywhere
		return 0.9 * math.Pi / 2
	case 0.9*top > math.Pi-top: // part of the rotations comes back from beyond 90°
		return (math.Pi - 0.1*top) / 2
	}
	return 0.9 * top
}

// IonosphericFade returns the fade of ionospheric scintillation exceeded for p at
// middle latitudes, by the table that P.618-14 (Table 2) drew from P.531: 0.1 to
// 1 GHz, 0.1 to 1 %. It is an order of magnitude, in the table's logarithms between
// its rows and columns. Near the geomagnetic equator after sunset and in the auroral
// zones fades are far deeper, over 20 dB from peak to peak at 1 GHz (Table 1).
func IonosphericFade(f unit.Frequency, p Exceedance) (unit.DB, error) {
	err := firstError(within("frequency", f.Gigahertz(), "GHz", 0.1, 1, "state a loss"),
		within("exceeded percentage", p.Percents(), "%", 0.1, 1, "state a loss"))
	if err != nil {
		return 0, err
	}
	x, i := place(fadeFrequencies[:], f.Gigahertz())
	y, k := place(fadePercents[:], p.Percents())
	at := func(k int) float64 {
		return (1-x)*math.Log(fadeTable[k][i]) + x*math.Log(fadeTable[k][i+1])
	}
	return unit.DB(math.Exp((1-y)*at(k) + y*at(k+1))), nil
}

// P.618-14 Table 2: fade depths in dB by percentage (rows) and frequency in GHz.
var (
	fadeFrequencies = [...]float64{0.1, 0.2, 0.5, 1}
	fadePercents    = [...]float64{0.1, 0.2, 0.5, 1}
	fadeTable       = [4][4]float64{{25, 6.2, 1, 0.3}, {16.6, 4.2, 0.7, 0.2}, {9.3, 2.3, 0.4, 0.1}, {5.9, 1.5, 0.2, 0.1}}
)

// place returns the interval of nodes that holds v and where in its logarithm v lies.
func place(nodes []float64, v float64) (w float64, i int) {
	for i < len(nodes)-2 && nodes[i+1] < v {
		i++
	}
	return math.Log(v/nodes[i]) / math.Log(nodes[i+1]/nodes[i]), i
}
