package downlink

import (
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// WeatherNoise is what gas, cloud and rain add to the noise of a clear sky, for an
// antenna whose noise was stated for the clear sky. Scintillation does not emit. It is
// a NoiseModel.
type WeatherNoise struct {
	air
	medium, behind float64 // K
}

// NewWeatherNoise returns the noise of a path's weather above its clear sky.
func NewWeatherNoise(path *propagation.Path) *WeatherNoise {
	return &WeatherNoise{air{path: path}, path.Medium().Kelvins(), path.Background().Kelvins()}
}

// Parts names the noise of the weather.
func (w *WeatherNoise) Parts() []NoisePart {
	return []NoisePart{{Name: "weather above the clear sky",
		Source: "Rec. ITU-R P.618 §3: gas, cloud and rain emit, scintillation does not; the clear sky stands in the antenna temperature"}}
}

// Kelvins implements NoiseModel. Where the sky behind is hotter than the air, as at
// VHF, weather takes from the noise; that is left out, and the noise so not told too
// low.
func (w *WeatherNoise) Kelvins(g *Geometry, into []float64) error {
	s, err := w.at(g)
	if err != nil {
		return err
	}
	into[0] = max(0, (w.medium-w.behind)*(transmission(s.ClearGas)-transmission(s.Gas+s.Cloud+s.Rain)))
	return nil
}

// Notes tells how the weather enters.
func (w *WeatherNoise) Notes() []Note {
	out := []Note{{Assumption, "weather adds to the noise only what it is brighter than the clear sky, which the stated noise holds already"}}
	if w.behind > w.medium {
		out = append(out, Note{Assumption, "the sky behind is hotter than the air: what weather takes from its noise is left out"})
	}
	return out
}

// Surroundings is what an antenna takes in beside the sky.
type Surroundings struct {
	SpillOver *station.Tabulated // share of the pattern's power that meets the ground, 0 to 1; nil: none
	Ground    unit.Temperature   // brightness of the ground, 0 or greater
	ManMade   unit.Temperature   // man-made noise at the antenna, 0 where it does not count
}

// SkyNoise is the whole noise that an antenna takes in, contributor by contributor:
// the cosmic background and the galaxy through the air, the air itself, the ground
// and man-made noise, as far as they are there. It stands in place of a stated antenna
// temperature. It is a NoiseModel.
type SkyNoise struct {
	air
	medium, cosmic, galactic float64 // K
	around                   Surroundings
	parts                    []NoisePart
	kinds                    []skyPart // of the parts
}

type skyPart int

const (
	skyCosmic skyPart = iota
	skyGalactic
	skyGas
	skyCloud
	skyRain
	skyGround
	skyManMade
	skyParts
)

// NewSkyNoise returns the noise of the sky through a path, with its weather or under
// the clear sky.
func NewSkyNoise(path *propagation.Path, clear bool, around Surroundings) *SkyNoise {
	cosmic := propagation.CosmicBackground.Kelvins()
	n := &SkyNoise{air: air{path, clear}, medium: path.Medium().Kelvins(), cosmic: cosmic, galactic: path.Background().Kelvins() - cosmic, around: around}
	add := func(is bool, kind skyPart, name, source string) {
		if is {
			n.parts, n.kinds = append(n.parts, NoisePart{Name: name, Source: source}), append(n.kinds, kind)
		}
	}
	const through = "through the air, on the share of the pattern that sees the sky"
	p := path.Parts()
	add(true, skyCosmic, "cosmic background", "2.7 K "+through)
	add(true, skyGalactic, "galactic noise", "Rec. ITU-R P.372, the mean over the sky, "+through)
	gasSource := "Rec. ITU-R P.618 §3"
	if !clear && (p.Cloud || p.Rain) {
		gasSource += ", through cloud and rain"
	}
	add(p.Gas, skyGas, "gas emission", gasSource)
	add(p.Cloud && !clear, skyCloud, "cloud emission", "Rec. ITU-R P.618 §3, through the rain")
	add(p.Rain && !clear, skyRain, "rain emission", "Rec. ITU-R P.618 §3")
	add(around.SpillOver != nil, skyGround, "ground", "spill-over times the ground's brightness")
	add(around.ManMade > 0, skyManMade, "man-made noise", "Rec. ITU-R P.372 Part 6, the median of a short vertical antenna")
	return n
}

// Parts names the contributors.
func (n *SkyNoise) Parts() []NoisePart { return n.parts }

// Kelvins implements NoiseModel.
func (n *SkyNoise) Kelvins(g *Geometry, into []float64) error {
	s, err := n.at(g)
	if err != nil {
		return err
	}
	gas, cloud, rain := transmission(s.Gas), transmission(s.Cloud), transmission(s.Rain)
	if n.clear {
		gas, cloud, rain = transmission(s.ClearGas), 1, 1
	}
	spill := 0.0
	if n.around.SpillOver != nil {
		spill = n.around.SpillOver.Value(g.Elevation)
	}
	sky, through := 1-spill, gas*cloud*rain
	all := [skyParts]float64{
		skyCosmic:   sky * n.cosmic * through,
		skyGalactic: sky * n.galactic * through,
		skyGas:      sky * n.medium * (1 - gas) * cloud * rain,
		skyCloud:    sky * n.medium * (1 - cloud) * rain,
		skyRain:     sky * n.medium * (1 - rain),
		skyGround:   spill * n.around.Ground.Kelvins(),
		skyManMade:  n.around.ManMade.Kelvins(),
	}
	for i, kind := range n.kinds {
		into[i] = all[kind]
	}
	return nil
}

// Notes tells what is taken for granted.
func (n *SkyNoise) Notes() []Note {
	out := []Note{{Assumption, "antenna temperature worked out: the sky at the beam's elevation over the share of the pattern that sees it, the ground over the rest"}}
	if n.around.ManMade > 0 {
		out = append(out, Note{Assumption, "man-made noise is the median that a short vertical antenna at the ground takes in; an antenna that looks up takes in less, to which no Recommendation puts a figure"})
	}
	return out
}
