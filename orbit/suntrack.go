package orbit

import (
	"fmt"
	"time"
)

// SunTrack gives the Sun's Earth-fixed position over a span in some tens of
// nanoseconds, within 1e-8 rad of SunPosition (TestSunTrack). It is immutable and
// safe for use by many goroutines.
type SunTrack struct {
	rot   rotation
	span  float64
	knots []Vec3 // TEME, a knot each sunStep from one before the start
}

// sunStep in s: the Sun moves a degree between knots, and a cubic through four of
// them leaves 2e-9 rad.
const sunStep = 86400.0

// NewSunTrack prepares the Sun for [from, to]; seconds of PositionAt count from
// from.
func NewSunTrack(from, to time.Time, earth EarthOrientation) *SunTrack {
	t := &SunTrack{}
	t.prepare(from, to, newRotation(from, earth))
	return t
}

func (t *SunTrack) prepare(from, to time.Time, rot rotation) {
	t.rot, t.span, t.knots = rot, max(0, to.Sub(from).Seconds()), t.knots[:0]
	c := centuriesTT(from)
	for i := range int(t.span/sunStep) + 4 {
		t.knots = append(t.knots, sunTEME(c+float64(i-1)*sunStep/(86400*36525)))
	}
}

// PositionAt returns the Sun's Earth-fixed position in m, s seconds after from; s
// outside the span is a programming error and panics.
func (t *SunTrack) PositionAt(s float64) Vec3 {
	if !(s >= 0 && s <= t.span) {
		panic(fmt.Sprintf("orbit: %g s is outside the Sun's span of 0 to %g s", s, t.span))
	}
	return t.rot.fixed(s, throughFour(t.knots, s/sunStep))
}
