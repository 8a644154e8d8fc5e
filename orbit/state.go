package orbit

// State is where a spacecraft is and how it moves, in the Earth-fixed frame (ITRF
// as realised by WGS-84; the pseudo Earth-fixed frame when no polar motion is
// given).
type State struct {
	Position Vec3 // m
	Velocity Vec3 // m/s, relative to the rotating Earth, from SGP4's own velocity
}

// InertialVelocity returns the velocity against the stars in m/s, in components along
// the Earth-fixed axes of the instant: what the turning Earth takes off is put back. The
// pole's wandering from z is left out, 1e-6 of the Earth's turning.
func (s State) InertialVelocity() Vec3 {
	return Vec3{s.Velocity.X - earthRate*s.Position.Y, s.Velocity.Y + earthRate*s.Position.X, s.Velocity.Z}
}
