package station

import (
	"fmt"
	"math"
	"sort"

	"slantwise/orbit/unit"
)

// MaskPoint is one point of a horizon mask.
type MaskPoint struct {
	Azimuth   unit.Angle // [0°, 360°), clockwise from true north
	Elevation unit.Angle // [-10°, 90°)
}

// Mask is a horizon mask: the least elevation that sees the sky, by azimuth, linear
// between its points and cyclic. It is immutable.
type Mask struct {
	kind   ElevationKind
	points []MaskPoint
}

// NewMask returns the mask through the points, which are copied: at least one, by
// rising azimuth. A single point is a level horizon. Doubled azimuths are refused,
// since it would be a guess which of the two holds; two points 0.001° apart make a
// steep edge. Errors name the entry, counted from 1; a value outside its range, NaN
// among them, is a *unit.RangeError inside.
func NewMask(points []MaskPoint, kind ElevationKind) (*Mask, error) {
	if len(points) == 0 {
		return nil, fmt.Errorf("horizon mask: it has no points; give at least one, or leave the mask out for a bare horizon")
	}
	for i, p := range points {
		if err := p.check(); err != nil {
			return nil, fmt.Errorf("horizon mask: entry %d: %w", i+1, err)
		}
		if i == 0 {
			continue
		}
		switch before := points[i-1].Azimuth; {
		case p.Azimuth == before:
			return nil, fmt.Errorf("horizon mask: entry %d: azimuth %s deg stands in entry %d too; give it once (for a steep edge set the second 0.001 deg on)",
				i+1, degrees(p.Azimuth), i)
		case p.Azimuth < before:
			return nil, fmt.Errorf("horizon mask: entry %d: azimuth %s deg comes after %s deg; sort the entries by rising azimuth",
				i+1, degrees(p.Azimuth), degrees(before))
		}
	}
	return &Mask{kind: kind, points: append([]MaskPoint(nil), points...)}, nil
}

func (p MaskPoint) check() error {
	if az := given(p.Azimuth); !(az >= 0 && az < 360) {
		return &unit.RangeError{Quantity: "azimuth", Value: az, Unit: "deg",
			Allowed: "at least 0 and less than 360 deg", Next: "count clockwise from true north; the mask closes by itself"}
	}
	if el := given(p.Elevation); !(el >= -10 && el < 90) {
		return &unit.RangeError{Quantity: "elevation", Value: el, Unit: "deg",
			Allowed: "at least -10 and less than 90 deg", Next: "give the elevation of the skyline"}
	}
	return nil
}

// degrees prints an angle as it was given.
func degrees(a unit.Angle) string { return fmt.Sprintf("%.9g", a.Degrees()) }

// given returns an angle in degrees as it was given: without the rounding of degrees
// taken to radians and back.
func given(a unit.Angle) float64 { return math.Round(a.Degrees()*1e9) / 1e9 }

// Kind tells which elevation the mask was made in.
func (m *Mask) Kind() ElevationKind { return m.kind }

// Points returns a copy of the points, at least one, by rising azimuth.
func (m *Mask) Points() []MaskPoint { return append([]MaskPoint(nil), m.points...) }

// At returns the elevation of the mask, of its own kind, at any azimuth.
func (m *Mask) At(azimuth unit.Angle) unit.Angle {
	az := azimuth.Wrapped()
	n := len(m.points)
	after := sort.Search(n, func(i int) bool { return m.points[i].Azimuth > az })
	a, b := m.points[(after+n-1)%n], m.points[after%n]
	width := (b.Azimuth - a.Azimuth).Wrapped()
	if width == 0 { // a single point
		return a.Elevation
	}
	share := float64((az - a.Azimuth).Wrapped() / width)
	return a.Elevation + unit.Angle(share)*(b.Elevation-a.Elevation)
}
