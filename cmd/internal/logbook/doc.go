// Package logbook keeps passes in an SQLite file: what was taken, what was predicted for
// the samples, with which element set, and notes.
//
// The file is written ahead (WAL) and synced at every commit, so that an entry is there
// whole or not at all after a loss of power. The schema has a version; an older file is
// brought up to date when it is opened to write and read as it is otherwise, a newer one is
// refused. Each entry has a seal, so that a number that changed on the disk is told.
package logbook

import (
	"errors"

	"slantwise/cmd/internal/logbook/record"
)

// Entry is a pass of the logbook, and Value one measured number of it.
type (
	Entry = record.Entry
	Value = record.Value
)

// ErrTaken says that the same measurements are in the book.
var ErrTaken = errors.New("these measurements are in the logbook already")
