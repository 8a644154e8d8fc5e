package measured

import (
	"fmt"
	"math"
	"slices"
)

// LevelOptions say what to fit to a level beside its offset.
type LevelOptions struct {
	Quantity Quantity // PowerDBm, RelativePowerDB, CN0DBHz or EbN0DB
	// BeamDeg is between the half-power points. Greater than 0: an azimuth error of the
	// antenna's mount is fitted, which costs 12 (A cos ε / BeamDeg)² dB at the elevation ε.
	BeamDeg float64
}

// FitLevel fits measured less predicted level. Points of other states than Used are left
// out, and what looks saturated or wet is marked in points and left out, too. An error of
// both axes, or of the elevation alone, costs the same everywhere and hides in the offset.
func FitLevel(points []Point, o LevelOptions) (*Fit, error) {
	markSaturated(points, o.Quantity)
	markDropouts(points, o.Quantity)
	markWet(points, o.Quantity)
	var t, y []float64
	var x [][]float64
	var rows []int
	for i := range points {
		p := &points[i]
		r := p.Residual(o.Quantity)
		if p.State != Used || math.IsNaN(r) {
			continue
		}
		row := []float64{1}
		el := p.ElevationDeg * math.Pi / 180
		if o.BeamDeg > 0 {
			c := math.Cos(el) / o.BeamDeg
			row = append(row, -12*c*c)
		}
		t, y, x, rows = append(t, p.At.Sub(points[0].At).Seconds()), append(y, r), append(x, row), append(rows, i)
	}
	names := []Parameter{{Name: "offset", Unit: "dB"}}
	if o.BeamDeg > 0 {
		names = append(names, Parameter{Name: "square of the azimuth error", Unit: "deg2"})
	}
	f, err := solve(t, y, x, names)
	if err != nil {
		return nil, fmt.Errorf("fit of %s: %w", o.Quantity, err)
	}
	f.mark(points, rows)
	if o.BeamDeg > 0 {
		f.Advice = append(f.Advice, "an error of the elevation, of the transmitter's power and of G/T all cost the same at every elevation: they are in the offset together")
	}
	if o.Quantity == RelativePowerDB {
		f.Advice = append(f.Advice, "the power is relative: its offset tells nothing of the link")
	}
	return f, nil
}

// mark turns outliers from rows into points.
func (f *Fit) mark(points []Point, rows []int) {
	for i, r := range f.Outliers {
		f.Outliers[i] = rows[r]
		points[rows[r]].State = Outlier
	}
}

// markSaturated marks runs of the greatest value while the prediction moves by 1 dB or more.
func markSaturated(points []Point, q Quantity) {
	top := math.Inf(-1)
	for i := range points {
		if v := points[i].Get(q); v > top {
			top = v
		}
	}
	low, high, n := math.Inf(1), math.Inf(-1), 0
	for i := range points {
		if points[i].Get(q) == top && !math.IsNaN(points[i].Predicted(q)) {
			low, high, n = min(low, points[i].Predicted(q)), max(high, points[i].Predicted(q)), n+1
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

func markDropouts(points []Point, q Quantity) {
	middle := medianResidual(points, q)
	for i := range points {
		if points[i].State == Used && points[i].Residual(q) < middle-farBelow {
			points[i].State = Dropout
		}
	}
}

func medianResidual(points []Point, q Quantity) float64 {
	var r []float64
	for i := range points {
		if v := points[i].Residual(q); points[i].State == Used && !math.IsNaN(v) {
			r = append(r, v)
		}
	}
	if len(r) == 0 {
		return math.NaN()
	}
	slices.Sort(r)
	return r[len(r)/2]
}

// looksWet is how far a median of wetWidth samples lies below the log's when no weather was
// logged and rain is suspected.
const looksWet, wetWidth = 1.5, 15

// markWet marks samples under rain as measured; without weather those whose running median
// falls well below the log's.
func markWet(points []Point, q Quantity) {
	known := false
	for i := range points {
		if rain := points[i].Get(RainMmH); !math.IsNaN(rain) {
			known = true
			if rain > 0 && points[i].State == Used {
				points[i].State = Wet
			}
		}
	}
	if known {
		return
	}
	middle := medianResidual(points, q)
	var wet []int
	for i := range points {
		lo, hi := max(0, i-wetWidth/2), min(len(points), i+wetWidth/2+1)
		if hi-lo == wetWidth && medianResidual(points[lo:hi], q) < middle-looksWet {
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
