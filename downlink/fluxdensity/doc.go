// Package fluxdensity compares the power flux density that a spacecraft lays on the
// ground, and on the geostationary orbit, with the limits of its band.
//
// The flux is that of free space in the rule's reference bandwidth, at the peak of the
// spectrum, toward every point of the ground that sees the spacecraft, and toward
// every point of the geostationary orbit that does. Transmitters that send at once in
// one reference bandwidth add. The answer is passed, failed, or not assessed: where a
// pattern is not known in a direction, where an EIRP is known toward the station alone,
// and where no limit is known for the band, nothing is passed.
//
// The Earth is the WGS-84 ellipsoid along a track. For the worst geometry of an orbit it
// is a sphere of the equatorial radius, with the heights from the perigee over the
// equator to the apogee over the poles. Angles of arrival are over the horizontal
// plane at the ground.
//
// Sources of the limits: limits.csv, each row with its rule and whether its text was
// read or the row is recalled from memory. Coordination, national rules and everything
// that a licence may ask beyond are left out; see Caution.
package fluxdensity

// Caution belongs beside every answer of this package.
const Caution = "Using a frequency needs a licence, and the national rules decide; limits recalled from memory are to be checked against the rule's text."
