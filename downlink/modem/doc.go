// Package modem knows modulations and codings: the Eb/N0 that they require at an error
// rate, what of the sent symbols is information, and how wide the signal is.
//
// The Standard catalogue holds the codings of CCSDS 131.0-B, those of DVB-S2 and, as
// far as their thresholds were found, of DVB-S2X, and what small spacecraft use. Every
// row says where its figures come from and how they are known; a figure that is only
// remembered is not in it. A catalogue is extended by rows of the user's own
// (ReadRows, Catalogue.With).
//
// A required Eb/N0 is the code's own, per information bit over additive white Gaussian
// noise, without implementation loss. The code rate is charged to it; sync markers and
// frame headers are not, but for DVB-S2 and DVB-S2X, whose tables charge their
// headers. Row.NetRate takes off everything.
//
// Error rates come from formulas where there are any (uncoded modulations, the union
// bound of the convolutional codes, bounded-distance decoding of Reed-Solomon), else
// from points of simulations, interpolated in the logarithm of the error rate and never
// continued beyond their ends.
//
// Left out for want of figures that were read: codings over modulations denser than
// QPSK outside of DVB, trellis-coded 8PSK, and the serially concatenated codes of CCSDS
// 131.2-B.
package modem
