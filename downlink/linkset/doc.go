// Package linkset shares the time of a pass among the links of one radio or one antenna:
// several transmitters at once, a half-duplex radio that sends and receives in turns, or
// commands first and the downlink after them.
//
// A link is a list of spans in which it gets something through, each at one rate; how
// they come about (rate plans, margins) is not its business. What a rule leaves of them
// is worked out exactly, by the instants at which the turns change.
//
// Left out: that links at once take power or interfere with each other, and that a
// receiver locks anew after a turn; give that time as part of the change between turns.
package linkset
