package sizing

import (
	"fmt"
	"math"
	"strings"

	"slantwise/orbit/unit"
)

// Axis is the second parameter of a map beside the diameter.
type Axis string

// Axes.
const (
	PowerAxis     Axis = "power"     // dB added to the transmit power
	ElevationAxis Axis = "elevation" // degrees that the least elevation is raised by
	NoiseAxis     Axis = "noise"     // K added to the system noise
	FrequencyAxis Axis = "frequency" // MHz of the carrier; antennas keep their areas, the spacecraft its EIRP
)

// Axes lists them.
var Axes = []Axis{PowerAxis, ElevationAxis, NoiseAxis, FrequencyAxis}

// values are what is tried along an axis.
func (a Axis) values(s *Study) []float64 {
	switch a {
	case PowerAxis:
		return []float64{-6, -4.5, -3, -1.5, 0, 1.5, 3, 4.5, 6}
	case ElevationAxis:
		return []float64{0, 2.5, 5, 7.5, 10, 15, 20, 25, 30}
	case NoiseAxis:
		return []float64{-30, -15, 0, 15, 30, 60, 90, 120, 150}
	}
	own := s.spec.Places[s.spec.Sites[0]].Clear.Transmitter.Frequency.Megahertz()
	var out []float64
	for _, ratio := range []float64{0.25, 0.5, 0.75, 1, 1.5, 2, 3, 4} {
		out = append(out, own*ratio)
	}
	return out
}

// Plane is a map of two parameters: bytes a day, and by how much the worst requirement
// is missed or surpassed.
type Plane struct {
	Axis      Axis
	Diameters []unit.Length
	Values    []float64   // along the axis
	Bytes     [][]float64 // by value, then by diameter
	Over      [][]float64 // likewise: least share by which the requirements are surpassed, decibels as tenths; NaN without any
	Just      []float64   // by value: the diameter in m at which all are just met, straight between those tried; NaN: none

	Planned int      // every so many passes were planned
	LeftOut []string // values of the axis for which the links cannot be made, and why
	Error   float64  // greatest share by which that misses the bytes of all passes, at the ends and in the middle of the diameters
}

// Refit makes the places of the sites for another frequency.
type Refit func(f unit.Frequency) ([]Place, error)

// thinnedTo is the number of passes that a map plans, at least.
const thinnedTo = 400

// Plane evaluates a map over a range of diameters. Latency and the worst week are not
// asked for in it. Maps plan some of the passes only; the error of that is told.
func (s *Study) Plane(axis Axis, r Range, refit Refit, progress func(done, total int)) (*Plane, error) {
	if err := r.Check(); err != nil {
		return nil, err
	}
	r.Steps = 13
	p := &Plane{Axis: axis, Diameters: r.Grid(), Planned: max(1, len(s.turns)/thinnedTo)}
	needs := s.spec.Needs
	needs.Latency, needs.WorstWeekBytesPerDay = math.NaN(), math.NaN()
	list := needs.List()
	values := axis.values(s)
	for k, value := range values {
		of, v, err := s.alongAxis(axis, value, refit)
		if err != nil { // a table that does not reach a frequency, as an antenna's noise
			p.LeftOut = append(p.LeftOut, fmt.Sprintf("%g: %v", value, err))
			continue
		}
		v.thin = p.Planned
		bytes, over, just, err := of.row(p.Diameters, list, v)
		if err != nil {
			return nil, fmt.Errorf("%s %g: %w", axis, value, err)
		}
		p.Values = append(p.Values, value)
		p.Bytes, p.Over, p.Just = append(p.Bytes, bytes), append(p.Over, over), append(p.Just, just)
		if progress != nil {
			progress(k+1, len(values))
		}
	}
	if len(p.Values) == 0 {
		return nil, fmt.Errorf("map over %s: %s", axis, strings.Join(p.LeftOut, "; "))
	}
	return p, s.thinError(p, r)
}

