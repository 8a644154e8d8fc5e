package orbit

// Light tells how much of the Sun a spacecraft sees past the Earth.
type Light int

// Kinds of light.
const (
	Sunlit   Light = iota // the whole disc
	Penumbra              // a part of the disc
	Umbra                 // nothing
)

// String returns "sun", "penumbra" or "umbra".
func (l Light) String() string {
	switch l {
	case Penumbra:
		return "penumbra"
	case Umbra:
		return "umbra"
	}
	return "sun"
}
