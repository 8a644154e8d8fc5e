package measured

import (
	"cmp"
	"math"
	"slices"
)

// mark marks what is not to be used for a level.
func (m *levelModel) mark() {
	m.markSaturated()
	slope := 0.0
	if m.o.Quantity == RelativePowerDB {
		slope = m.roughSlope()
	}
	rough := func(p *Point) float64 {
		return p.Residual(m.o.Quantity) - m.known(p) - slope*(p.Predicted(m.o.Quantity)-m.middle)
	}
	markDropouts(m.points, rough)
	markWet(m.points, rough)
}

// roughSlope is the median slope of residuals over the prediction, over pairs half a log
// apart in the order of the prediction (Theil's estimator on some of the pairs).
func (m *levelModel) roughSlope() float64 {
	type pair struct{ x, y float64 }
	var v []pair
	for i := range m.points {
		p := &m.points[i]
		if r := p.Residual(m.o.Quantity); p.State == Used && !math.IsNaN(r) {
			v = append(v, pair{p.Predicted(m.o.Quantity), r})
		}
	}
	slices.SortFunc(v, func(a, b pair) int { return cmp.Compare(a.x, b.x) })
	var slopes []float64
	half := len(v) / 2
	for i := range half {
		a, b := v[i], v[i+half]
		if b.x-a.x > 0.5 {
			slopes = append(slopes, (b.y-a.y)/(b.x-a.x))
		}
	}
	return median(slopes)
}

func middlePrediction(points []Point, q Quantity) float64 {
	var v []float64
	for i := range points {
		if x := points[i].Predicted(q); points[i].State == Used && !math.IsNaN(x) {
			v = append(v, x)
		}
	}
	return median(v)
}

// markSaturated marks runs of the greatest value while the prediction moves by 1 dB or more.
func (m *levelModel) markSaturated() {
	points, q := m.points, m.o.Quantity
	top := math.Inf(-1)
	for i := range points {
		if v := points[i].Get(q); v > top {
			top = v
		}
	}
	low, high, n := math.Inf(1), math.Inf(-1), 0
	for i := range points {
		if v := points[i].Predicted(q); points[i].Get(q) == top && !math.IsNaN(v) {
			low, high, n = min(low, v), max(high, v), n+1
		}
	}
	if n < 4 || high-low < 1 {
		return
	}
	for i := range points {
		if points[i].Get(q) == top && points[i].State == Used {
			points[i].State = Saturated
		}
	}
}

// farBelow is from how many dB below the middle on a sample is a dropout.
const farBelow = 12

func markDropouts(points []Point, of func(p *Point) float64) {
	middle := medianOf(points, of)
	for i := range points {
		if points[i].State == Used && of(&points[i]) < middle-farBelow {
			points[i].State = Dropout
		}
	}
}

func medianOf(points []Point, of func(p *Point) float64) float64 {
	var r []float64
	for i := range points {
		if v := of(&points[i]); points[i].State == Used && !math.IsNaN(v) {
			r = append(r, v)
		}
	}
	if len(r) == 0 {
		return math.NaN()
	}
	return median(r)
}

// looksWet is how far a median of wetWidth samples lies below the log's when no weather was
// logged and rain is suspected; beaconWet is how far below its middle the beacon lies then.
const looksWet, wetWidth, beaconWet = 1.5, 15, 1.0

// markWet marks samples under rain as it was measured or as the beacon tells; without
// either those whose running median falls well below the log's.
func markWet(points []Point, of func(p *Point) float64) {
	known := false
	beacon := medianOf(points, func(p *Point) float64 { return p.Get(BeaconDB) })
	for i := range points {
		p := &points[i]
		rain, faded := p.Get(RainMmH), p.Get(BeaconDB) < beacon-beaconWet
		known = known || !math.IsNaN(rain) || !math.IsNaN(beacon)
		if p.State == Used && (rain > 0 || faded) {
			p.State = Wet
		}
	}
	if known {
		return
	}
	middle := medianOf(points, of)
	var wet []int
	for i := range points {
		lo, hi := max(0, i-wetWidth/2), min(len(points), i+wetWidth/2+1)
		if hi-lo == wetWidth && medianOf(points[lo:hi], of) < middle-looksWet {
			wet = append(wet, i)
		}
	}
	for _, i := range wet {
		if points[i].State == Used {
			points[i].State = Wet
		}
	}
}

// Count returns how many points are in each state.
func Count(points []Point) map[State]int {
	out := map[State]int{}
	for i := range points {
		out[points[i].State]++
	}
	return out
}
