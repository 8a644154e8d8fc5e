package orbit

import (
	"fmt"
	"time"
)

// MoonTrack gives the Moon's Earth-fixed position over a span in some tens of
// nanoseconds, within 1e-7 rad of MoonPosition (TestMoonTrack). It is immutable and
// safe for use by many goroutines.
type MoonTrack struct {
	rot   rotation
	span  float64
	knots []Vec3 // TEME, a knot each moonStep from one before the start
}

// moonStep in s: the Moon moves two degrees between knots.
const moonStep = 14400.0

// NewMoonTrack prepares the Moon for [from, to]; seconds of PositionAt count from
// from.
func NewMoonTrack(from, to time.Time, earth EarthOrientation) *MoonTrack {
	t := &MoonTrack{rot: newRotation(from, earth), span: max(0, to.Sub(from).Seconds())}
	c := centuriesTT(from)
	for i := range int(t.span/moonStep) + 4 {
		t.knots = append(t.knots, moonTEME(c+float64(i-1)*moonStep/(86400*36525)))
	}
	return t
}

// PositionAt returns the Moon's Earth-fixed position in m, s seconds after from; s
// outside the span is a programming error and panics.
func (t *MoonTrack) PositionAt(s float64) Vec3 {
	if !(s >= 0 && s <= t.span) {
		panic(fmt.Sprintf("orbit: %g s is outside the Moon's span of 0 to %g s", s, t.span))
	}
	return t.rot.fixed(s, throughFour(t.knots, s/moonStep))
}

// throughFour is the cubic through four knots of which the second lies at the whole
// part of x.
func throughFour(knots []Vec3, x float64) Vec3 {
	i := int(x)
	u := x - float64(i)
	k := knots[i : i+4]
	// Lagrange through knots at -1, 0, 1, 2.
	v := k[0].Scale(-u * (u - 1) * (u - 2) / 6)
	v = v.Add(k[1].Scale((u + 1) * (u - 1) * (u - 2) / 2))
	v = v.Add(k[2].Scale(-(u + 1) * u * (u - 2) / 2))
	return v.Add(k[3].Scale((u + 1) * u * (u - 1) / 6))
}
