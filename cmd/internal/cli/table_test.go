package cli

import (
	"bytes"
	"errors"
	"slices"
	"strings"
	"testing"
)

var tableColumns = []column{textColumn("station"), numberColumn("range km"), textColumn("note")}

func render(t *testing.T, width int, rows ...[]string) string {
	t.Helper()
	var b bytes.Buffer
	if err := writeTable(&b, width, tableColumns, rows); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestTable(t *testing.T) {
	rows := [][]string{{"Skerry Point", "512.25", "a rather long remark that no narrow screen holds"}, {"東京", "7.00", ""}, {"Cafe\u0301", "", "x"}}
	plain := "station       range km  note\n" +
		"------------  --------  ------------------------------------------------\n" +
		"Skerry Point    512.25  a rather long remark that no narrow screen holds\n" +
		"東京              7.00\n" +
		"Cafe\u0301                    x\n"
	if got := render(t, 0, rows...); got != plain {
		t.Errorf("plain:\n%s want:\n%s", got, plain)
	}
	wrapped := "station        range  note\n" +
		"                  km\n" +
		"------------  ------  ------------------\n" +
		"Skerry Point  512.25  a rather long\n" +
		"                      remark that no\n" +
		"                      narrow screen\n" +
		"                      holds\n" +
		"東京            7.00\n" +
		"Cafe\u0301                  x\n"
	if got := render(t, 40, rows...); got != wrapped {
		t.Errorf("on a terminal of 40:\n%s want:\n%s", got, wrapped)
	}
	blocks := "station   Skerry Point\nrange km  512.25\nnote      hi\n"
	if got := render(t, 18, []string{"Skerry Point", "512.25", "hi"}); got != blocks {
		t.Errorf("on a terminal of 18:\n%s want:\n%s", got, blocks)
	}
	if got := render(t, 0, []string{"a\x1b[31m\u202e", "1", "b\nc"}); strings.ContainsAny(got, "\x1b\u202e") || strings.Count(got, "\n") != 3 {
		t.Errorf("what steers a terminal went through: %q", got)
	}
	if got := render(t, 80); got != "station  range km  note\n-------  --------  ----\n" {
		t.Errorf("an empty table is %q, want its head", got)
	}
}

type fullDisk struct{}

var errFull = errors.New("no space left on device")

func (fullDisk) Write([]byte) (int, error) { return 0, errFull }

func TestWritersTellOfAFullDisk(t *testing.T) {
	rows := [][]string{{"a", "1", "b"}}
	for what, err := range map[string]error{
		"table": writeTable(fullDisk{}, 0, tableColumns, rows),
		"csv":   writeCSV(fullDisk{}, []string{"a"}, slices.Values(rows)),
		"json":  writeJSON(fullDisk{}, rows),
	} {
		if !errors.Is(err, errFull) {
			t.Errorf("%s: %v, want it to wrap the disk's error", what, err)
		}
	}
}

func TestCSVAndJSON(t *testing.T) {
	var b bytes.Buffer
	if err := writeCSV(&b, []string{"name", "value"}, slices.Values([][]string{{`a "b", c`, ""}})); err != nil {
		t.Fatal(err)
	}
	if want := "name,value\n\"a \"\"b\"\", c\",\n"; b.String() != want {
		t.Errorf("CSV %q, want %q", b.String(), want)
	}
	b.Reset()
	if err := writeJSON(&b, map[string]any{"list": []int{}, "name": "<b>&"}); err != nil {
		t.Fatal(err)
	}
	if want := "{\n  \"list\": [],\n  \"name\": \"<b>&\"\n}\n"; b.String() != want {
		t.Errorf("JSON %q, want %q", b.String(), want)
	}
}
