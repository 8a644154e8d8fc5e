// Package planfiles reads and writes the files of contact plans: windows from outside,
// plans, outages and calendars. It knows rows and times, not what a plan is worth.
//
// Readers return every fault of a file at once, each with file and line. Times are UTC
// and end in Z; calendars may name a time zone. Sources: RFC 4180 for CSV, RFC 5545 for
// calendars.
package planfiles
