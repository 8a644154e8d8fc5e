// Package propagation says what the air, the rain and the ionosphere do to a signal
// between a spacecraft and a station, and what noise they send, by the ITU-R
// Recommendations and without their digital maps: a site states its climate.
//
// One file a Recommendation, each at its current edition: P.676-13 (gases), P.835-6
// (reference atmospheres), P.453-14 (refractivity), P.834-9 (refraction), P.838-3,
// P.839-4, P.837-7 (rain), P.840-9 (cloud), P.618-14 (rain, scintillation, total,
// cross-polarisation, moving satellites), P.372-16 (noise of the sky and of man),
// P.531-14 (ionosphere), P.841-6 (worst month). Editions names the ones that can be
// changed for older published figures.
//
// Attenuations are positive, in dB. Elevations are geometric (the straight line's)
// unless a name says apparent (the refracted ray's, as seen at the station). Heights
// are above mean sea level. Percentages of time are an Exceedance, a fraction of an
// average year; every figure is the marginal of an average year and says nothing
// about what happens when.
//
// A value outside what a Recommendation states is either refused with a
// *unit.RangeError, or given with a Note of kind Warning that names the range.
// Nothing is clamped to a range.
//
// Path prepares all of it for one site, frequency and percentage.
package propagation
