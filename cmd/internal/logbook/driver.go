package logbook

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"net/url"
	"os"

	"modernc.org/sqlite"
)

// Book is an open logbook.
type Book struct {
	db      *sql.DB
	path    string
	version int
}

// Faults of a file, beside those of the machine.
var (
	// ErrDamaged says that the file is no whole database; Salvage reads what is left.
	ErrDamaged = errors.New("the file is damaged or no logbook at all")
	// ErrLocked says that another process holds the file.
	ErrLocked = errors.New("another program is writing to it; try again when it is done")
	// ErrReadOnly says that the file or its folder cannot be written.
	ErrReadOnly = errors.New("the file or its folder cannot be written; give leave to write, or copy the logbook to where you may")

	errForeign = errors.New("it is a database of another program; name another file")
	errEmpty   = errors.New("there is no pass in it yet; log add puts one there")
)

// patience is how long the engine waits for another program, ms.
var patience = 5000

// Primary result codes of the database engine (sqlite.org/rescode.html).
const (
	codeBusy, codeLocked, codeReadOnly                = 5, 6, 8
	codeCorrupt, codeFull, codeCannotOpen, codeNotADB = 11, 13, 14, 26
)

// Open opens the file to write, which is made where it is not there and make is true. A file of
// an earlier version is brought up to date.
func Open(ctx context.Context, path string, make bool) (*Book, error) {
	if _, err := os.Stat(path); err != nil && !make {
		return nil, fmt.Errorf("logbook %s: %w; log add makes one", path, err)
	}
	b, err := open(path, "_txlock=immediate&_pragma=journal_mode(WAL)&_pragma=synchronous(FULL)&_pragma=foreign_keys(1)")
	if err != nil {
		return nil, err
	}
	if err := b.migrate(ctx); err != nil {
		b.db.Close()
		return nil, b.told(err)
	}
	return b, nil
}

// OpenToRead opens a file without changing it: of an earlier version, on a medium that cannot be
// written, or while another program writes.
func OpenToRead(ctx context.Context, path string) (*Book, error) {
	info, err := os.Stat(path)
	switch {
	case err != nil:
		return nil, fmt.Errorf("logbook %s: %w; log add makes one", path, err)
	case info.IsDir():
		return nil, fmt.Errorf("logbook %s: it is a folder; name a file", path)
	case info.Size() == 0:
		if left, err := os.Stat(path + "-wal"); err != nil || left.Size() == 0 {
			return nil, fmt.Errorf("logbook %s: the file is empty (0 bytes); log add puts a pass there", path)
		}
	}
	b, err := open(path, "mode=rw&_pragma=query_only(1)")
	if err != nil {
		return nil, err
	}
	err = b.readVersion(ctx, b.db)
	if left, e := os.Stat(path + "-wal"); code(err) == codeReadOnly || code(err) == codeCannotOpen && (e != nil || left.Size() == 0) {
		// A folder that cannot be written has no room for what a book written ahead shares between its
		// readers; a file that nobody can change needs none of it.
		b.db.Close()
		if b, err = open(path, "mode=ro&immutable=1"); err != nil {
			return nil, err
		}
		err = b.readVersion(ctx, b.db)
	}
	if err == nil {
		err = ours(ctx, b.db, b.version)
	}
	if err == nil && b.version == 0 {
		err = errEmpty
	}
	if err != nil {
		b.db.Close()
		return nil, b.told(err)
	}
	return b, nil
}

func open(path, query string) (*Book, error) {
	from := url.URL{Scheme: "file", Opaque: url.PathEscape(path), RawQuery: fmt.Sprintf("_pragma=busy_timeout(%d)&%s", patience, query)}
	db, err := sql.Open("sqlite", from.String())
	if err != nil {
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	db.SetMaxOpenConns(1)
	return &Book{db: db, path: path}, nil
}

// Close closes the file.
func (b *Book) Close() error { return b.db.Close() }

// code returns the primary result code of the engine, 0 for other errors.
func code(err error) int {
	var e *sqlite.Error
	if errors.As(err, &e) {
		return e.Code() & 0xff
	}
	return 0
}

// told names the file, and what to do where the engine's word alone does not say it.
func (b *Book) told(err error) error {
	kind := err
	switch code(err) {
	case codeBusy, codeLocked:
		kind = ErrLocked
	case codeReadOnly:
		kind = ErrReadOnly
	case codeCorrupt, codeNotADB:
		kind = ErrDamaged
	case codeFull:
		return fmt.Errorf("logbook %s: the disk is full, and nothing was added: %w; make room and try again", b.path, err)
	default:
		return fmt.Errorf("logbook %s: %w", b.path, err)
	}
	return fmt.Errorf("logbook %s: %w (%w)", b.path, kind, err)
}
