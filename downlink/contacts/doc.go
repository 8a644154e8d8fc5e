// Package contacts holds the problem of the contact plan: which contacts a network of
// antennas should take, for how long, so that the plan is worth the most and breaks no
// rule. It defines the problem, the plan and what both are called in files; package
// verify judges a plan, package solve finds one with a bound on every other, package
// explain says why.
//
// Times are whole milliseconds after the start of the problem (Ms). Contacts begin and
// end on whole multiples of Problem.Step, 1 s where nothing else is said, so that plans
// are exact and equal on every machine. Every Span is half open: what touches does not
// overlap.
//
// A candidate is a window in which a spacecraft can be heard by an antenna, together
// with what a contact in it is worth: for an own pass the bytes by time (Link.Volume), so
// that a contact may take part of it; for a window of a request so much a second until
// the request has what it desires. A contact lies wholly in one candidate.
//
// The antenna is taken from SetUp before the contact to TearDown after it, which may lie
// outside the candidate. Rules that name days get the days as spans (UTCDays, LocalDays),
// so that a day of 23 or 25 hours counts as what it is.
//
// Left out: keyholes within a pass (cut the candidate), weather that is known only by
// chance (put its quantile into the volume), and ground lines.
package contacts
