package measured

import (
	"fmt"
	"math"
)

// MixedUnits tells of rows that look as if they were in another unit than the rest: levels
// 30 dB off (dBW among dBm), frequencies by a power of 1000 (kHz or MHz among Hz). They are
// outliers or dropouts of a fit in any case.
func MixedUnits(points []Point, q Quantity) []string {
	var off func(p *Point) (string, bool)
	switch q {
	case PowerDBm, RelativePowerDB, CN0DBHz, EbN0DB:
		middle := medianOf(points, func(p *Point) float64 { return p.Residual(q) })
		off = func(p *Point) (string, bool) {
			d := p.Residual(q) - middle
			return "about 30 dB off the rest, as dBW are off dBm", math.Abs(math.Abs(d)-30) < 2
		}
	case FrequencyHz:
		off = func(p *Point) (string, bool) {
			ratio := math.Log10(p.Get(q)/p.Predicted(q)) / 3
			turns := math.Round(ratio)
			return "off the prediction by a power of 1000, as kHz are off Hz", turns != 0 && math.Abs(ratio-turns) < 1e-3
		}
	default:
		return nil
	}
	n, first, what := 0, 0, ""
	for i := range points {
		if text, is := off(&points[i]); is {
			if n == 0 {
				first = points[i].Line
			}
			n, what = n+1, text
		}
	}
	if n == 0 {
		return nil
	}
	return []string{fmt.Sprintf("%s: %d rows, the first in line %d, are %s: are the units mixed?", q, n, first, what)}
}
