// Package pass finds the passes of spacecraft over sites: when, to the millisecond,
// a spacecraft stands above a site's horizon mask and minimum elevation.
//
// A search looks at a spacecraft three times, each time at less:
//
//  1. track: states every few minutes, with bounds of speed, acceleration and its
//     change between them, once for all sites;
//  2. level: the function u - c ρ (height over the site's horizontal plane, range, and
//     the sine c of the lowest skyline) is as smooth as the motion, so the bounds
//     say which stretches stay below it, and which hold one or two crossings;
//  3. veil: where the skyline is not level, and only between its lowest and highest
//     value, elevation and azimuth are followed with bounds of their own.
//
// A stretch that no bound decides is divided. Nothing is skipped on the strength of
// samples alone, and nothing under half a millisecond is told apart.
//
// Of the ephemeris it uses the positions and their derivative, not SGP4's velocity.
// Against bisection on a general-purpose astronomy library the times of 313 passes
// agree to the half millisecond that they are rounded to
// (TestSearchAgainstReferenceLibrary); against a plain scan over random orbits, sites
// and masks every edge agrees to 0.1 ms (TestSearchAgainstPlainScan). An element set
// is not as good as that: a kilometre along the track is 0.13 s.
package pass
