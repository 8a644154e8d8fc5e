package measured

import (
	"math"
)

// Names of the parameters of the antenna's aim.
const (
	azimuthBias   = "azimuth error"
	elevationBias = "elevation error"
)

// enoughAim is by how much of the beam, as a standard deviation, the logged angles must
// move around the spacecraft to tell the sign of an error; lostAim is from where on the
// antenna looks elsewhere.
const enoughAim, lostAim = 0.05, 0.6

// aim adds the error of the mount. A beam falls by 12 (θ/BeamDeg)² dB at the angle θ off
// its axis, the parabola through the half-power points (common practice).
func (m *levelModel) aim() {
	beam := m.o.BeamDeg
	loss := 12 / (beam * beam)
	cosine := func(p *Point) float64 { return math.Cos(p.ElevationDeg * math.Pi / 180) }
	across := func(p *Point) float64 { return p.Residual(AzimuthDeg) * cosine(p) }
	up := func(p *Point) float64 { return p.Residual(ElevationDeg) }
	scansAcross, scansUp := m.scatter(across) > enoughAim*beam, m.scatter(up) > enoughAim*beam
	if scansAcross {
		m.terms = append(m.terms, levelTerm{Parameter: Parameter{Name: azimuthBias, Unit: "deg"}, curved: true, at: func(p *Point, b float64) (float64, float64) {
			c := cosine(p)
			d := across(p) + b*c
			return -loss*d*d + loss*across(p)*across(p), -2 * loss * d * c
		}})
	} else {
		m.terms = append(m.terms, linearTerm("square of the azimuth error", "deg2", func(p *Point) float64 { return -loss * cosine(p) * cosine(p) }))
	}
	if scansUp {
		m.terms = append(m.terms, levelTerm{Parameter: Parameter{Name: elevationBias, Unit: "deg"}, curved: true, at: func(p *Point, b float64) (float64, float64) {
			d := up(p) + b
			return -loss*d*d + loss*up(p)*up(p), -2 * loss * d
		}})
	}
	m.known = func(p *Point) float64 {
		sum := 0.0
		if scansAcross {
			sum += across(p) * across(p)
		}
		if scansUp {
			sum += up(p) * up(p)
		}
		return -loss * sum
	}
	if !scansAcross && !scansUp {
		return
	}
	for i := range m.points {
		p := &m.points[i]
		a, e := across(p), up(p)
		switch far := math.Hypot(a, e); {
		case p.State != Used:
		case scansAcross && math.IsNaN(a) || scansUp && math.IsNaN(e):
			p.State = Astray
		case far > lostAim*beam:
			p.State = Astray
		}
	}
}

// signed tells whether the biases of the axes are fitted with their signs.
func (m *levelModel) signed() bool {
	for i := range m.terms {
		if m.terms[i].Name == elevationBias {
			return true
		}
	}
	return false
}

// scatter is the standard deviation of a value over the points near the beam; 0 where it is not known.
func (m *levelModel) scatter(of func(p *Point) float64) float64 {
	var v []float64
	for i := range m.points {
		if x := of(&m.points[i]); m.points[i].State == Used && !math.IsNaN(x) && math.Abs(x) < lostAim*m.o.BeamDeg {
			v = append(v, x)
		}
	}
	if len(v) < least(1) {
		return 0
	}
	mean, sum := 0.0, 0.0
	for _, x := range v {
		mean += x / float64(len(v))
	}
	for _, x := range v {
		sum += (x - mean) * (x - mean)
	}
	return math.Sqrt(sum / float64(len(v)))
}
