// Package orbit turns SGP4 element sets into Earth-fixed states, and holds what
// else depends on the time alone: the rotation of the Earth, the directions of the
// Sun and the Moon, and whether a spacecraft is lit.
//
// It knows nothing of stations and radio. Lengths are metres and times are UTC
// without leap seconds inside a day, as SGP4 takes them; the frame of every
// exported position is Earth-fixed unless its comment names TEME.
//
// SGP4 is the theory of Hoots and Roehrich, Spacetrack Report No. 3 (1980), in the
// revision of Vallado, Crawford, Hujsak and Kelso, AIAA 2006-6753, with the
// constants of WGS-72. Its own error, about a kilometre a few days from the epoch,
// is larger than every other error of this package by orders of magnitude.
package orbit
