package scenario_test

import (
	"os"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario"
)

// TestOwnCoding finds a mode's coding in the file that the scenario names: 3.5 dB at
// the rate 1/2 stand in that file.
func TestOwnCoding(t *testing.T) {
	s := loadGood(t, "testdata/good/own-coding.yaml")
	mode, err := s.Spacecraft[0].Transmitters[0].Modes[0].Resolve()
	if err != nil {
		t.Fatal(err)
	}
	if mode.Coding != "house" || mode.Required != 3.5 || mode.CodeRate != 0.5 || mode.RequiredSource == "" {
		t.Errorf("got %s, %v dB at rate %v from %q", mode.Coding, mode.Required, mode.CodeRate, mode.RequiredSource)
	}
}

// TestCodingFilesRefused gives each wrong list or file its one fault: a coding that
// was not read is not told to be unknown as well.
func TestCodingFilesRefused(t *testing.T) {
	text, err := os.ReadFile("testdata/good/own-coding.yaml")
	if err != nil {
		t.Fatal(err)
	}
	rows, err := os.ReadFile("testdata/codings.csv")
	if err != nil {
		t.Fatal(err)
	}
	sets, err := os.ReadFile("testdata/elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	head, _, _ := strings.Cut(string(rows), "\n")
	writeFile(t, "rows.csv", string(rows))
	writeFile(t, "more.csv", string(rows))
	writeFile(t, "head.csv", head+"\n")
	writeFile(t, "elements.tle", string(sets))
	for list, want := range map[string]string{
		"rows.csv":             "coding_files: \"rows.csv\" is not allowed; it must be a list of file names",
		"[nowhere.csv]":        "coding_files[0]: \"nowhere.csv\" cannot be read: no such file or directory; names are relative to the scenario file",
		"[.]":                  "coding_files[0]: \".\" cannot be read: is a directory; names are relative to the scenario file",
		"[rows.csv, rows.csv]": "coding_files[1]: \"rows.csv\" stands twice; remove one of the two",
		"[rows.csv, more.csv]": "coding_files[1]: more.csv: qpsk house: the row is in the catalogue already; give the coding another name",
		"[head.csv]":           "coding_files[0]: head.csv: no row stands below the header; give one or remove the file from the list",
	} {
		y := strings.NewReplacer("[../codings.csv]", list, "../elements.tle", "elements.tle").Replace(string(text))
		writeFile(t, "s.yaml", y)
		if _, err := scenario.Load(scenario.Request{Path: "s.yaml"}); err == nil || err.Error() != "s.yaml:3: "+want {
			t.Errorf("%s:\n got %v\nwant s.yaml:3: %s", list, err, want)
		}
	}
}
