// Package web serves the live local page of a scenario: what stands in the sky now,
// which contacts come next, the signal to expect, and what a change would bring.
//
// It computes nothing of orbits and radio: a Model, made by the command, answers. The
// package leaves out encryption; an address beyond the loopback is for a closed network.
// No request has a file read. Nothing is written but a scenario that the page asks for:
// with the page's own key, under a plain name that is free, by Config.Keep.
package web
