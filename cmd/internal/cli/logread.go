package cli

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"io"
	"os"
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/measured"
)

// readLog reads the file; digest tells it from others.
func (in *logInput) readLog(env *Env, s *scenario.Scenario) (l *measured.Log, digest string, err error) {
	f, err := os.Open(in.file)
	if err != nil {
		return nil, "", &InputError{Err: err}
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, measured.MaxSize+1))
	if err != nil {
		return nil, "", fmt.Errorf("%s: %w", in.file, err)
	}
	if l, err = in.parse(env, s, data); err != nil {
		return nil, "", err
	}
	for _, n := range l.Notes {
		env.note("%s: %s", printable(in.file), printable(n))
	}
	sum := sha256.Sum256(data)
	return l, hex.EncodeToString(sum[:]), nil
}

// parse reads a table as it is laid out by the flags or by the scenario.
func (in *logInput) parse(env *Env, s *scenario.Scenario, data []byte) (*measured.Log, error) {
	columns := map[string]string{}
	for _, c := range in.columns {
		ours, theirs, ok := strings.Cut(c, "=")
		if !ok {
			return nil, inputErrorf("--column: %q is not OURS=THEIRS, as in cn0_dbhz=Signal", c)
		}
		columns[ours] = theirs
	}
	lay, err := in.layout(env, s, data)
	if err != nil {
		return nil, err
	}
	var l *measured.Log
	if lay != nil {
		l, err = measured.ReadLaidOut(bytes.NewReader(data), in.file, lay)
	} else {
		l, err = measured.Read(bytes.NewReader(data), in.file, columns)
	}
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return l, nil
}

// layout is the kind of table that is named, or else the only one that the file fits.
func (in *logInput) layout(env *Env, s *scenario.Scenario, data []byte) (*measured.Layout, error) {
	if in.table != "" {
		if len(in.columns) > 0 {
			return nil, inputErrorf("--column: it stands beside --table, which says what the columns hold; leave one of them out")
		}
		return pick("table", in.table, s.Measurements, func(l *measured.Layout) string { return l.Name })
	}
	if len(in.columns) > 0 {
		return nil, nil
	}
	var found []*measured.Layout
	var names []string
	for i := range s.Measurements {
		if l := &s.Measurements[i]; l.Fits(data[:min(len(data), 65536)]) {
			found, names = append(found, l), append(names, l.Name)
		}
	}
	switch len(found) {
	case 0:
		return nil, nil
	case 1:
		env.note("%s is read as %s", printable(in.file), printable(names[0]))
		return found[0], nil
	}
	return nil, inputErrorf("--table: left out, and %s has the columns of %s; name one", in.file, quotedList(names))
}
