package downlink

// DefaultAttitudeProbability is the probability whose exceeded gain stands for a
// tumbling or spinning spacecraft where the scenario gives none.
const DefaultAttitudeProbability = 0.9

// Attitude tells how the body that carries an antenna is held. The body's axes are
// right-handed; the antenna looks along z unless Body says otherwise.
//
//	nadir         z at the Earth's centre, y against the orbit's normal, x completes: along the velocity of a circular orbit
//	station       the boresight itself at the station
//	tumbling      every direction equally likely
//	sun           z at the Sun, x on the side of the Earth's north pole in the plane of Sun and pole
//	spin          z along an axis fixed among the stars; x turns about it with a phase that is not known
//	yaw steering  z at the Earth's centre, y (the axis of the solar array) normal to the Sun, the Sun on the side of x
//	history       as the records of a file tell
type Attitude int

// Attitudes.
const (
	AttitudeUnstated    Attitude = iota // enough for an isotropic pattern, a stated EIRP or a stated geometry
	AttitudeNadir                       // boresight at the Earth's centre, or as the body carries it
	AttitudeStation                     // boresight at the station
	AttitudeTumbling                    // every direction equally likely
	AttitudeSun                         // body z at the Sun
	AttitudeSpin                        // body z along Body.SpinAxis, the phase not known
	AttitudeYawSteering                 // body z at the Earth's centre, body y normal to the Sun
	AttitudeHistory                     // by Body.History
)

// String returns the attitude as the scenario writes it.
func (a Attitude) String() string {
	return [...]string{"unstated", "nadir", "station", "tumbling", "sun", "spin", "yaw_steering", "history"}[a]
}

// HasBody tells whether the attitude knows the body's axes, but for a spin's phase.
func (a Attitude) HasBody() bool {
	switch a {
	case AttitudeNadir, AttitudeSun, AttitudeSpin, AttitudeYawSteering, AttitudeHistory:
		return true
	}
	return false
}
