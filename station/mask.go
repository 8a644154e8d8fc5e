package station

import (
	"errors"
	"io"

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
// since it would be a guess which holds; two points 0.001° apart make a steep edge.
// Errors name the entry, counted from 1; ranges fail with *unit.RangeError inside.
func NewMask(points []MaskPoint, kind ElevationKind) (*Mask, error) {
	return nil, errors.New("station: masks are not built yet")
}

// ReadMaskCSV reads a mask from CSV text with the header azimuth_deg,elevation_deg.
// Errors name the line.
func ReadMaskCSV(r io.Reader, kind ElevationKind) (*Mask, error) {
	return nil, errors.New("station: masks are not built yet")
}

// Kind tells which elevation the mask was made in.
func (m *Mask) Kind() ElevationKind { return m.kind }

// Points returns a copy of the points.
func (m *Mask) Points() []MaskPoint { return append([]MaskPoint(nil), m.points...) }

// At returns the elevation of the mask, of its own kind, at any azimuth.
func (m *Mask) At(azimuth unit.Angle) unit.Angle { return 0 }
