package downlink

import (
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// Weather brings a prepared path of the air into a link, as the terms of its
// attenuation and as the noise that the weather adds to a clear sky. It is a PathModel
// and a NoiseModel.
type Weather struct{ path *propagation.Path }

// NewWeather returns the models of a path.
func NewWeather(path *propagation.Path) *Weather { return &Weather{path} }

// Terms names gas, cloud, rain and scintillation, and what P.618's rule takes off
// their sum, which is given back.
func (w *Weather) Terms() []TermInfo {
	return []TermInfo{
		{"gas attenuation", -1, "dB", "Rec. ITU-R P.676, line by line along the bent ray"},
		{"cloud attenuation", -1, "dB", "Rec. ITU-R P.840"},
		{"rain attenuation", -1, "dB", "Rec. ITU-R P.618 with P.838"},
		{"scintillation", -1, "dB", "Rec. ITU-R P.618, tropospheric"},
		{"atmospheric combination", 1, "dB", "Rec. ITU-R P.618 §2.5: what its rule takes off the sum of the four"},
	}
}

// Losses implements PathModel; it fails where the ray is blocked by the horizon.
func (w *Weather) Losses(g *Geometry, into []float64) error {
	s, err := w.path.At(g.Elevation)
	if err != nil {
		return err
	}
	into[0], into[1], into[2] = float64(s.Gas), float64(s.Cloud), float64(s.Rain)
	into[3], into[4] = float64(s.Scintillation), float64(s.Combination)
	return nil
}

// Parts names the noise of the weather.
func (w *Weather) Parts() []NoisePart {
	return []NoisePart{{Name: "weather above the clear sky",
		Source: "Rec. ITU-R P.618 §3: gas, cloud and rain emit, scintillation does not; the clear sky stands in the antenna temperature"}}
}

// Kelvins implements NoiseModel. Where the sky behind is hotter than the air, as at
// VHF, weather takes from the noise; that is left out, and the noise so not told too
// low.
func (w *Weather) Kelvins(g *Geometry, into []float64) error {
	sky, err := w.path.Sky(g.Elevation)
	if err != nil {
		return err
	}
	into[0] = max(0, sky.Increase().Kelvins())
	return nil
}

// Notes tells what the path assumes.
func (w *Weather) Notes() []Note {
	var all []Note
	for _, n := range w.path.Notes() {
		all = append(all, Note{[...]NoteKind{propagation.Assumption: Assumption, propagation.Default: Default, propagation.Warning: Warning}[n.Kind], n.Text})
	}
	return all
}

// Lowest returns the lowest geometric elevation at which the models have values.
func (w *Weather) Lowest() unit.Angle { return w.path.Lowest() }
