package cli

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"slices"

	"slantwise/cmd/internal/logbook"
	"slantwise/cmd/internal/logbook/record"
)

// readableBook is a logbook open to read; of a damaged file what can be read of it.
type readableBook struct {
	path    string
	book    *logbook.Book // nil: the engine cannot open it, and the entries are filled
	entries []logbook.Entry
	saved   map[int64]*logbook.Entry // by number, of a damaged file
	fault   error                    // what is wrong with the file, though there is something to read
}

// readBook opens a logbook. Where the engine finds it damaged, the rows that can be read are
// looked for without it; the error is that there is none, or of another kind.
func readBook(ctx context.Context, path string) (*readableBook, error) {
	out := &readableBook{path: path}
	b, err := logbook.OpenToRead(ctx, path)
	if err == nil {
		out.book = b
		out.entries, err = b.List(ctx)
	}
	if err == nil {
		return out, nil
	}
	out.close()
	if !errors.Is(err, logbook.ErrDamaged) {
		return nil, err
	}
	if err := out.salvage(err); err != nil {
		return nil, err
	}
	out.book, out.entries = nil, nil
	for _, e := range out.saved {
		out.entries = append(out.entries, *e)
	}
	slices.SortFunc(out.entries, func(a, b logbook.Entry) int { return cmp.Compare(a.ID, b.ID) })
	return out, nil
}

// salvage reads a damaged file without the engine, once; why is what the engine says.
func (r *readableBook) salvage(why error) error {
	if r.saved != nil {
		return nil
	}
	s, err := record.Salvage(r.path)
	if err != nil {
		return errors.Join(why, err)
	}
	r.saved = map[int64]*logbook.Entry{}
	for i := range s.Entries {
		r.saved[s.Entries[i].ID] = &s.Entries[i]
	}
	r.fault = fmt.Errorf("%w; %s. Keep a copy of the file; log export writes out what can be read, and log import puts it into a new logbook", why, s)
	return nil
}

// fill reads the measurements of an entry; the error tells what of it is missing or changed, and
// what can be read is there beside it.
func (r *readableBook) fill(ctx context.Context, e *logbook.Entry) error {
	if r.book == nil {
		return e.Check()
	}
	err := r.book.Fill(ctx, e)
	if !errors.Is(err, logbook.ErrDamaged) {
		return err
	}
	if fault := r.salvage(err); fault != nil {
		return fault
	}
	if s := r.saved[e.ID]; s != nil {
		e.Values = s.Values
	}
	return e.Check()
}

func (r *readableBook) close() {
	if r.book != nil {
		r.book.Close()
	}
}
