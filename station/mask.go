package station

// Mask is a horizon mask: the least elevation that sees the sky, by azimuth, linear
// between its points and cyclic. It is immutable.
type Mask struct {
	kind ElevationKind
}

// Kind tells which elevation the mask was made in.
func (m *Mask) Kind() ElevationKind { return m.kind }
