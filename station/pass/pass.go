package pass

import (
	"time"

	"slantwise/orbit/unit"
)

// Cut tells which ends of a pass the search window cuts; the time there is the
// window's edge.
type Cut uint8

// Cuts.
const (
	CutNone Cut = 0
	CutAOS  Cut = 1
	CutLOS  Cut = 2
	CutBoth Cut = CutAOS | CutLOS
)

// String returns "", "aos", "los" or "both", as the column cut of the pass list.
func (c Cut) String() string { return [...]string{"", "aos", "los", "both"}[c&CutBoth] }

// Pass is the uninterrupted time that a spacecraft stands above a site's horizon
// mask and minimum elevation. Angles are geometric, in whatever kind AOS and LOS
// were decided.
type Pass struct {
	AOS, Culmination, LOS                      time.Time // UTC, to 1 ms
	MaxElevation                               unit.Angle
	AOSAzimuth, CulminationAzimuth, LOSAzimuth unit.Angle
	AOSElevation, LOSElevation                 unit.Angle
	MinRange                                   unit.Length // the least in the whole pass, not the one at culmination
	Cut                                        Cut
}

// Duration returns LOS - AOS.
func (p *Pass) Duration() time.Duration { return p.LOS.Sub(p.AOS) }
