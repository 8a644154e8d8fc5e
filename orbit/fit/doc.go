// Package fit finds the SGP4 mean elements that follow given positions best, by
// weighted least squares: differential correction on this module's own propagation.
//
// Unknown are six equinoctial-like mean elements at a chosen epoch (see parameters), which
// behave on circular and on equatorial orbits, and B* unless it is stated. A step comes from the
// singular values of the scaled partials with Levenberg's and Marquardt's damping; the
// partials are central differences of whole propagations, so that they hold for
// near-Earth and deep-space orbits alike. The method is that of Vallado and Crawford,
// AIAA 2008-6770 (SGP4 orbit determination); from memory.
//
// All data stand in TEME and UTC here. Residuals are datum less fit: radially, along the
// track (in the orbit's plane, at right angles to the radius, forwards) and across
// (towards the orbit's pole).
//
// What the residuals of a fit to real positions show is mostly what SGP4 leaves out, which
// is alike from datum to datum. The covariance therefore counts fewer independent data than there are,
// by their correlation from one to the next (Result.DataPerIndependent).
//
// Nothing is dropped in silence: data leave a fit only by Options.RejectBeyond, each named
// in the Result. Where the data cannot carry a fit, it is refused with a *Refusal.
package fit
