package logbook

import (
	"context"
	"database/sql"
	"fmt"
)

// steps bring the schema from each version to the next. A row of an earlier version keeps the
// columns that it was written with; those added later read as their defaults.
var steps = []string{
	`CREATE TABLE pass(id INTEGER PRIMARY KEY, spacecraft TEXT NOT NULL, station TEXT NOT NULL, first TEXT NOT NULL, last TEXT NOT NULL,
		source TEXT NOT NULL, elements TEXT NOT NULL, note TEXT NOT NULL DEFAULT '', taken TEXT NOT NULL);
	CREATE TABLE sample(pass INTEGER NOT NULL REFERENCES pass(id), at TEXT NOT NULL, quantity TEXT NOT NULL, measured REAL NOT NULL, predicted REAL, state TEXT NOT NULL);
	CREATE INDEX sample_of_pass ON sample(pass)`,
	`ALTER TABLE pass ADD COLUMN digest TEXT NOT NULL DEFAULT '';
	CREATE UNIQUE INDEX pass_once ON pass(spacecraft, station, digest) WHERE digest <> ''`,
	`ALTER TABLE pass ADD COLUMN transmitter TEXT NOT NULL DEFAULT '';
	ALTER TABLE pass ADD COLUMN antenna TEXT NOT NULL DEFAULT '';
	ALTER TABLE pass ADD COLUMN mode TEXT NOT NULL DEFAULT '';
	ALTER TABLE pass ADD COLUMN predicted_bytes REAL;
	ALTER TABLE pass ADD COLUMN taken_bytes REAL;
	ALTER TABLE pass ADD COLUMN samples INTEGER;
	ALTER TABLE pass ADD COLUMN seal TEXT NOT NULL DEFAULT '';
	ALTER TABLE sample ADD COLUMN azimuth_deg REAL;
	ALTER TABLE sample ADD COLUMN elevation_deg REAL`,
}

// What List and Fill select, by version: what an earlier schema does not have stands as its
// default, so that a file that cannot be written is read as it is.
var (
	passColumns = []string{
		"SELECT id,spacecraft,station,first,last,source,elements,note,taken,'','','','',NULL,NULL,NULL,'' FROM pass",
		"SELECT id,spacecraft,station,first,last,source,elements,note,taken,digest,'','','',NULL,NULL,NULL,'' FROM pass",
		"SELECT id,spacecraft,station,first,last,source,elements,note,taken,digest,transmitter,antenna,mode,predicted_bytes,taken_bytes,samples,seal FROM pass",
	}
	sampleColumns = []string{
		"SELECT at,quantity,measured,predicted,state,NULL,NULL FROM sample",
		"SELECT at,quantity,measured,predicted,state,NULL,NULL FROM sample",
		"SELECT at,quantity,measured,predicted,state,azimuth_deg,elevation_deg FROM sample",
	}
)

// migrate brings the schema up to date in one transaction.
func (b *Book) migrate(ctx context.Context) error {
	tx, err := b.db.BeginTx(ctx, nil)
	if err != nil {
		return err
	}
	defer tx.Rollback() // of no effect after the commit
	if err := b.readVersion(ctx, tx); err != nil {
		return err
	}
	if b.version == len(steps) {
		return nil
	}
	if err := ours(ctx, tx, b.version); err != nil {
		return err
	}
	for _, s := range steps[b.version:] {
		if _, err := tx.ExecContext(ctx, s); err != nil {
			return fmt.Errorf("bringing it up to date from version %d: %w", b.version, err)
		}
	}
	if _, err := tx.ExecContext(ctx, fmt.Sprintf("PRAGMA user_version = %d", len(steps))); err != nil {
		return err
	}
	b.version = len(steps)
	return tx.Commit()
}

// querier is a database or a transaction.
type querier interface {
	QueryRowContext(ctx context.Context, query string, args ...any) *sql.Row
}

func (b *Book) readVersion(ctx context.Context, q querier) error {
	if err := q.QueryRowContext(ctx, "PRAGMA user_version").Scan(&b.version); err != nil {
		return err
	}
	if b.version > len(steps) || b.version < 0 {
		return fmt.Errorf("it has version %d, and this program knows versions up to %d; use a newer program", b.version, len(steps))
	}
	return nil
}

// ours refuses a database of another program: one without a version of ours that holds tables.
func ours(ctx context.Context, q querier, version int) error {
	tables := 0
	if err := q.QueryRowContext(ctx, "SELECT count(*) FROM sqlite_schema").Scan(&tables); err != nil {
		return err
	}
	if version == 0 && tables > 0 {
		return errForeign
	}
	return nil
}
