package orbit

import (
	"fmt"
	"math"
	"time"
)

// gridPoint is an element set that the two-line format can hold exactly: each
// element as a whole number of the format's last digit.
type gridPoint struct {
	inclination, node, argPerigee, anomaly int64 // 1e-4 degrees
	eccentricity                           int64 // 1e-7
	motion                                 int64 // 1e-8 rev/day
	drag                                   int64 // 10^(dragExponent-5) per Earth radius
	dragExponent                           int
	epoch                                  time.Time // a whole second
}

// lines formats the point as the two lines that the library parses. The second of
// the epoch is moved to its middle, since the library truncates to whole seconds
// and eight decimals of a day do not hold the second exactly.
func (g *gridPoint) lines() (string, string) {
	midnight := time.Date(g.epoch.Year(), 1, 1, 0, 0, 0, 0, time.UTC)
	day := 1 + (g.epoch.Sub(midnight).Seconds()+0.5)/86400
	sign, mantissa, exponent := ' ', g.drag, g.dragExponent
	if mantissa < 0 {
		sign, mantissa = '-', -mantissa
	}
	if mantissa >= 100000 { // the neighbour of 99999
		mantissa, exponent = mantissa/10, exponent+1
	}
	line1 := fmt.Sprintf("1 00001U          %02d%012.8f  .00000000  00000+0 %c%05d%+d 0    00",
		g.epoch.Year()%100, day, sign, mantissa, exponent)
	line2 := fmt.Sprintf("2 00001 %s %s %07d %s %s %02d.%08d    00",
		degrees(g.inclination), degrees(g.node), g.eccentricity, degrees(g.argPerigee), degrees(g.anomaly),
		g.motion/1e8, g.motion%1e8)
	return line1, line2
}

func degrees(tenThousandths int64) string {
	return fmt.Sprintf("%03d.%04d", tenThousandths/10000, tenThousandths%10000)
}

// weighted is a grid point with its share in an interpolation.
type weighted struct {
	gridPoint
	weight float64
}

// onGrid expresses a valid element set by points of the two-line format's grid: the
// nearest point, and for each element that has more digits than the format, the
// next point in that direction, so that the sum of weight times state is the state
// of the set itself. The steps are so small (1e-4 degrees at most) that the second
// order is millimetres (TestElementsFinerThanTheFormat). Sets that came from two lines need
// the nearest point alone, except that the drag term b, corrected for a fault of
// the library, may have more digits than were printed.
//
// The fraction of the epoch's second counts in the lunar and solar terms only;
// withEpoch asks for a neighbour for it, too.
func onGrid(e *Elements, b float64, withEpoch bool) []weighted {
	var g gridPoint
	points := make([]weighted, 1, 9)
	neighbour := func(move func(*gridPoint)) *gridPoint {
		n := g
		move(&n)
		return &n
	}
	type axis struct {
		value float64 // in steps
		field func(*gridPoint) *int64
	}
	exponent := dragExponent(b)
	g.dragExponent = exponent
	axes := []axis{
		{e.Inclination.Degrees() * 1e4, func(p *gridPoint) *int64 { return &p.inclination }},
		{e.RAAN.Degrees() * 1e4, func(p *gridPoint) *int64 { return &p.node }},
		{e.ArgPerigee.Degrees() * 1e4, func(p *gridPoint) *int64 { return &p.argPerigee }},
		{e.MeanAnomaly.Degrees() * 1e4, func(p *gridPoint) *int64 { return &p.anomaly }},
		{e.Eccentricity * 1e7, func(p *gridPoint) *int64 { return &p.eccentricity }},
		{e.MeanMotion * 1e8, func(p *gridPoint) *int64 { return &p.motion }},
		{b * math.Pow10(5-exponent), func(p *gridPoint) *int64 { return &p.drag }},
	}
	g.epoch = e.Epoch.UTC().Round(time.Second)
	for _, a := range axes {
		*a.field(&g) = int64(math.Round(a.value))
	}
	rest := 1.0
	add := func(share float64, move func(*gridPoint, int)) {
		const noise = 1e-6 // of a step: what the way through radians and float64 leaves
		if math.Abs(share) < noise {
			return
		}
		direction := 1
		if share < 0 {
			direction = -1
		}
		points = append(points, weighted{*neighbour(func(p *gridPoint) { move(p, direction) }), math.Abs(share)})
		rest -= math.Abs(share)
	}
	for _, a := range axes {
		add(a.value-math.Round(a.value), func(p *gridPoint, d int) { *a.field(p) += int64(d) })
	}
	if withEpoch {
		add(e.Epoch.Sub(g.epoch).Seconds(), func(p *gridPoint, d int) { p.epoch = p.epoch.Add(time.Duration(d) * time.Second) })
	}
	points[0] = weighted{g, rest}
	return points
}

// dragExponent returns the power of ten that leaves b a mantissa in [0.1, 1), but
// not under the -9 that the format can hold.
func dragExponent(b float64) int {
	if b == 0 {
		return 0
	}
	return max(int(math.Floor(math.Log10(math.Abs(b))))+1, -9)
}
