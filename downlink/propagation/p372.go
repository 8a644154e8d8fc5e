package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// GalacticBrightness returns the mean brightness of the galaxy without the cosmic
// background: up to 100 MHz by Rec. ITU-R P.372-16 equation (13), the median of a
// vertical antenna (deciles 2 dB either way), above 100 MHz from there by the
// spectrum of its equation (14). A narrow beam sees from half of it to ten times it,
// by where in the galaxy it looks. From 10 MHz, under which the ionosphere shields.
func GalacticBrightness(f unit.Frequency) (unit.Temperature, error) {
	mhz := f.Megahertz()
	if err := within("frequency", mhz, "MHz", 10, 1e6, "the ionosphere shields the sky below"); err != nil {
		return 0, err
	}
	if mhz <= 100 {
		return unit.ReferenceTemperature * unit.Temperature(unit.DB(52-23*math.Log10(mhz)).Ratio()), nil
	}
	at100 := unit.ReferenceTemperature * unit.Temperature(unit.DB(52-23*2).Ratio())
	return ScaleGalactic(at100, 100*unit.Megahertz, f)
}

// ScaleGalactic returns the galactic brightness at f from the brightness known at
// another frequency (such as a sky map at 408 MHz, its cosmic background taken off),
// by the spectrum f^-2.75. Source: Rec. ITU-R P.372-16 equation (14), without its
// cosmic term.
func ScaleGalactic(known unit.Temperature, at, f unit.Frequency) (unit.Temperature, error) {
	err := firstError(notNegative("galactic brightness", known.Kelvins(), "K"),
		positive("frequency", at.Megahertz(), "MHz"), positive("frequency", f.Megahertz(), "MHz"))
	if err != nil {
		return 0, err
	}
	return known * unit.Temperature(math.Pow(float64(f/at), -2.75)), nil
}

// Environment is a class of surroundings of a station by their man-made noise.
type Environment int

// Environments of Rec. ITU-R P.372-16, from loud to quiet.
const (
	City Environment = iota
	Residential
	Rural
	QuietRural
)

var environmentNames = [...]string{"city", "residential", "rural", "quiet rural"}

// String returns "city", "residential", "rural" or "quiet rural".
func (e Environment) String() string {
	if e < City || e > QuietRural {
		return fmt.Sprintf("environment %d", int(e))
	}
	return environmentNames[e]
}

// manMadeCurves are c and d of Fam = c - d log10(f in MHz), P.372-16 Part 6 Table 1.
var manMadeCurves = [...]struct{ c, d float64 }{{76.8, 27.7}, {72.5, 27.7}, {67.2, 27.7}, {53.6, 28.6}}

// ManMadeNoise returns the median noise temperature of man-made noise as a short
// vertical antenna at the ground takes it in, and warnings; an antenna that looks up
// takes in less, which no Recommendation puts a figure to. Stated range 0.3 to
// 250 MHz; in a city the line 44.3 - 12.3 log10(f) of P.372-8 §5 (2003) follows where
// it crosses the other, to 900 MHz. Source: Rec. ITU-R P.372-16 Part 6.
func ManMadeNoise(f unit.Frequency, e Environment) (unit.Temperature, []Note, error) {
	if e < City || e > QuietRural {
		return 0, nil, fmt.Errorf("%v is not known; give city, residential, rural or quiet rural", e)
	}
	mhz := f.Megahertz()
	if err := within("frequency", mhz, "MHz", 0.3, 1e4, "man-made noise has no model there"); err != nil {
		return 0, nil, err
	}
	var n notes
	fam := manMadeCurves[e].c - manMadeCurves[e].d*math.Log10(mhz)
	top := 250.0
	if e == City {
		top = 900
		fam = math.Max(fam, 44.3-12.3*math.Log10(mhz))
	}
	n.beyond("P.372-16 Part 6 ("+e.String()+")", "frequency", mhz, "MHz", 0.3, top)
	return unit.ReferenceTemperature * unit.Temperature(unit.DB(fam).Ratio()), n, nil
}
