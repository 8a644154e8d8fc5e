// Package recorder follows the data of a spacecraft from their making through the
// on-board recorder and the contacts to the user: what is lost when the recorder is
// full, what waits, how old data are when they arrive, and how much comes down a day
// and a week.
//
// Data are a fluid: rates are constant between events, and the course between two
// events is exact. A share of what is sent is lost on the way; with an uplink data stay
// on board until they are acknowledged, and what failed is sent again, oldest first.
// A failure of less than half a byte counts as none.
//
// What is sent the moment it is made needs room on board only where it waits for an
// acknowledgement.
//
// Classes are sent in their order, each oldest first. Times are seconds after the start
// of the plan; volumes are bytes (8 bits).
//
// Left out: more than one contact of a spacecraft at a time, several spacecraft that
// share a ground line, and housekeeping that is recorded (make it a class).
package recorder
