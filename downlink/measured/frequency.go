package measured

import (
	"fmt"
	"math"
	"time"
)

// HertzPerDay is the unit of a drift over a log longer than longLog; it is Hz/s of a shorter one.
const HertzPerDay, longLog = "Hz/d", 6 * time.Hour

// FitFrequency fits measured less predicted frequency: an offset of the transmitter at
// the middle of the samples, with drift its change with time, and how much later than the
// elements say the spacecraft comes by on its own orbit, at rest in space (greater than 0: late).
// The time offset is taken to first order, which holds for some seconds.
func FitFrequency(points []Point, drift bool) (*Fit, error) {
	var t, y, rate []float64
	var rows []int
	for i := range points {
		p := &points[i]
		r := p.Residual(FrequencyHz)
		if p.State == Outside || p.State == Dropout || math.IsNaN(r) || math.IsNaN(p.FrequencyRateHzS) {
			continue
		}
		t, y, rate, rows = append(t, p.At.Sub(points[0].At).Seconds()), append(y, r), append(rate, p.FrequencyRateHzS), append(rows, i)
	}
	if len(t) == 0 {
		return nil, fmt.Errorf("fit of the frequency: %w: none is within a pass", errTooFew)
	}
	middle := (t[0] + t[len(t)-1]) / 2
	names := []Parameter{{Name: "transmitter offset", Unit: "Hz"}, {Name: "time offset of the elements", Unit: "s"}}
	perDay, scale := t[len(t)-1]-t[0] > longLog.Seconds(), 1.0
	if perDay {
		scale = 86400
	}
	if drift {
		p := Parameter{Name: "transmitter drift", Unit: "Hz/s"}
		if perDay {
			p.Unit = HertzPerDay
		}
		names = append(names, p)
	}
	x := make([][]float64, len(t))
	for i := range t {
		x[i] = []float64{1, -rate[i]}
		if drift {
			x[i] = append(x[i], (t[i]-middle)/scale)
		}
	}
	f, err := (&series{t: t, y: y, x: x}).solve(names)
	if err != nil {
		return nil, fmt.Errorf("fit of the frequency: %w", err)
	}
	f.Middle = points[0].At.Add(time.Duration(middle * float64(time.Second)))
	f.mark(points, rows)
	return f, nil
}
