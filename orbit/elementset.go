package orbit

import (
	"time"

	"slantwise/orbit/unit"
)

// Elements is one set of SGP4 mean elements, as a two-line element set or a CCSDS
// OMM (502.0-B) of theory SGP4 carries them: frame TEME, time scale UTC.
type Elements struct {
	Name                    string // as in the file, without the padding; may be empty
	CatalogNumber           int    // 0 to 999,999,999
	InternationalDesignator string // as "2026-001A"; may be empty
	Classification          string // "U", "C", "S"; may be empty

	Epoch        time.Time // UTC
	MeanMotion   float64   // revolutions a day (Kozai), greater than 0
	Eccentricity float64   // [0, 1)
	Inclination  unit.Angle
	RAAN         unit.Angle // right ascension of the ascending node
	ArgPerigee   unit.Angle
	MeanAnomaly  unit.Angle

	BStar             float64 // 1/Earth radii
	MeanMotionDot     float64 // half the first derivative, rev/day²
	MeanMotionDDot    float64 // a sixth of the second derivative, rev/day³
	ElementSetNo      int
	RevolutionAtEpoch int

	Source Source // where the set was read
}

// Source names the place that an element set was read from.
type Source struct {
	File string // empty when the set was not read from a file
	Line int    // first line of the set, from 1; 0 where lines do not apply
}

// Age returns how long before t the elements' epoch lies; negative when the epoch
// lies after t.
func (e *Elements) Age(t time.Time) time.Duration { return t.Sub(e.Epoch) }
