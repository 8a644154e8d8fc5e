package measured

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strings"
	"unicode/utf8"
)

// MaxSize is the largest file that is read, in bytes.
const MaxSize = 64_000_000

// mostFaults is how many faults are told; the rest is counted.
const mostFaults = 20

type faults struct {
	name string
	list []error
	more int
}

func (f *faults) add(line int, format string, args ...any) {
	if len(f.list) == mostFaults {
		f.more++
		return
	}
	place := f.name
	if line > 0 {
		place = fmt.Sprintf("%s: line %d", f.name, line)
	}
	f.list = append(f.list, fmt.Errorf("%s: %w", place, fmt.Errorf(format, args...)))
}

func (f *faults) err() error {
	if f.more > 0 {
		return errors.Join(append(f.list, fmt.Errorf("%s: and %d more faults", f.name, f.more))...)
	}
	return errors.Join(f.list...)
}

var tdmKVN = regexp.MustCompile(`^\s*(COMMENT[^\n]*\s+)*CCSDS_TDM_VERS\s*=`)

// Read reads a log: a TDM by its beginning, else a table in CSV, whose columns are
// called as the quantities, or otherwise where columns maps our name to theirs. The
// error holds all faults with file and line.
func Read(r io.Reader, name string, columns map[string]string) (*Log, error) {
	f := &faults{name: name}
	return read(r, own(columns, f), f)
}

// ReadLaidOut reads a log as Read does, a table by a layout. Columns that the layout does not name and
// that are called as a quantity are that.
func ReadLaidOut(r io.Reader, name string, lay *Layout) (*Log, error) {
	return read(r, lay, &faults{name: name})
}

func read(r io.Reader, lay *Layout, f *faults) (*Log, error) {
	name := f.name
	data, err := io.ReadAll(io.LimitReader(r, MaxSize+1))
	if err != nil {
		return nil, fmt.Errorf("%s: reading measurements: %w", name, err)
	}
	data = bytes.TrimPrefix(data, []byte("\uFEFF"))
	l := &Log{Name: name}
	switch head := strings.TrimSpace(string(data[:min(len(data), 4096)])); {
	case len(data) > MaxSize:
		f.add(1, "the file is larger than the %d bytes that are read; split it", MaxSize)
	case !utf8.Valid(data):
		f.add(1, "a byte is not UTF-8: a binary file, or text in another encoding; give a table in UTF-8")
	case tdmKVN.MatchString(head):
		readKVN(string(data), l, f)
	case strings.HasPrefix(head, "<"):
		readXML(data, l, f)
	default:
		readTable(data, lay, l, f)
	}
	if len(f.list) == 0 {
		l.tidy(f)
	}
	if len(f.list) == 0 && len(l.Samples) == 0 {
		f.add(1, "there is no measurement in it; give at least one row")
	}
	if err := f.err(); err != nil {
		return nil, err
	}
	return l, nil
}
