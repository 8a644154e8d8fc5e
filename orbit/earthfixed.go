package orbit

import (
	"time"

	"slantwise/orbit/unit"
)

// GMST returns the Greenwich mean sidereal time of IAU 1982 at t, in [0, 2π).
func GMST(t time.Time, earth EarthOrientation) unit.Angle { panic("orbit: not built yet") }

// TEMEToEarthFixed turns a state in the frame of SGP4 (true equator, mean equinox;
// m and m/s) into the Earth-fixed one.
func TEMEToEarthFixed(position, velocity Vec3, t time.Time, earth EarthOrientation) State {
	panic("orbit: not built yet")
}
