package oem

import (
	"fmt"
	"math"

	"slantwise/orbit"
)

// contradiction looks for two states whose velocities do not lead from one position to the
// other: signs or units that differ, velocities left at zero, inertial velocities beside
// Earth-fixed positions. It returns what to say of the first such pair, empty where there
// is none.
//
// The mean velocity of two states leads to within |jerk| h³/12 of the other position, which
// on a Keplerian orbit is under θ²/8 of the way v h that is flown, θ = v h/r; a third of θ²
// is allowed, and a twentieth of the way and 1 km more. Pairs over a radian apart tell
// nothing.
func contradiction(states []orbit.TimedState) string {
	const share, floor = 0.05, 1000.0 // of the way; m
	for i := 1; i < len(states); i++ {
		a, b := &states[i-1], &states[i]
		h := b.Time.Sub(a.Time).Seconds()
		way := math.Max(a.Velocity.Norm(), b.Velocity.Norm()) * h
		moved := b.Position.Sub(a.Position)
		theta := math.Max(way, moved.Norm()) / math.Min(a.Position.Norm(), b.Position.Norm())
		if theta > 1 {
			continue
		}
		off := moved.Sub(a.Velocity.Add(b.Velocity).Scale(h / 2)).Norm()
		if off > floor+(share+theta*theta/3)*math.Max(way, moved.Norm()) {
			return fmt.Sprintf("from %s to %s the position moves by %.3f km, and its velocities end %.3f km beside that", stamp(a.Time), stamp(b.Time), moved.Norm()/1000, off/1000)
		}
	}
	return ""
}
