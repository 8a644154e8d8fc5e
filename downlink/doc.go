// Package downlink carries a signal from a spacecraft's transmitter to the input of
// a station's first amplifier, term by term, at one instant and along a pass.
//
// A Link is prepared once from a transmitter, a mode, a site and an antenna. At gives
// the Budget at a geometry, Profile the same numbers along a pass, both by one
// evaluator. Terms of the path and noise from outside (gases, rain, the Sun) come in
// through PathModel and NoiseModel; without them the path is free space.
//
// The other direction is the same link with a Receiver in place of the Transmitter: the
// station's transmit side radiates, and received power and noise are at the spacecraft.
//
// Received power and system noise are at the input of the first amplifier, after the
// feed loss. Losses are positive decibels with the sign -1. With a measured G/T,
// C/N0 = EIRP - losses of the path + G/T - 10 log10 k, and the noise shown is the one
// that the gain implies. Angles off boresight are from the direction to the Earth's
// centre for an antenna held to nadir.
//
// Sources: Rec. ITU-R P.525 (free space), Ruze's formula for the surface, the cascade
// of Kolawole, Satellite Communication Engineering, 2002, and the ellipse formula of
// the textbooks for polarisation; each stands at its function. Left out: interference,
// framing overheads, tolerances, side lobes of the station.
//
// The package knows nothing of files and pages.
package downlink
