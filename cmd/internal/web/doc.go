// Package web serves the live local page of a scenario: what stands in the sky now,
// which contacts come next, the signal to expect, and what a change would bring.
//
// It computes nothing of orbits and radio: a Model, made by the command, answers. The
// package leaves out encryption; an address beyond the loopback is for a closed network.
// No request names a file, and nothing is written.
package web
