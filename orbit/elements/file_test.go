package elements

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"
	"time"

	"slantwise/orbit"
)

func TestReadFile(t *testing.T) {
	dir := t.TempDir()
	good := filepath.Join(dir, "good.tle")
	if err := os.WriteFile(good, []byte(wagtailOne+"\n"+wagtailTwo+"\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	sets, warnings, err := ReadFile(good)
	if err != nil || len(sets) != 1 || len(warnings) != 0 || sets[0].Source != (orbit.Source{File: good, Line: 1}) {
		t.Errorf("got %+v, %v, %v", sets, warnings, err)
	}
	// A sparse file: 200 MB that take no place.
	large := filepath.Join(dir, "large.tle")
	if err := os.WriteFile(large, nil, 0o644); err != nil {
		t.Fatal(err)
	}
	if err := os.Truncate(large, 200_000_000); err != nil {
		t.Fatal(err)
	}
	for path, want := range map[string]string{
		dir:                             dir + ": is a directory, not a file of element sets; name a file in it",
		large:                           large + ": holds 200000000 bytes, more than the 64000000 bytes that are read; keep only the objects that you need, or split the file",
		filepath.Join(dir, "none.tle"):  filepath.Join(dir, "none.tle") + ": cannot be read: no such file or directory; check the name and the folder it is relative to",
		filepath.Join(good, "none.tle"): filepath.Join(good, "none.tle") + ": cannot be read: not a directory; check that the file can be read",
	} {
		if _, _, err := ReadFile(path); err == nil || err.Error() != want {
			t.Errorf("\n got %v\nwant %s", err, want)
		}
	}
}

func TestNoPermission(t *testing.T) {
	err := explain("a.tle", &fs.PathError{Op: "open", Path: "a.tle", Err: fs.ErrPermission})
	if err.Error() != "a.tle: cannot be read: permission denied; give yourself the right to read it" || !errors.Is(err, fs.ErrPermission) {
		t.Errorf("error %v", err)
	}
	if os.Getuid() == 0 {
		t.Skip("the superuser may read everything")
	}
	path := filepath.Join(t.TempDir(), "a.tle")
	if err := os.WriteFile(path, []byte(pairTLE), 0); err != nil {
		t.Fatal(err)
	}
	if _, _, err := ReadFile(path); !errors.Is(err, fs.ErrPermission) {
		t.Errorf("error %v, want one of permission", err)
	}
}

// endless is a text without an end.
type endless struct{}

func (endless) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = '#'
	}
	return len(p), nil
}

func TestReadStops(t *testing.T) {
	_, _, err := Read(endless{}, "stream")
	if err == nil || err.Error() != "stream: holds more than the 64000000 bytes that are read; keep only the objects that you need, or split the file" {
		t.Errorf("error %v", err)
	}
	broken := errors.New("line is down")
	_, _, err = Read(io.MultiReader(strings.NewReader(pairTLE), iotest.ErrReader(broken)), "stream")
	if !errors.Is(err, broken) || err.Error() != "stream: reading element sets: line is down" {
		t.Errorf("error %v", err)
	}
	if _, _, err = Read(strings.NewReader("x"), ""); err == nil || !strings.HasPrefix(err.Error(), `"x": no element set`) {
		t.Errorf("error without a file name: %v", err)
	}
}

func TestWarningsAreCapped(t *testing.T) {
	one := strings.Replace(wagtailOne, "-4 0", "-4 2", 1)
	set := one[:68] + string(rune('0'+checksum(one))) + "\n" + wagtailTwo + "\n"
	_, warnings, err := Read(strings.NewReader(strings.Repeat(set, 60)), "many")
	if err != nil {
		t.Fatal(err)
	}
	if len(warnings) != 51 || warnings[50].String() != "many: and 10 more warnings" {
		t.Errorf("%d warnings, the last is %s", len(warnings), warnings[len(warnings)-1])
	}
}

