package logbook

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/cmd/internal/logbook/record"
)

// Add adds an entry, whole or not at all, and returns its number.
func (b *Book) Add(ctx context.Context, e *Entry) (int64, error) {
	tx, err := b.db.BeginTx(ctx, nil)
	if err != nil {
		return 0, b.told(err)
	}
	defer tx.Rollback() // of no effect after the commit
	id, err := add(ctx, tx, e)
	if err == nil {
		err = tx.Commit()
	}
	if err != nil {
		return 0, b.told(err)
	}
	return id, nil
}

func add(ctx context.Context, tx *sql.Tx, e *Entry) (int64, error) {
	had := int64(0)
	err := tx.QueryRowContext(ctx, "SELECT id FROM pass WHERE spacecraft=? AND station=? AND digest=? AND digest<>''", e.Spacecraft, e.Station, e.Digest).Scan(&had)
	if err == nil {
		return 0, fmt.Errorf("%w as number %d", ErrTaken, had)
	}
	if !errors.Is(err, sql.ErrNoRows) {
		return 0, err
	}
	r, err := tx.ExecContext(ctx, `INSERT INTO pass(spacecraft,station,first,last,source,elements,note,taken,digest,transmitter,antenna,mode,predicted_bytes,taken_bytes,samples,seal)
		VALUES(?,?,?,?,?,?,?,?,?,?,?,?,?,?,?,?)`, e.Spacecraft, e.Station, record.Stamp(e.First), record.Stamp(e.Last), e.Source, e.Elements, e.Note, record.Stamp(e.Taken), e.Digest,
		e.Transmitter, e.Antenna, e.Mode, nullable(e.PredictedBytes), nullable(e.TakenBytes), len(e.Values), e.Sealed())
	if err != nil {
		return 0, err
	}
	id, err := r.LastInsertId()
	if err != nil {
		return 0, err
	}
	put, err := tx.PrepareContext(ctx, "INSERT INTO sample(pass,at,quantity,measured,predicted,state,azimuth_deg,elevation_deg) VALUES(?,?,?,?,?,?,?,?)")
	if err != nil {
		return 0, err
	}
	defer put.Close()
	for i := range e.Values {
		v := &e.Values[i]
		if _, err := put.ExecContext(ctx, id, record.Stamp(v.At), v.Quantity, v.Measured, nullable(v.Predicted), v.State, nullable(v.AzimuthDeg), nullable(v.ElevationDeg)); err != nil {
			return 0, err
		}
	}
	return id, nil
}

func nullable(v float64) sql.NullFloat64 {
	return sql.NullFloat64{Float64: v, Valid: !math.IsNaN(v)}
}

func plain(v sql.NullFloat64) float64 {
	if !v.Valid {
		return math.NaN()
	}
	return v.Float64
}

// List returns all entries without their values, in the order in which they were added. Of
// a broken file it returns what can be read, beside the error.
func (b *Book) List(ctx context.Context) ([]Entry, error) {
	rows, err := b.db.QueryContext(ctx, passColumns[b.version-1]+" ORDER BY id")
	if err != nil {
		return nil, b.told(err)
	}
	defer rows.Close()
	var out []Entry
	for rows.Next() {
		var e Entry
		var first, last, taken string
		var predicted, bytes sql.NullFloat64
		var samples sql.NullInt64
		if err := rows.Scan(&e.ID, &e.Spacecraft, &e.Station, &first, &last, &e.Source, &e.Elements, &e.Note, &taken, &e.Digest,
			&e.Transmitter, &e.Antenna, &e.Mode, &predicted, &bytes, &samples, &e.Seal); err != nil {
			return out, b.unreadable(err)
		}
		e.PredictedBytes, e.TakenBytes, e.Samples = plain(predicted), plain(bytes), -1
		if samples.Valid {
			e.Samples = int(samples.Int64)
		}
		if err := e.ReadTimes(first, last, taken); err != nil {
			return out, b.unreadable(err)
		}
		out = append(out, e)
	}
	if err := rows.Err(); err != nil {
		return out, b.unreadable(err)
	}
	return out, nil
}

// Fill reads the values of an entry; of a broken file what can be read, beside the error, which
// is also that of an entry that is not what was written.
func (b *Book) Fill(ctx context.Context, e *Entry) error {
	rows, err := b.db.QueryContext(ctx, sampleColumns[b.version-1]+" WHERE pass=? ORDER BY rowid", e.ID)
	if err != nil {
		return b.told(err)
	}
	defer rows.Close()
	for rows.Next() {
		var v Value
		var at string
		var predicted, azimuth, elevation sql.NullFloat64
		err := rows.Scan(&at, &v.Quantity, &v.Measured, &predicted, &v.State, &azimuth, &elevation)
		if err == nil {
			v.At, err = time.Parse(record.Layout, at)
		}
		if err != nil {
			return b.unreadable(err)
		}
		v.Predicted, v.AzimuthDeg, v.ElevationDeg = plain(predicted), plain(azimuth), plain(elevation)
		e.Values = append(e.Values, v)
	}
	if err := rows.Err(); err != nil {
		return b.unreadable(err)
	}
	if err := e.Check(); err != nil {
		return fmt.Errorf("logbook %s: %w", b.path, err)
	}
	return nil
}

// unreadable is the error of a row that is there and makes no sense: damage, unless the engine
// says otherwise.
func (b *Book) unreadable(err error) error {
	if code(err) != 0 {
		return b.told(err)
	}
	return fmt.Errorf("logbook %s: %w (%w)", b.path, ErrDamaged, err)
}
