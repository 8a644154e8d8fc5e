// Package oem reads and writes orbit ephemeris messages, CCSDS 502.0-B (versions 1.0, 2.0
// and 3.0), in key-value notation (KVN) and XML: states of an object at instants, in
// segments with a reference frame, a time scale and an interpolation each.
//
// Read. Frames: TEME, ITRF in any realisation, GRC and TDR (true of date, rotating), TOD, MOD, EME2000
// (J2000), GCRF and ICRF, about the Earth. Time scales: UTC, TAI, TT, GPS and UT1.
// Interpolations: HERMITE, LAGRANGE, LINEAR. Accelerations are passed over. Covariances are turned onto the
// radial, along and across axes of the orbit.
//
// Left out: other centres, frames held at an epoch (REF_FRAME_EPOCH), TDB and mission time.
//
// Units: m and m/s inside, km and km/s in the files. The keywords and their meaning are
// those of the standard as its public models and samples show them; its text was not at
// hand, so what is said here of it is from memory.
package oem
