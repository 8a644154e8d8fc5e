// Package passvolume makes of a pass's schedule and of the statistics of its path not
// one number of bytes but their distribution, and adds the distributions of passes.
//
// Within a pass the weather is one: at every instant the attenuation is the one that is
// exceeded in the same share of the time, so that the volume is a function of that
// share. Between passes the truth lies somewhere from each pass on its own (Independent)
// to one weather for all of them (Dependent); both are given.
//
// What the statistics do not reach is not made up: in the share of the time below the
// least exceedance nothing counts as received, and above the greatest the attenuation
// of the greatest is held. So the distribution is a bound from below, but for the parts
// into which the time between two exceedances is cut (16, each with its middle).
//
// The package takes plain columns and knows nothing of propagation models: attenuation
// is whatever lowers C/N0, noise included.
package passvolume
