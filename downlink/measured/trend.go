package measured

import (
	"math"
)

// Trend is how measured less predicted changes with something.
type Trend struct {
	By  string
	Fit *Fit // nil: too few samples, or they do not vary
}

// Trends returns the bias of a quantity alone, then with its slope by elevation, time, and
// direction, each by a robust fit of its own. Points of other states than Used are left
// out; outliers are listed in the fits, and the points stay as they are.
func Trends(points []Point, q Quantity) []Trend {
	var t, y []float64
	var used []*Point
	for i := range points {
		p := &points[i]
		if r := p.Residual(q); p.State == Used && !math.IsNaN(r) {
			t, y, used = append(t, p.At.Sub(points[0].At).Seconds()), append(y, r), append(used, p)
		}
	}
	unit := Unit(q)
	bias := Parameter{Name: "bias", Unit: unit}
	slope := func(name, per string) Parameter { return Parameter{Name: name, Unit: unit + per} }
	var out []Trend
	for _, c := range []struct {
		by    string
		names []Parameter
		row   func(p *Point, t float64) []float64
	}{
		{"alone", []Parameter{bias}, func(*Point, float64) []float64 { return []float64{1} }},
		{"elevation", []Parameter{bias, slope("slope by elevation", " per 10 deg")}, func(p *Point, _ float64) []float64 { return []float64{1, p.ElevationDeg / 10} }},
		{"time", []Parameter{bias, slope("slope by time", " per h")}, func(_ *Point, t float64) []float64 { return []float64{1, t / 3600} }},
		{"azimuth", []Parameter{bias, slope("more in the north", ""), slope("more in the east", "")}, func(p *Point, _ float64) []float64 {
			s, c := math.Sincos(p.AzimuthDeg * math.Pi / 180)
			return []float64{1, c, s}
		}},
	} {
		x := make([][]float64, len(used))
		for i := range used {
			x[i] = c.row(used[i], t[i])
		}
		f, err := (&series{t: t, y: y, x: x}).solve(c.names)
		if err != nil {
			f = nil
		}
		out = append(out, Trend{c.by, f})
	}
	return out
}

// Unit returns the unit of a quantity's differences.
func Unit(q Quantity) string {
	switch q {
	case FrequencyHz:
		return "Hz"
	case AzimuthDeg, ElevationDeg:
		return "deg"
	}
	return "dB"
}

// Compared lists the quantities that have a prediction.
func Compared() []Quantity {
	return []Quantity{PowerDBm, RelativePowerDB, CN0DBHz, EbN0DB, FrequencyHz, AzimuthDeg, ElevationDeg}
}
