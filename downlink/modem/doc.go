// Package modem knows modulations and codings: the Eb/N0 that they require, the
// share of the bits that carries information, and how many bits ride on a symbol.
//
// A required Eb/N0 is the code's own, per information bit over additive white
// Gaussian noise, without implementation loss. Framing (sync marks, headers, idle
// frames) is not charged to the rate.
package modem
