package measured

import (
	"math"
)

// Trend is how measured less predicted changes with something.
type Trend struct {
	By  string
	Fit *Fit // nil: too few samples, or they do not vary
}

// by is what a quantity may change with.
type by struct {
	name  string
	more  []Parameter // beside the bias; the unit is what follows that of the quantity
	row   func(p *Point, t float64) []float64
	needs Quantity // is in the log; negative: nothing
}

const noQuantity Quantity = -1

var trendsBy = []by{
	{"alone", nil, func(*Point, float64) []float64 { return nil }, noQuantity},
	{"elevation", []Parameter{{Name: "slope by elevation", Unit: " per 10 deg"}}, func(p *Point, _ float64) []float64 { return []float64{p.ElevationDeg / 10} }, noQuantity},
	{"time", []Parameter{{Name: "slope by time", Unit: " per h"}}, func(_ *Point, t float64) []float64 { return []float64{t / 3600} }, noQuantity},
	{"azimuth", []Parameter{{Name: "more in the north"}, {Name: "more in the east"}}, func(p *Point, _ float64) []float64 {
		s, c := math.Sincos(p.AzimuthDeg * math.Pi / 180)
		return []float64{c, s}
	}, noQuantity},
	{"rain rate", []Parameter{{Name: "slope by rain rate", Unit: " per mm/h"}}, func(p *Point, _ float64) []float64 { return []float64{p.Get(RainMmH)} }, RainMmH},
	{"humidity", []Parameter{{Name: "slope by humidity", Unit: " per 10 %"}}, func(p *Point, _ float64) []float64 { return []float64{p.Get(HumidityPct) / 10} }, HumidityPct},
	{"beacon", []Parameter{{Name: "slope by the beacon's level", Unit: " per dB"}}, func(p *Point, _ float64) []float64 { return []float64{p.Get(BeaconDB)} }, BeaconDB},
}

// Trends returns the bias of a quantity alone, then with its slope by elevation, time, and
// direction, and by the weather that was logged, each by a robust fit of its own. Points of
// other states than Used are left out; outliers are listed in the fits, and the points stay
// as they are.
func Trends(points []Point, q Quantity) []Trend {
	var out []Trend
	for _, c := range trendsBy {
		if c.needs != noQuantity && pairOf(points, c.needs) == noQuantity {
			continue
		}
		names := []Parameter{{Name: "bias", Unit: Unit(q)}}
		for _, m := range c.more {
			names = append(names, Parameter{Name: m.Name, Unit: Unit(q) + m.Unit})
		}
		d := &series{}
		for i := range points {
			p := &points[i]
			r := p.Residual(q)
			if p.State != Used || math.IsNaN(r) || c.needs != noQuantity && math.IsNaN(p.Get(c.needs)) {
				continue
			}
			t := p.At.Sub(points[0].At).Seconds()
			d.t, d.y, d.x = append(d.t, t), append(d.y, r), append(d.x, append([]float64{1}, c.row(p, t)...))
		}
		f, err := d.solve(names)
		if err != nil {
			f = nil
		}
		out = append(out, Trend{c.name, f})
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
