// Package sizing answers which antenna a ground station needs, from a year of passes of
// a kept orbit.
//
// The geometry of the year is flown once (Fly): every pass over every site, as columns
// of samples with the flux density that the spacecraft lays on the site. Everything
// else of a link (the antenna, its noise, the air) is a function of elevation alone and
// is evaluated by the link's own budget at some sixty elevations, between which it is
// interpolated. So another diameter, transmit power, noise or frequency costs a plan of
// the year's passes and nothing more.
//
// Bytes: each pass is planned by the spacecraft's modes and rate rules for C/N0 under
// the weather that the scenario plans with (the attenuation exceeded for its
// percentage). What is planned is sent; it counts by the share of the average year in
// which the attenuation at that elevation leaves the mode its C/N0, required margin
// included. That is the expectation of the bytes: means add up whether passes share
// their weather or not. Left out: the time to lock again after a fade inside a pass.
//
// Availability and margins for a share of the time are marginals over contact time by
// Rec. ITU-R P.618 §8, as in downlink.Year; the worst month is P.841's.
//
// Left out besides: the Sun and the Moon in the beam, interference, outages of the
// station. Antennas that do not follow, and those whose gain or G/T was measured, have
// no diameter to be sought.
package sizing
