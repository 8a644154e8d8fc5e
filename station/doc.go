// Package station describes what stands on the ground: the site with its horizon,
// the look angles from it, the antenna and the receiver.
//
// It knows nothing of transmitters and budgets. Sites are WGS-84, azimuth counts
// clockwise from true north, elevation from the plane normal to the ellipsoid.
package station
