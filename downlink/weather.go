package downlink

import (
	"math"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// Weather brings a prepared path of the air into a link as the terms of its
// attenuation. What the path does not hold, as rain where no rain rate is known, has
// no term. It is a PathModel.
type Weather struct {
	air
	parts propagation.Parts
}

// air is a path as the link's models read it: with its weather, or the gas of the
// ordinary air alone.
type air struct {
	path  *propagation.Path
	clear bool
}

// NewWeather returns the attenuation that is exceeded for the path's percentage.
func NewWeather(path *propagation.Path) *Weather {
	return &Weather{air{path: path}, path.Parts()}
}

// NewClearSky returns the attenuation of the same path under a clear sky: the gas of
// the ordinary air.
func NewClearSky(path *propagation.Path) *Weather {
	return &Weather{air{path: path, clear: true}, propagation.Parts{Gas: path.Parts().Gas}}
}

// at returns what the path takes at a geometry; the models of one sample share it.
func (a *air) at(g *Geometry) (*propagation.Sample, error) {
	if g.airOf != a.path {
		s, err := a.path.At(g.Elevation)
		if err != nil {
			return nil, err
		}
		g.air, g.airOf = s, a.path
	}
	return &g.air, nil
}

// Terms names the parts of the path that are known, and what P.618's rule takes off
// their sum, which is given back.
func (w *Weather) Terms() []TermInfo {
	var out []TermInfo
	add := func(is bool, name string, sign int, source string) {
		if is {
			out = append(out, TermInfo{name, sign, "dB", source})
		}
	}
	p := w.parts
	add(p.Gas, "gas attenuation", -1, "Rec. ITU-R P.676, line by line along the bent ray")
	add(p.Cloud, "cloud attenuation", -1, "Rec. ITU-R P.840")
	add(p.Rain, "rain attenuation", -1, "Rec. ITU-R P.618 with P.838")
	add(p.Scintillation, "scintillation", -1, "Rec. ITU-R P.618, tropospheric")
	add(w.combined(), "atmospheric combination", 1, "Rec. ITU-R P.618 §2.5: what its rule takes off the sum")
	return out
}

// combined tells whether the rule changes the sum: scintillation beside rain or cloud.
func (w *Weather) combined() bool { return w.parts.Scintillation && (w.parts.Rain || w.parts.Cloud) }

// Losses implements PathModel; it fails where the ray is blocked by the horizon.
func (w *Weather) Losses(g *Geometry, into []float64) error {
	s, err := w.at(g)
	if err != nil {
		return err
	}
	i := 0
	put := func(is bool, v unit.DB) {
		if is {
			into[i] = float64(v)
			i++
		}
	}
	if w.clear {
		put(w.parts.Gas, s.ClearGas)
		return nil
	}
	put(w.parts.Gas, s.Gas)
	put(w.parts.Cloud, s.Cloud)
	put(w.parts.Rain, s.Rain)
	put(w.parts.Scintillation, s.Scintillation)
	put(w.combined(), s.Combination)
	return nil
}

// Notes tells what the path assumes.
func (w *Weather) Notes() []Note {
	if w.clear {
		return []Note{{Assumption, "clear sky: gas of the ordinary air only, no cloud, rain or scintillation"}}
	}
	return pathNotes(w.path.Notes())
}

// pathNotes are the notes of a path as a link tells them.
func pathNotes(list []propagation.Note) []Note {
	var all []Note
	for _, n := range list {
		all = append(all, Note{[...]NoteKind{propagation.Assumption: Assumption, propagation.Default: Default, propagation.Warning: Warning}[n.Kind], n.Text})
	}
	return all
}

// Lowest returns the lowest geometric elevation at which the models have values.
func (w *Weather) Lowest() unit.Angle { return w.path.Lowest() }

// transmission returns the share of a power that gets through an attenuation in dB.
func transmission(db unit.DB) float64 { return math.Exp(-float64(db) * (math.Ln10 / 10)) }
