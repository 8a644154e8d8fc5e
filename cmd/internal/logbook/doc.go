// Package logbook keeps passes in an SQLite file: what was taken, what was predicted for
// the samples, with which element set, and notes.
//
// The file is written ahead (WAL) and synced at every commit, so that an entry is there
// whole or not at all after a loss of power. The schema has a version; an older file is
// brought up to date when it is opened, a newer one is refused.
package logbook
