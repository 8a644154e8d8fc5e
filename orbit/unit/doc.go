// Package unit holds the quantities that all other packages of slantwise speak in.
//
// Plain quantities (Angle, Length, Speed, Frequency, Temperature, BitRate) are
// float64 types in SI units, so that swapped arguments do not compile. Write a
// value with its unit constant, 45*unit.Degree, and never multiply two typed
// values.
//
// Decibels come in two kinds (Rec. ITU-R V.574-5, section 4): DB is a ratio, and
// sums of ratios have meaning; Level is a power, and a level takes ratios but
// does not add to another level.
//
// The package imports nothing of slantwise.
package unit
