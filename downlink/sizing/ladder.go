package sizing

import (
	"math"

	"slantwise/orbit/unit"
)

// ladder is the elevations at which a site's links are evaluated. Between two of them
// values go straight in 1/(sin el + 0.1), in which the path through the air is almost
// straight (TestLadderAgainstProfile).
type ladder struct{ deg, x []float64 }

// Rungs lie a twentieth of the elevation apart, but no less than a quarter of a degree.
const (
	rungShare = 0.05
	rungLeast = 0.25
)

func newLadder(lowestDeg float64) ladder {
	var l ladder
	for el := lowestDeg; el < 90; el += max(rungLeast, rungShare*el) {
		l.deg = append(l.deg, el)
	}
	l.deg = append(l.deg, 90)
	for _, el := range l.deg {
		l.x = append(l.x, airPath(el))
	}
	return l
}

func airPath(deg float64) float64 { return 1 / (math.Sin(deg*math.Pi/180) + 0.1) }

func (l *ladder) elevation(i int) unit.Angle { return unit.Angle(l.deg[i]) * unit.Degree }

// place is where an elevation lies: between rung i and the next, at a fraction.
type place struct {
	rung int32
	part float32
}

// find places an elevation, which must not be lower than the lowest rung.
func (l *ladder) find(deg float64) place {
	i := 0
	for lo, hi := 0, len(l.deg)-1; hi-lo > 1; {
		mid := (lo + hi) / 2
		if l.deg[mid] <= deg {
			lo = mid
		} else {
			hi = mid
		}
		i = lo
	}
	w := (airPath(deg) - l.x[i]) / (l.x[i+1] - l.x[i])
	return place{int32(i), float32(max(0, min(1, w)))}
}

// at interpolates a column of rungs.
func (p place) at(v []float64) float64 {
	a, b := v[p.rung], v[p.rung+1]
	return a + float64(p.part)*(b-a)
}
