// Package verify judges a contact plan: every rule of the problem that it breaks, and
// what it is worth, both from scratch. It takes plans of any origin, also those that
// people wrote by hand, and shares nothing with the solver but the types.
//
// Rules are judged one by one and in the plainest way, contact against contact, so that
// a reader can follow them; plans of some ten thousand contacts take about a second.
package verify
