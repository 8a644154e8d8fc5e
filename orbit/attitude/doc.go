// Package attitude reads how a spacecraft was or will be held from CCSDS Attitude
// Ephemeris Messages (504.0-B, KVN and XML) and tells the body's axes at an instant.
//
// A quaternion (Q1, Q2, Q3, QC) with QC = cos(φ/2) turns the reference frame by φ about
// (Q1, Q2, Q3) into the body: the body's axes are the frame's, turned so. Euler angles
// turn in the order of EULER_ROT_SEQ, each about the axis that the turns before it left.
// Between two records the body turns about one axis at a steady rate (spherical linear
// interpolation), whatever method the file names; Source says so. Outside the useable
// span of a segment there is no attitude, and nothing is continued.
//
// Read are the types QUATERNION and EULER_ANGLE, with rates or derivatives, which are
// not used; times in UTC; frames EME2000 (J2000), GCRF, ICRF, TOD, TEME and ITRF. Left out are
// SPIN records, whose zero of the phase is not settled here, and frames that turn
// with the orbit.
//
// Sources: data lines and keywords of CCSDS 504.0-B-1 and B-2 as public readers of the
// format quote its tables 4-2 to 4-4 (seen second hand); the sense of the quaternion from
// memory of its annex, held against the published example's norms and a general-purpose
// library's rotations (aem_test.go).
package attitude
