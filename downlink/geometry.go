package downlink

import (
	"time"

	"slantwise/orbit/unit"
)

// Geometry is where the spacecraft stands as seen from the station. A number that
// is not known is NaN.
type Geometry struct {
	Time         time.Time // zero for a stated geometry
	Azimuth      unit.Angle
	Elevation    unit.Angle // geometric
	Range        unit.Length
	OffBoresight unit.Angle // of the station, as the transmit antenna sees it; NaN when tumbling
}
