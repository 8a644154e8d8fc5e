package measured

import (
	"fmt"
	"math"
)

// LevelOptions say what to fit to a level beside its offset.
type LevelOptions struct {
	Quantity Quantity // PowerDBm, RelativePowerDB, CN0DBHz or EbN0DB
	// BeamDeg is between the half-power points; 0: not known. Greater than 0: the error of
	// the antenna's mount is fitted. With the antenna's angles logged, and its aim moving by
	// them, both biases with their signs; else the square of the azimuth error, which costs
	// 12 (A cos ε / BeamDeg)² dB at the elevation ε.
	BeamDeg float64
	// Noise asks for a noise temperature added to the predicted one, at the first amplifier.
	Noise bool
}

// FitLevel fits measured less predicted level. Points of other states than Used are left
// out, and what looks saturated or wet, or points the antenna elsewhere, is marked in
// points and left out, too. Relative power has the slope of its scale as a parameter. What
// the samples cannot tell apart at all is left out and told.
func FitLevel(points []Point, o LevelOptions) (*Fit, error) {
	m := newLevelModel(points, o)
	m.mark()
	m.gather()
	if len(m.data.y) < least(1) {
		return nil, fmt.Errorf("fit of %s: %w: %d within a pass", o.Quantity, errTooFew, len(m.data.y))
	}
	stay, told := leaveOut(m.data.rows(m.at, len(m.terms)), m.names())
	m.keep(stay)
	f, err := m.data.solveCurved(m.at, m.linear(), m.names())
	if err != nil {
		return nil, fmt.Errorf("fit of %s: %w", o.Quantity, err)
	}
	f.mark(points, m.index)
	f.Advice = append(f.Advice, told...)
	f.Advice = append(f.Advice, m.hidden()...)
	return f, nil
}

// mark turns outliers from rows into points.
func (f *Fit) mark(points []Point, index []int) {
	for i, r := range f.Outliers {
		f.Outliers[i] = index[r]
		points[index[r]].State = Outlier
	}
}

// levelTerm is a parameter of a level and what it does at a point.
type levelTerm struct {
	Parameter
	// at adds to the value of the model and returns the slope by the parameter at b.
	at     func(p *Point, b float64) (value, slope float64)
	curved bool
}

// levelModel is the difference of a level from its prediction.
type levelModel struct {
	o      LevelOptions
	points []Point
	terms  []levelTerm
	known  func(p *Point) float64 // the part of it that is known, dB
	middle float64                // of the predicted level
	data   series
	index  []int // of the points of the rows
}

func (m *levelModel) names() []Parameter {
	out := make([]Parameter, len(m.terms))
	for i := range m.terms {
		out[i] = m.terms[i].Parameter
	}
	return out
}

func (m *levelModel) linear() bool {
	for i := range m.terms {
		if m.terms[i].curved {
			return false
		}
	}
	return true
}

func (m *levelModel) keep(which []int) {
	var out []levelTerm
	for _, j := range which {
		out = append(out, m.terms[j])
	}
	m.terms = out
}

// at is the model as a curve.
func (m *levelModel) at(i int, b, slopes []float64) float64 {
	p, sum := &m.points[m.index[i]], 0.0
	for j := range m.terms {
		v, s := m.terms[j].at(p, b[j])
		sum, slopes[j] = sum+v, s
	}
	return sum
}

// linearTerm is a parameter that goes with a column.
func linearTerm(name, unit string, column func(p *Point) float64) levelTerm {
	return levelTerm{Parameter: Parameter{Name: name, Unit: unit}, at: func(p *Point, b float64) (float64, float64) {
		c := column(p)
		return b * c, c
	}}
}

func newLevelModel(points []Point, o LevelOptions) *levelModel {
	m := &levelModel{o: o, points: points, known: func(*Point) float64 { return 0 }}
	m.terms = append(m.terms, linearTerm("offset", "dB", func(*Point) float64 { return 1 }))
	if o.Quantity == RelativePowerDB {
		m.middle = middlePrediction(points, o.Quantity)
		m.terms = append(m.terms, linearTerm("slope of the receiver's scale less 1", "dB/dB", func(p *Point) float64 { return p.Predicted(o.Quantity) - m.middle }))
	}
	if o.BeamDeg > 0 {
		m.aim()
	}
	if o.Noise && (o.Quantity == CN0DBHz || o.Quantity == EbN0DB) && knowsNoise(points) {
		m.terms = append(m.terms, addedNoise(-1))
	}
	return m
}

// gather makes the rows of what is used.
func (m *levelModel) gather() {
	for i := range m.points {
		p := &m.points[i]
		r := p.Residual(m.o.Quantity) - m.known(p)
		if p.State != Used || math.IsNaN(r) {
			continue
		}
		m.data.t, m.data.y, m.index = append(m.data.t, p.At.Sub(m.points[0].At).Seconds()), append(m.data.y, r), append(m.index, i)
	}
}

// hidden says what a level cannot tell.
func (m *levelModel) hidden() []string {
	var out []string
	noise := false
	for i := range m.terms {
		noise = noise || m.terms[i].Name == addedNoiseName
	}
	switch q := m.o.Quantity; {
	case q == RelativePowerDB:
		out = append(out, "the power is relative: its offset and the slope of its scale tell nothing of the link")
	case q == PowerDBm:
		out = append(out, "the transmitter's power, the path and the antenna's gain cost the same at every elevation: they are in the offset together; noise is not in a received power")
	case noise:
		out = append(out, "the transmitter's power, the path and the antenna's gain are in the offset together; noise is told from them by how much less it weighs where the sky is warm")
	default:
		out = append(out, "the transmitter's power, the path, the antenna's gain and the noise (so G/T) are in the offset together")
	}
	if m.o.BeamDeg > 0 && !m.signed() {
		out = append(out, "an error of the elevation alone costs the same everywhere and is in the offset; log the antenna's angles while it scans across to tell it")
	}
	return out
}