// alongAxis is the study and the variant of a value.
func (s *Study) alongAxis(axis Axis, value float64, refit Refit) (*Study, Variant, error) {
	switch axis {
	case PowerAxis:
		return s, Variant{Power: unit.DB(value)}, nil
	case ElevationAxis:
		return s, Variant{Raise: unit.Angle(value) * unit.Degree}, nil
	case NoiseAxis:
		return s, Variant{Noise: unit.Temperature(value)}, nil
	}
	places, err := refit(unit.Frequency(value) * unit.Megahertz)
	if err != nil {
		return nil, Variant{}, err
	}
	spec := s.spec
	spec.Places = places
	of, err := NewStudy(spec)
	if err != nil {
		return nil, Variant{}, err
	}
	of.turning, of.shared = s.turning, s.shared // the passes are the same
	return of, Variant{}, nil
}

// row evaluates the diameters of one value, and where all needs are just met.
func (s *Study) row(diameters []unit.Length, needs []Need, v Variant) (bytes, over []float64, just float64, err error) {
	q := search{study: s, needs: needs, parts: planned}
	for _, n := range needs {
		q.parts |= n.part
	}
	each := make([][]float64, len(needs))
	for _, d := range diameters {
		v.Diameter = d
		o, err := s.outcome(v, q.parts)
		if err != nil {
			return nil, nil, 0, err
		}
		worst := math.NaN()
		if len(needs) > 0 {
			worst = q.worst(o)
		}
		bytes, over = append(bytes, o.BytesPerDay), append(over, worst)
		for i := range needs {
			each[i] = append(each[i], needs[i].Over(o))
		}
	}
	if len(needs) == 0 {
		return bytes, over, math.NaN(), nil
	}
	return bytes, over, together(diameters, over, each), nil
}

// together is where a row comes to meet all: the last of the needs' own crossings, each
// straight between two diameters. Where needs are not met together there, as one has
// failed again, the crossing of the worst.
func together(diameters []unit.Length, worst []float64, each [][]float64) float64 {
	last := 0.0
	for _, over := range each {
		c := crossing(diameters, over)
		if math.IsNaN(c) {
			return c
		}
		last = max(last, c)
	}
	for i, d := range diameters {
		if d.Metres() >= last*(1-1e-12) {
			if worst[i] >= 0 {
				return last
			}
			break
		}
	}
	return crossing(diameters, worst)
}

// crossing returns the first diameter at which a row comes to 0 from below, straight in
// the logarithm of the diameter; the first of all where it is over 0 there already.
func crossing(diameters []unit.Length, over []float64) float64 {
	if over[0] >= 0 {
		return diameters[0].Metres()
	}
	for i := 1; i < len(over); i++ {
		a, b := over[i-1], over[i]
		if a < 0 && b >= 0 {
			if math.IsInf(a, -1) {
				return diameters[i].Metres()
			}
			return diameters[i-1].Metres() * math.Pow(diameters[i].Metres()/diameters[i-1].Metres(), -a/(b-a))
		}
	}
	return math.NaN()
}

// thinError compares the bytes of some of the passes with those of all.
func (s *Study) thinError(p *Plane, r Range) error {
	if p.Planned == 1 {
		return nil
	}
	for _, d := range []unit.Length{r.Low, unit.Length(math.Sqrt(r.Low.Metres() * r.High.Metres())), r.High} {
		all, err := s.outcome(Variant{Diameter: d}, planned)
		if err != nil {
			return err
		}
		some, err := s.outcome(Variant{Diameter: d, thin: p.Planned}, planned)
		if err != nil {
			return err
		}
		if all.BytesPerDay > 0 {
			p.Error = max(p.Error, math.Abs(some.BytesPerDay/all.BytesPerDay-1))
		}
	}
	return nil
}

// Level returns, by value, the diameter in m at which so many bytes a day are reached,
// straight between those tried; NaN where none reaches them.
func (p *Plane) Level(bytes float64) []float64 {
	out := make([]float64, len(p.Values))
	for k := range p.Values {
		over := make([]float64, len(p.Diameters))
		for i, b := range p.Bytes[k] {
			over[i] = b - bytes
		}
		out[k] = crossing(p.Diameters, over)
	}
	return out
}
