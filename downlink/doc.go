// Package downlink carries a signal from a spacecraft's transmitter to the input of
// a station's first amplifier, term by term, at one instant and along a pass.
//
// Received power and system noise are at the input of the first amplifier, after
// the feed loss. The package knows nothing of files and pages.
package downlink
