// Package tuning makes the table by which a receiver follows the Doppler shift of a
// pass in steps: at which instant to set which frequency, so that what is left over
// never exceeds a stated value.
//
// The table has the fewest steps that do so: each step is held as long as it can be,
// and a shorter hold never lets a later step last longer. Frequencies are shifts from
// the carrier as sent, in Hz; a receiver that is set to whole steps of its own loses up
// to half of one, which is counted.
//
// SendFor, Received and Transponded relate what a station sends, what a spacecraft
// receives and what comes back.
//
// Left out: the error of the orbit and what is not known of the oscillators; add them to
// what the receiver must bear.
package tuning
