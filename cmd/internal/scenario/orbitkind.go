package scenario

// OrbitKind says what a spacecraft flies on.
type OrbitKind int

// What a spacecraft can fly on.
const (
	OnElementSet     OrbitKind = iota // SGP4 elements of a file
	OnState                           // elements made of a state vector
	OnSyntheticOrbit                  // elements made of a height and an inclination
	OnEphemeris                       // tabulated states
)

var orbitKindNames = [...]string{"element set", "state", "synthetic orbit", "ephemeris"}

// String returns the kind in words, "element set" and so on.
func (k OrbitKind) String() string { return orbitKindNames[k] }

// HasNumber tells whether the orbit has a catalogue number.
func (k OrbitKind) HasNumber() bool { return k == OnElementSet }

// HasEpoch tells whether the orbit has one epoch from which its age counts.
func (k OrbitKind) HasEpoch() bool { return k != OnEphemeris }
