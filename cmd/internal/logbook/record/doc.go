// Package record holds what the logbook keeps of a pass, without the engine that keeps it: an
// entry with its seal, its way out and back as CSV and JSON, and what can be read of a damaged file
// page by page.
//
// Source of the file's layout: SQLite, Database File Format (sqlite.org/fileformat2.html).
package record
