package orbit

import "time"

// SunPosition returns the Earth-fixed position of the Sun's centre in m, as seen
// from the Earth's centre with the light's travel time in it.
func SunPosition(t time.Time, earth EarthOrientation) Vec3 { panic("orbit: not built yet") }

// MoonPosition returns the Earth-fixed position of the Moon's centre in m.
func MoonPosition(t time.Time, earth EarthOrientation) Vec3 { panic("orbit: not built yet") }

// LightAt returns how much of the Sun a spacecraft at an Earth-fixed position
// sees, sun being SunPosition of the same instant.
func LightAt(spacecraft, sun Vec3) Light { panic("orbit: not built yet") }
