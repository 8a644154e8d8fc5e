// Package tolerance is the design control table of a link: every term with its
// design value, how much better and worse it may be, the law of its spread, and from
// these the margins that a design is judged by.
//
// All is in decibels. Terms are independent, so that means and variances add; a loss
// is a negative gain. The means and variances of the laws are properties of the laws
// themselves (exact, and held against simulation by the tests). Criteria are the
// caller's: this package knows no figure that a design must reach, and names no
// standard, since the text of none was read.
//
// Left out: terms that depend on one another, and laws other than the five.
package tolerance
