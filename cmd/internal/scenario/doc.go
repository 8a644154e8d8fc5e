// Package scenario reads what the user wrote (a scenario file, SLANTWISE_ variables,
// flags) into checked domain values, or says everything that is wrong with it at
// once, each fault with its file, line and key path.
//
// It leaves the element files' formats to package elements and computes nothing.
package scenario