// TestTLERefusals: what a TLE cannot hold is refused, never cut, and nothing is
// written, not even the sets that could be.
func TestTLERefusals(t *testing.T) {
	for name, c := range map[string]struct {
		change func(*orbit.Elements)
		want   string
	}{
		"nine digits": {func(el *orbit.Elements) { el.CatalogNumber = 799_500_123 },
			"WAGTAIL 1 (799500123) cannot be written as tle: the catalogue number 799500123 is above 339999, the last that its five columns hold; write an OMM"},
		"first past Alpha-5": {func(el *orbit.Elements) { el.CatalogNumber = 340_000 },
			"WAGTAIL 1 (340000) cannot be written as tle: the catalogue number 340000 is above 339999, the last that its five columns hold; write an OMM"},
		"eccentricity": {func(el *orbit.Elements) { el.Eccentricity = 0.99999996 },
			"ECCENTRICITY 0.99999996 rounds to 1"},
		"first derivative": {func(el *orbit.Elements) { el.MeanMotionDot = -1.5 }, "MEAN_MOTION_DOT -1.5 rev/day² is 1 or more, beyond its columns"},
		"name":             {func(el *orbit.Elements) { el.Name = "WAG\nTAIL" }, "the name holds the invisible character U+000A"},
		"padded name":      {func(el *orbit.Elements) { el.Name = "WAGTAIL " }, `the name "WAGTAIL " begins or ends with a blank`},
		"classification":   {func(el *orbit.Elements) { el.Classification = "UU" }, `the classification "UU" is not U, C, S or empty`},
		"set number":       {func(el *orbit.Elements) { el.ElementSetNo = -1 }, "the element set number or the revolution number is negative"},
	} {
		t.Run(name, func(t *testing.T) {
			el := exampleSet()
			c.change(&el)
			var b bytes.Buffer
			_, err := WriteTLE(&b, []orbit.Elements{exampleSet(), el})
			if err == nil || !strings.Contains(err.Error(), c.want) && name != "eccentricity" {
				t.Errorf("\n got %v\nwant %s", err, c.want)
			}
			var we *WriteError
			if !errors.As(err, &we) || we.Format != TLE {
				t.Errorf("error is a %T, want *WriteError for a TLE", err)
			}
			if b.Len() > 0 {
				t.Errorf("%d bytes were written", b.Len())
			}
		})
	}
}

func TestTLERoundingWarning(t *testing.T) {
	el := exampleSet()
	el.Name = "WAGTAIL WITH A NAME OF MANY LETTERS"
	el.Epoch = el.Epoch.Add(500 * time.Microsecond)
	el.InternationalDesignator = "NOT YET ASSIGNED"
	el.MeanMotion, el.Eccentricity, el.BStar = 15.219876543, 0.00123456, 0.0000845534
	el.MeanMotionDot, el.MeanMotionDDot = -0.0000123456, 1.5e-15
	el.ElementSetNo, el.RevolutionAtEpoch = 12345, 123456
	var b bytes.Buffer
	warnings, err := WriteTLE(&b, []orbit.Elements{el})
	if err != nil {
		t.Fatal(err)
	}
	want := `WAGTAIL WITH A NAME OF MANY LETTERS (99001): a TLE cannot hold all of it: OBJECT_ID "NOT YET ASSIGNED" left blank; ` +
		`EPOCH 2026-03-10T12:00:00.000500 written as 2026-03-10T12:00:00.000864; MEAN_MOTION_DOT -0.0000123456 written as -0.00001235; ` +
		`MEAN_MOTION_DDOT 0.0000000000000015 written as 0; BSTAR 0.0000845534 written as 0.000084553; ELEMENT_SET_NO 12345 written as 2345, counting on from 0 after 9999; ` +
		`ECCENTRICITY 0.00123456 written as 0.0012346; MEAN_MOTION 15.219876543 written as 15.21987654; REV_AT_EPOCH 123456 written as 23456, counting on from 0 after 99999; ` +
		`the name has 35 characters, more than the 24 that a name line has by custom; written whole`
	if len(warnings) != 1 || warnings[0].String() != want {
		t.Errorf("\n got %v\nwant %s", warnings, want)
	}
}

// failing is a writer on a full disk.
type failing struct{}

var errFull = errors.New("no space left")

func (failing) Write([]byte) (int, error) { return 0, errFull }

func TestWriterFails(t *testing.T) {
	for f := TLE; f <= OMMCSV; f++ {
		if _, err := Write(failing{}, []orbit.Elements{exampleSet()}, f, created); !errors.Is(err, errFull) {
			t.Errorf("%s: error %v", f, err)
		}
	}
}

func TestParseFormat(t *testing.T) {
	for f := TLE; f <= OMMCSV; f++ {
		if got, err := ParseFormat(strings.ToUpper(f.String())); err != nil || got != f {
			t.Errorf("%s is read as %v (%v)", f, got, err)
		}
	}
	if _, err := ParseFormat("omm-xlm"); err == nil ||
		err.Error() != `element format "omm-xlm" is not known; it must be one of tle, omm-kvn, omm-xml, omm-json, omm-csv; did you mean "omm-xml"?` {
		t.Errorf("error %v", err)
	}
}
