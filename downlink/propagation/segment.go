package propagation

import "math"

// segment is a span of elevations over which every part of a path is smooth, as a
// table even in a variable that straightens the parts: the square root near the
// horizon, where rain goes with the root of the sine, the logarithm above, and the
// root of the angle to the zenith near it, where rain goes with the root of the
// horizontal projection.
type segment struct {
	low, high float64 // deg
	variable  variable
	start     float64 // of the variable
	perStep   float64 // nodes per unit of the variable
	last      int     // highest first node of a cell
	nodes     [][columns]float64
}

type variable int

const (
	linear variable = iota
	root
	logarithm
	zenithRoot
)

func (v variable) of(elDeg float64) float64 {
	switch v {
	case root:
		return math.Sqrt(elDeg)
	case logarithm:
		return math.Log(elDeg)
	case zenithRoot:
		return math.Sqrt(90 - elDeg)
	}
	return elDeg
}

func (v variable) inverse(x float64) float64 {
	switch v {
	case root:
		return x * x
	case logarithm:
		return math.Exp(x)
	case zenithRoot:
		return 90 - x*x
	}
	return x
}

const (
	segmentTolerance  = 2e-5 // dB, at the thirds of the cells while the table is built
	relativeTolerance = 2e-7
	fewestNodes       = 16
	mostNodes         = 1 << 12
)

// newSegment doubles the nodes until the table agrees with the model between them.
func newSegment(m *pathModel, low, high float64) segment {
	v := logarithm
	switch {
	case high <= 0:
		v = linear
	case high <= 5:
		v = root
	case high == 90:
		v = zenithRoot
	}
	for n := fewestNodes; ; n *= 2 {
		s := fillSegment(m, v, low, high, n)
		if n >= mostNodes || s.agrees(m) {
			return s
		}
	}
}

func fillSegment(m *pathModel, v variable, low, high float64, n int) segment {
	s := segment{low: low, high: high, variable: v, start: v.of(low), last: n - 3, nodes: make([][columns]float64, n)}
	s.perStep = float64(n-1) / (v.of(high) - s.start)
	for i := range s.nodes {
		s.evaluate(m, s.elevation(float64(i)), &s.nodes[i])
	}
	return s
}

// elevation returns the elevation of a place counted in nodes. It stays under the
// segment's upper end, where the next segment's branch of a formula may begin.
func (s *segment) elevation(u float64) float64 {
	el := s.variable.inverse(s.start + u/s.perStep)
	top := s.high
	if top < 90 {
		top = math.Nextafter(top, 0)
	}
	return math.Max(s.low, math.Min(el, top))
}

func (s *segment) evaluate(m *pathModel, elDeg float64, into *[columns]float64) {
	gas := m.gas.at(elDeg)
	clearGas := gas
	if m.clearGas != m.gas {
		clearGas = m.clearGas.at(elDeg)
	}
	m.fill(into, elDeg, gas, clearGas)
}

// agrees compares the table with the model at the thirds of every cell.
func (s *segment) agrees(m *pathModel) bool {
	var want, got [columns]float64
	for i := 0; i < len(s.nodes)-1; i++ {
		for _, third := range [...]float64{1.0 / 3, 2.0 / 3} {
			el := s.elevation(float64(i) + third)
			s.evaluate(m, el, &want)
			s.at(el, &got)
			for c := range want {
				a, b := want[c], got[c]
				if c == colScintillation {
					a, b = math.Sqrt(a), math.Sqrt(b)
				}
				if !(math.Abs(a-b) <= segmentTolerance+relativeTolerance*a) {
					return false
				}
			}
		}
	}
	return true
}

// at interpolates by the cubic through the four nearest nodes. A value that comes out
// under 0 by the interpolation of a part that reaches 0 is 0.
func (s *segment) at(elDeg float64, into *[columns]float64) {
	u := (s.variable.of(elDeg) - s.start) * s.perStep
	i := max(1, min(int(u), s.last))
	t := u - float64(i)
	p, q, r := t+1, t-1, t-2
	w0, w1, w2, w3 := -t*q*r/6, p*q*r/2, -p*t*r/2, p*t*q/6
	n := s.nodes[i-1 : i+3 : i+3]
	for c := range into {
		value := w0*n[0][c] + w1*n[1][c] + w2*n[2][c] + w3*n[3][c]
		if value < 0 {
			value = 0
		}
		into[c] = value
	}
}
