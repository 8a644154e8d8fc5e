// Package elements reads and writes SGP4 element sets: two-line element sets (TLE,
// with or without a name line) and CCSDS 502.0-B orbit mean-elements messages
// (OMM) as key-value notation, XML, JSON and CSV. It also picks one set per object
// and finds an object by number or name.
//
// Frame TEME, time scale UTC, theory SGP4: anything else is refused by name, as are
// SGP4-XP (ephemeris type 4) and tabulated orbits (OEM). Reading never repairs in
// silence: what was assumed comes back as a Warning, what is wrong as a *Fault, and
// all faults of a text are returned together as a *Faults.
//
// Canonical TLE text, as WriteTLE writes it: the usual columns, a catalogue number
// with leading zeros, ephemeris type 0, numbers padded with blanks, an exponent of
// zero with a minus sign ("00000-0"), except for a B* of zero ("00000+0"), as most
// of the published verification sets have it. A canonical text comes back byte for
// byte; so does one that went through any OMM form in between.
//
// Sources: the column layout and the OMM keywords as CCSDS 502.0-B and the
// published verification sets of AIAA 2006-6753 use them.
package elements
