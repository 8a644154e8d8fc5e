// Package reports writes a report for people: a folder with an index over all
// passes and a page a pass, each page with its numbers as CSV and JSON beside it.
//
// It renders finished values and computes none: what a page shows stands in Report
// and Pass. Times are UTC with the station's local time beside them, angles are in
// degrees, distances in km, powers in dBm, ratios in dB, rates in bit/s, volumes in
// bytes. A number that does not exist is NaN in here, an empty cell in CSV, null in
// JSON and a dash on a page.
//
// The same input gives the same bytes with any number of workers; no clock, host
// name or path gets into a page.
package reports
