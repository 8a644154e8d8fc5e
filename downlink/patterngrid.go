package downlink

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"slantwise/orbit/unit"
)

// PatternGrid is the gain of an antenna over two angles, at every angle of Off with
// every angle of Around: bilinear in dB between them and closed around the boresight.
// On the boresight itself, and straight behind it, there is one direction whatever the
// angle around: all its gains must be the same.
type PatternGrid struct {
	Off    []unit.Angle // off boresight, rising from 0 to at most 180°
	Around []unit.Angle // about it, rising from 0 and below 360°; from the pattern's zero (Body.Turn)
	Gain   [][]unit.DB  // dBi, by Off, then by Around

	share float64 // of the power, radiated

	counting sync.Once
	exceeded []float64 // the gain exceeded in growing shares of all directions, once it was asked for
}

// PatternRow is a row of a table of two angles.
type PatternRow struct {
	Off, Around unit.Angle
	Gain        unit.DB
}

// PoleSpread is how far the gains on the boresight, or straight behind it, may lie
// apart; their mean is taken. Measured cuts differ there by their repeatability.
const PoleSpread = unit.DB(1)

// widestStep is the widest gap that a table may leave around the boresight: with less
// than a cut each quarter there is nothing to interpolate.
const widestStep = 90 * unit.Degree

// NewPatternGrid lays rows out, in any order, each direction once. Every angle off
// boresight needs every angle around it, but for 0° and 180°, where one row is enough
// and several are averaged (PoleSpread); a row at 360° around must repeat that at 0°.
// All faults come at once.
func NewPatternGrid(rows []PatternRow) (*PatternGrid, error) {
	g := &PatternGrid{}
	var faults []error
	for i, r := range rows {
		if !(r.Off >= 0 && r.Off <= 180*unit.Degree+angleSlack) || !(r.Around >= 0 && r.Around <= 360*unit.Degree+angleSlack) || !(r.Gain >= -200 && r.Gain <= 100) {
			faults = append(faults, fmt.Errorf("row %d: %g deg off boresight, %g deg around it, %g dBi is not allowed; it must be 0 to 180 deg, 0 to 360 deg, -200 to 100 dBi",
				i+1, asGiven(r.Off), asGiven(r.Around), float64(r.Gain)))
			continue
		}
		g.Off = append(g.Off, r.Off)
		if !onPole(r.Off) && r.Around < 360*unit.Degree-angleSlack {
			g.Around = append(g.Around, r.Around)
		}
	}
	if len(faults) > 0 {
		return nil, errors.Join(faults...)
	}
	slices.Sort(g.Off)
	slices.Sort(g.Around)
	g.Off, g.Around = slices.Compact(g.Off), slices.Compact(g.Around)
	if err := g.checkAngles(); err != nil {
		return nil, err
	}
	if err := g.fill(rows); err != nil {
		return nil, err
	}
	g.share = g.integrate()
	return g, nil
}

// angleSlack is what the way to radians leaves of an angle that was written in degrees.
const angleSlack = 1e-9 * unit.Degree

func onPole(off unit.Angle) bool { return off <= angleSlack || off >= 180*unit.Degree-angleSlack }

// checkAngles looks at the nodes alone.
func (g *PatternGrid) checkAngles() error {
	var faults []error
	if len(g.Off) < 2 || g.Off[0] != 0 {
		faults = append(faults, errors.New("the table must begin on the boresight, at 0 deg, and hold one more angle off it at least"))
	}
	if len(g.Around) == 0 || g.Around[0] != 0 {
		return errors.Join(append(faults, errors.New("the table must hold 0 deg around the boresight"))...)
	}
	for i, a := range g.Around {
		next := 360 * unit.Degree
		if i+1 < len(g.Around) {
			next = g.Around[i+1]
		}
		if next-a > widestStep+angleSlack {
			faults = append(faults, fmt.Errorf("around the boresight the table has nothing between %g and %g deg; give at least every %g deg, all around", asGiven(a), asGiven(next), widestStep.Degrees()))
		}
	}
	return errors.Join(faults...)
}

