// Package mount tells what the axes of an antenna's mount can follow: the angles of its
// axes along a pass, where it falls behind, what that costs, and how to take a pass so
// that it costs least.
//
// A drive knows each axis by its range, greatest rate and greatest acceleration, and
// nothing else: no flexure, no wind, no servo loop. Inside those limits it follows exactly;
// what a servo leaves is the antenna's pointing error. Directions are from the site, in
// the apparent sky where a refraction is given.
//
// Geometry. Both kinds of mount are spherical coordinates about their lower axis, and
// so the rate of the lower axis is that of the target across it divided by the cosine of the upper
// angle. Where that cosine goes to 0 lies the keyhole. It and the way through it are in closed form in
// keyhole.go; sources stand at the functions.
package mount
