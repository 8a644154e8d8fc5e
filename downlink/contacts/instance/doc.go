// Package instance makes problems of contact planning for tests and benchmarks. The same
// figures and seed give the same problem on every machine. All names, orbits and places
// are invented.
package instance
