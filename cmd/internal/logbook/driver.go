package logbook

import (
	"context"
	"database/sql"
	"fmt"
	"net/url"
	"os"

	_ "modernc.org/sqlite" // the database engine, registered as "sqlite"
)

// steps bring the schema from each version to the next.
var steps = []string{
	`CREATE TABLE pass(id INTEGER PRIMARY KEY, spacecraft TEXT NOT NULL, station TEXT NOT NULL, first TEXT NOT NULL, last TEXT NOT NULL,
		source TEXT NOT NULL, elements TEXT NOT NULL, note TEXT NOT NULL DEFAULT '', taken TEXT NOT NULL);
	CREATE TABLE sample(pass INTEGER NOT NULL REFERENCES pass(id), at TEXT NOT NULL, quantity TEXT NOT NULL, measured REAL NOT NULL, predicted REAL, state TEXT NOT NULL);
	CREATE INDEX sample_of_pass ON sample(pass)`,
	`ALTER TABLE pass ADD COLUMN digest TEXT NOT NULL DEFAULT '';
	CREATE UNIQUE INDEX pass_once ON pass(spacecraft, station, digest) WHERE digest <> ''`,
}

// Book is an open logbook.
type Book struct {
	db   *sql.DB
	path string
}

// Open opens the file, which is made where it is not there and make is true.
func Open(ctx context.Context, path string, make bool) (*Book, error) {
	if _, err := os.Stat(path); err != nil && !make {
		return nil, fmt.Errorf("logbook %s: %w; log add makes one", path, err)
	}
	from := url.URL{Scheme: "file", Opaque: url.PathEscape(path), RawQuery: "_pragma=journal_mode(WAL)&_pragma=synchronous(FULL)&_pragma=foreign_keys(1)&_pragma=busy_timeout(5000)"}
	db, err := sql.Open("sqlite", from.String())
	if err != nil {
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	db.SetMaxOpenConns(1)
	b := &Book{db: db, path: path}
	if err := b.migrate(ctx); err != nil {
		db.Close()
		return nil, fmt.Errorf("logbook %s: %w", path, err)
	}
	return b, nil
}

// Close closes the file.
func (b *Book) Close() error { return b.db.Close() }

func (b *Book) migrate(ctx context.Context) error {
	tx, err := b.db.BeginTx(ctx, nil)
	if err != nil {
		return err
	}
	defer tx.Rollback() // of no effect after the commit
	version := 0
	if err := tx.QueryRowContext(ctx, "PRAGMA user_version").Scan(&version); err != nil {
		return err
	}
	if version > len(steps) {
		return fmt.Errorf("it has version %d, and this program knows versions up to %d; use a newer program", version, len(steps))
	}
	if version == len(steps) {
		return nil
	}
	for _, s := range steps[version:] {
		if _, err := tx.ExecContext(ctx, s); err != nil {
			return fmt.Errorf("bringing it up to date from version %d: %w", version, err)
		}
	}
	if _, err := tx.ExecContext(ctx, fmt.Sprintf("PRAGMA user_version = %d", len(steps))); err != nil {
		return err
	}
	return tx.Commit()
}
