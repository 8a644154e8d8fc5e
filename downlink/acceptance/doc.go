// Package acceptance works out the G/T of a station from noise measured on a source of
// known flux density, the Sun or a radio star, against the cold sky beside it, with its
// uncertainty term by term, and how likely a promised G/T is kept.
//
// It holds for the elevation and the weather of the measurement, at the antenna's
// flange as the promise is meant. It leaves out interference, the receiver's own drift
// between the two readings, and polarised sources.
//
// Sources: Rec. ITU-R S.733-2 (the relation, as quoted by public notes; its text was not
// read); JCGM 100:2008, the propagation of uncertainty by first derivatives (from memory).
package acceptance