// fill writes the gains into their places.
func (g *PatternGrid) fill(rows []PatternRow) error {
	var faults []error
	nan := unit.DB(math.NaN())
	for range g.Off {
		g.Gain = append(g.Gain, slices.Repeat([]unit.DB{nan}, len(g.Around)))
	}
	around360 := map[int]unit.DB{}
	poles := map[int][]unit.DB{}
	for i, r := range rows {
		o, _ := slices.BinarySearch(g.Off, r.Off)
		switch {
		case onPole(r.Off):
			poles[o] = append(poles[o], r.Gain)
		case r.Around >= 360*unit.Degree-angleSlack:
			around360[o] = r.Gain
		default:
			a, _ := slices.BinarySearch(g.Around, r.Around)
			if !math.IsNaN(float64(g.Gain[o][a])) {
				faults = append(faults, fmt.Errorf("row %d: %g deg off boresight with %g deg around it stands twice", i+1, asGiven(r.Off), asGiven(r.Around)))
			}
			g.Gain[o][a] = r.Gain
		}
	}
	for o := range g.Off {
		list := poles[o]
		if len(list) == 0 {
			continue
		}
		low, high, sum := slices.Min(list), slices.Max(list), unit.DB(0)
		for _, v := range list {
			sum += v
		}
		if high-low > PoleSpread {
			faults = append(faults, fmt.Errorf("at %g deg off boresight there is one direction alone, and the table has gains from %g to %g dBi for it; they may differ by %g dB at most", asGiven(g.Off[o]), float64(low), float64(high), float64(PoleSpread)))
		}
		for a := range g.Around {
			g.Gain[o][a] = sum / unit.DB(len(list))
		}
	}
	for o := range g.Off {
		if v, ok := around360[o]; ok && v != g.Gain[o][0] {
			faults = append(faults, fmt.Errorf("at %g deg off boresight the table has %g dBi at 360 deg around and %g dBi at 0 deg, which is the same direction", asGiven(g.Off[o]), float64(v), float64(g.Gain[o][0])))
		}
		for a, v := range g.Gain[o] {
			if math.IsNaN(float64(v)) {
				faults = append(faults, fmt.Errorf("no row for %g deg off boresight with %g deg around it; give every angle off with every angle around", asGiven(g.Off[o]), asGiven(g.Around[a])))
			}
		}
	}
	return errors.Join(faults...)
}

// at returns the gain, bilinear in dB; ok is false beyond the last angle off boresight,
// and off it for an angle around that is not known.
func (g *PatternGrid) at(off, around float64) (unit.DB, bool) {
	last := len(g.Off) - 1
	if !(off >= 0 && off <= g.Off[last].Radians()+1e-9) {
		return 0, false
	}
	i := g.segmentOff(off)
	t0, t1 := g.Off[i].Radians(), g.Off[i+1].Radians()
	w := min((off-t0)/(t1-t0), 1)
	if math.IsNaN(around) {
		// On a pole the direction is known without it.
		if off == 0 {
			return g.Gain[0][0], true
		}
		return 0, false
	}
	j, k, u := g.segmentAround(around)
	low := float64(g.Gain[i][j])*(1-u) + float64(g.Gain[i][k])*u
	high := float64(g.Gain[i+1][j])*(1-u) + float64(g.Gain[i+1][k])*u
	return unit.DB(low*(1-w) + high*w), true
}

// segmentOff finds the node before an angle off boresight.
func (g *PatternGrid) segmentOff(off float64) int {
	low, high := 0, len(g.Off)-1
	for high-low > 1 {
		if mid := (low + high) / 2; g.Off[mid].Radians() <= off {
			low = mid
		} else {
			high = mid
		}
	}
	return low
}

// segmentAround finds the nodes about an angle in [0, 2π] around the boresight, the last
// and the first being neighbours, and how far it lies between them.
func (g *PatternGrid) segmentAround(around float64) (i, j int, w float64) {
	n := len(g.Around)
	low, high := 0, n
	for high-low > 1 {
		if mid := (low + high) / 2; g.Around[mid].Radians() <= around {
			low = mid
		} else {
			high = mid
		}
	}
	next, end := low+1, 2*math.Pi
	if next < n {
		end = g.Around[next].Radians()
	} else {
		next = 0
	}
	from := g.Around[low].Radians()
	return low, next, min(1, (around-from)/(end-from))
}
