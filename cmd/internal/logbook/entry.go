package logbook

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"math"
	"time"
)

// Entry is a pass of the logbook.
type Entry struct {
	ID                             int64
	Spacecraft, Station            string
	First, Last                    time.Time // of the samples
	Source, Elements, Note, Digest string
	Taken                          time.Time // into the book
	Values                         []Value
}

// Value is one measured number with what was predicted (NaN: nothing) and how it is used.
type Value struct {
	At                  time.Time
	Quantity, State     string
	Measured, Predicted float64
}

// ErrTaken says that the same measurements are in the book.
var ErrTaken = errors.New("these measurements are in the logbook already")

const layout = "2006-01-02T15:04:05.000000000Z"

// Add adds an entry, whole or not at all, and returns its number.
func (b *Book) Add(ctx context.Context, e *Entry) (int64, error) {
	tx, err := b.db.BeginTx(ctx, nil)
	if err != nil {
		return 0, fmt.Errorf("logbook %s: %w", b.path, err)
	}
	defer tx.Rollback() // of no effect after the commit
	id, err := add(ctx, tx, e)
	if err == nil {
		err = tx.Commit()
	}
	if err != nil {
		return 0, fmt.Errorf("logbook %s: %w", b.path, err)
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
	r, err := tx.ExecContext(ctx, "INSERT INTO pass(spacecraft,station,first,last,source,elements,note,taken,digest) VALUES(?,?,?,?,?,?,?,?,?)",
		e.Spacecraft, e.Station, e.First.UTC().Format(layout), e.Last.UTC().Format(layout), e.Source, e.Elements, e.Note, e.Taken.UTC().Format(layout), e.Digest)
	if err != nil {
		return 0, err
	}
	id, err := r.LastInsertId()
	if err != nil {
		return 0, err
	}
	put, err := tx.PrepareContext(ctx, "INSERT INTO sample(pass,at,quantity,measured,predicted,state) VALUES(?,?,?,?,?,?)")
	if err != nil {
		return 0, err
	}
	defer put.Close()
	for i := range e.Values {
		v := &e.Values[i]
		predicted := sql.NullFloat64{Float64: v.Predicted, Valid: !math.IsNaN(v.Predicted)}
		if _, err := put.ExecContext(ctx, id, v.At.UTC().Format(layout), v.Quantity, v.Measured, predicted, v.State); err != nil {
			return 0, err
		}
	}
	return id, nil
}

// List returns all entries without their values, in the order in which they were added. Of
// a broken file it returns what can be read, beside the error.
func (b *Book) List(ctx context.Context) ([]Entry, error) {
	rows, err := b.db.QueryContext(ctx, "SELECT id,spacecraft,station,first,last,source,elements,note,digest,taken FROM pass ORDER BY id")
	if err != nil {
		return nil, b.broken(err)
	}
	defer rows.Close()
	var out []Entry
	for rows.Next() {
		var e Entry
		var first, last, taken string
		if err := rows.Scan(&e.ID, &e.Spacecraft, &e.Station, &first, &last, &e.Source, &e.Elements, &e.Note, &e.Digest, &taken); err != nil {
			return out, b.broken(err)
		}
		if e.First, err = time.Parse(layout, first); err == nil {
			if e.Last, err = time.Parse(layout, last); err == nil {
				e.Taken, err = time.Parse(layout, taken)
			}
		}
		if err != nil {
			return out, b.broken(err)
		}
		out = append(out, e)
	}
	if err := rows.Err(); err != nil {
		return out, b.broken(err)
	}
	return out, nil
}

// Fill reads the values of an entry; of a broken file what can be read, beside the error.
func (b *Book) Fill(ctx context.Context, e *Entry) error {
	rows, err := b.db.QueryContext(ctx, "SELECT at,quantity,measured,predicted,state FROM sample WHERE pass=? ORDER BY at,rowid", e.ID)
	if err != nil {
		return b.broken(err)
	}
	defer rows.Close()
	for rows.Next() {
		var v Value
		var at string
		var predicted sql.NullFloat64
		err := rows.Scan(&at, &v.Quantity, &v.Measured, &predicted, &v.State)
		if err == nil {
			v.At, err = time.Parse(layout, at)
		}
		if err != nil {
			return b.broken(err)
		}
		if v.Predicted = math.NaN(); predicted.Valid {
			v.Predicted = predicted.Float64
		}
		e.Values = append(e.Values, v)
	}
	if err := rows.Err(); err != nil {
		return b.broken(err)
	}
	return nil
}

func (b *Book) broken(err error) error {
	return fmt.Errorf("logbook %s: %w; log show --format csv writes out what can be read", b.path, err)
}
