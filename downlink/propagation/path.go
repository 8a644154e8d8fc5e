package propagation

import (
	"math"
	"sort"

	"slantwise/orbit/unit"
)

// Sample is what a path takes at one elevation.
type Sample struct {
	Contributions         // gas and cloud at the percentage that P.618's rule takes
	Combination   unit.DB // what the rule takes off their sum, 0 or greater
	Total         unit.DB // Sum less Combination
	ClearGas      unit.DB // gas of the ordinary air, which a clear sky has
}

// Path holds everything that a site's air does at one frequency and percentage,
// prepared in tables over the elevation. At lies within 1e-4 dB of Direct in every
// part (1e-6 of an attenuation above 100 dB). Immutable, safe for use by many
// goroutines; At and Sky do not allocate.
type Path struct {
	spec     PathSpec
	model    *pathModel
	segments []segment
	medium   float64 // K, mean radiating temperature
	behind   float64 // K, background
}

// NewPath prepares a path. It fails where the spec is out of range, and where a curve
// by percentage of the climate does not reach the percentage sought; what the climate
// leaves out altogether stands in Notes.
func NewPath(s PathSpec) (*Path, error) {
	m, err := newPathModel(s)
	if err != nil {
		return nil, err
	}
	p, err := newPathOf(s, m)
	if err != nil {
		return nil, err
	}
	if !s.ClearSky {
		m.notes.add(Assumption, "attenuation exceeded for %s %% of an average year at each elevation: a curve of equal probability, not a storm", number(m.pPct))
	}
	b := m.breaks()
	for i := 1; i < len(b); i++ {
		p.segments = append(p.segments, newSegment(m, b[i-1], b[i]))
	}
	if m.horizon() < 0 {
		m.notes.add(Assumption, "between the lowest geometric elevation of a ray, %.2f deg, and 0 deg rain, cloud and scintillation are those of 0 deg", m.horizon())
	}
	return p, nil
}

// newPathOf returns a path without its tables.
func newPathOf(s PathSpec, m *pathModel) (*Path, error) {
	surface := m.clearGas.layers.atmosphere.at(s.Climate.Height.Kilometres()).tK
	medium, err := MeanRadiatingTemperature(unit.Temperature(surface))
	if err != nil {
		return nil, err
	}
	behind, err := galaxyAndCosmos(s.Frequency)
	return &Path{spec: s, model: m, medium: medium.Kelvins(), behind: behind}, err
}

// Notes tells what the path assumes, took by default, misses or has beyond a stated
// range.
func (p *Path) Notes() []Note { return append([]Note(nil), p.model.notes...) }

// Lowest returns the lowest geometric elevation that the path has values for: the one
// that appears at 0°, or at the sea's edge with BelowHorizontal.
func (p *Path) Lowest() unit.Angle { return unit.Angle(p.model.horizon()) * unit.Degree }

// At returns what the path takes at a geometric elevation from Lowest to 90°.
func (p *Path) At(elevation unit.Angle) (Sample, error) {
	v, err := p.table(elevation)
	if err != nil {
		return Sample{}, err
	}
	return sample(&v), nil
}

// Direct returns the same without tables, the ray traced and every formula evaluated.
func (p *Path) Direct(elevation unit.Angle) (Sample, error) {
	if err := p.check(elevation.Degrees()); err != nil {
		return Sample{}, err
	}
	v, err := p.model.direct(math.Min(90, elevation.Degrees()))
	if err != nil {
		return Sample{}, err
	}
	return sample(&v), nil
}

// Sky is the brightness of the sky in the direction of the spacecraft.
type Sky struct {
	Weather unit.Temperature // through gas, cloud and rain at the path's percentage
	Clear   unit.Temperature // through the gas of the ordinary air
}

// Increase returns how much the weather adds to a clear sky.
func (s Sky) Increase() unit.Temperature { return s.Weather - s.Clear }

// Sky returns the brightness at a geometric elevation, by Rec. ITU-R P.618-14 §3 with
// the galaxy and the cosmic background of P.372-16 behind.
func (p *Path) Sky(elevation unit.Angle) (Sky, error) {
	v, err := p.table(elevation)
	if err != nil {
		return Sky{}, err
	}
	return p.sky(&v), nil
}

func (p *Path) sky(v *[columns]float64) Sky {
	return Sky{unit.Temperature(brightness(v[colGas]+v[colCloud]+v[colRain], p.medium, p.behind)),
		unit.Temperature(brightness(v[colClearGas], p.medium, p.behind))}
}

// CrossPolar returns the discrimination not exceeded for the path's percentage at an
// elevation, and warnings; see CrossPolarDiscrimination. It fails where there is no
// rain on the path.
func (p *Path) CrossPolar(elevation unit.Angle) (unit.DB, []Note, error) {
	v, err := p.table(elevation)
	if err != nil {
		return 0, nil, err
	}
	return CrossPolarDiscrimination(p.spec.Frequency, elevation, p.spec.Tilt, p.spec.Exceedance, unit.DB(v[colRain]))
}

func (p *Path) table(elevation unit.Angle) (v [columns]float64, err error) {
	el := elevation.Degrees()
	if err := p.check(el); err != nil {
		return v, err
	}
	el = math.Max(p.model.horizon(), math.Min(90, el))
	for i := range p.segments {
		if s := &p.segments[i]; el < s.high || i == len(p.segments)-1 {
			s.at(el, &v)
			break
		}
	}
	return v, nil
}

// check allows for the roundings of a conversion at both ends.
func (p *Path) check(elDeg float64) error {
	if low := p.model.horizon(); !(elDeg >= low-roundOffDeg) {
		if err := within("elevation", elDeg, "deg", -90, 90, ""); err != nil {
			return err
		}
		return &BlockedRayError{"geometric", unit.Angle(elDeg) * unit.Degree, p.Lowest()}
	}
	if elDeg <= 90+roundOffDeg {
		return nil
	}
	return within("elevation", elDeg, "deg", p.model.horizon(), 90, "")
}

func sample(v *[columns]float64) Sample {
	s := Sample{Contributions: Contributions{unit.DB(v[colGas]), unit.DB(v[colCloud]), unit.DB(v[colRain]), unit.DB(math.Sqrt(v[colScintillation]))},
		ClearGas: unit.DB(v[colClearGas])}
	s.Total = unit.DB(combined(v[colGas], v[colCloud], v[colRain], v[colScintillation]))
	s.Combination = s.Sum() - s.Total
	return s
}

// sortedUnique sorts and drops what lies within 1e-9 of the one before.
func sortedUnique(v []float64) []float64 {
	sort.Float64s(v)
	kept := v[:1]
	for _, x := range v[1:] {
		if x-kept[len(kept)-1] > 1e-9 {
			kept = append(kept, x)
		}
	}
	return kept
}
