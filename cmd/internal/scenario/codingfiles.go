package scenario

import (
	"errors"
	"fmt"
	"io/fs"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/modem"
)

// codingFiles returns the standard catalogue with the rows of the files that the
// scenario names, nil where it names none. After a fault modes are not looked up, as
// they may name a row that was not read.
func (r *reader) codingFiles(o object) *modem.Catalogue {
	if !o.has("coding_files") {
		return nil
	}
	before := r.faults.count()
	all := modem.Standard()
	seen := map[string]bool{}
	for i, n := range o.items("coding_files", "file names", maxParts) {
		key := fmt.Sprintf("coding_files[%d]", i)
		file, ok := o.textAt(n, key, false)
		if !ok {
			continue
		}
		if seen[file] {
			o.fault(n, key, "%s stands twice", "remove one of the two", quote(file))
			continue
		}
		seen[file] = true
		rows, err := r.src.codingRows(file)
		var pe *fs.PathError
		if errors.As(err, &pe) {
			o.fault(n, key, "%s cannot be read: %v", "names are relative to the scenario file", quote(file), pe.Err)
			continue
		}
		if err == nil {
			all, err = withRows(all, rows)
		}
		o.codingFaults(n, key, file, err)
	}
	r.codingsUnread = r.faults.count() > before
	return all
}

// withRows adds the rows of a file to a catalogue, which it returns as it was where
// they cannot be added.
func withRows(all *modem.Catalogue, rows []modem.Row) (*modem.Catalogue, error) {
	if len(rows) == 0 {
		return all, errors.New("no row stands below the header; give one or remove the file from the list")
	}
	with, err := all.With(rows...)
	if err != nil {
		return all, err
	}
	return with, nil
}

// codingFaults adds what is wrong with a file, each fault with the file's name.
func (o object) codingFaults(at *tree.Node, key, file string, err error) {
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		for _, e := range joined.Unwrap() {
			o.codingFaults(at, key, file, e)
		}
		return
	}
	if err != nil {
		o.fault(at, key, "%s: %v", "", file, err)
	}
}

// codingRows reads a file of rows that the scenario names.
func (s *source) codingRows(name string) ([]modem.Row, error) {
	f, err := s.open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return modem.ReadRows(f)
}
