package downlink

// PathModel adds terms of the path to a link: what the atmosphere or the ionosphere
// takes. Its methods must be safe for use by many goroutines.
type PathModel interface {
	// Terms names the terms, in the order in which Losses gives them. Sign is -1,
	// or 1 for a term that gives something back.
	Terms() []TermInfo
	// Losses writes the value of each term at a geometry into into, which has the
	// length of Terms. Values are finite; an error says why there is none.
	Losses(g *Geometry, into []float64) error
	// Notes tells what the model assumes.
	Notes() []Note
}

// NoiseModel adds to the noise that the antenna takes in: weather above the clear
// sky, the Sun in the beam. Its methods must be safe for use by many goroutines.
type NoiseModel interface {
	// Parts names the contributions, in the order in which Kelvins gives them. The
	// temperatures in it are not used.
	Parts() []NoisePart
	// Kelvins writes each contribution in K at the antenna's flange, in front of
	// all losses of the station, into into. Values are finite and not negative.
	Kelvins(g *Geometry, into []float64) error
	// Notes tells what the model assumes.
	Notes() []Note
}
