// Package licence keeps to what a licence allows: which stations a spacecraft may use,
// from which elevation it may radiate or be received, in which sectors and hours not,
// and with which power and bandwidth.
//
// Breaches tells what of a transmitter itself is not allowed. Keep cuts a pass down to
// the time that is allowed and names every rule with the time that it takes away, so
// that nothing is shortened without a reason that the user can read.
//
// A rule for radiating holds for the spacecraft's transmitter and for the station's, so
// that it binds the downlink and the uplink; a rule for receiving binds the downlink
// alone. Elevations are of whatever kind the caller decides passes by. All times are
// UTC.
//
// What a real licence says is for the user to put in; nothing is assumed.
package licence
