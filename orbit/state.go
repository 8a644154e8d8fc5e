package orbit

// State is where a spacecraft is and how it moves, in the Earth-fixed frame (ITRF
// as realised by WGS-84; the pseudo Earth-fixed frame when no polar motion is
// given).
type State struct {
	Position Vec3 // m
	Velocity Vec3 // m/s, relative to the rotating Earth, from SGP4's own velocity
}
