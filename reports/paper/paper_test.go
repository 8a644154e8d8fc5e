package paper

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
	"unicode"
	"unicode/utf8"

	"slantwise/reports/drawing"
)

// textOf is the text of a document, page by page; without poppler the test skips, with CI=true it fails.
func textOf(t *testing.T, d *Document) []string {
	t.Helper()
	path, err := exec.LookPath("pdftotext")
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal(err)
		}
		t.Skip(err)
	}
	content, err := d.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(t.TempDir(), "a.pdf")
	if err := os.WriteFile(file, content, 0o600); err != nil {
		t.Fatal(err)
	}
	out, err := exec.Command(path, "-layout", file, "-").CombinedOutput()
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	return strings.Split(strings.TrimSuffix(string(out), "\f"), "\f")
}

func blank() *Document {
	d := New(Info{Title: "A title", Subject: "scenario s", Creator: "slantwise 1", Date: time.Unix(0, 0), Foot: "elements 2 h old"})
	d.Page()
	return d
}

func TestFootOfEachPage(t *testing.T) {
	d := blank()
	for range 120 {
		d.Paragraph("words")
	}
	pages := textOf(t, d)
	if len(pages) != 3 {
		t.Fatalf("%d pages", len(pages))
	}
	for i, p := range pages {
		for _, want := range []string{"A title · scenario s · slantwise 1", fmt.Sprintf("page %d of 3", i+1), "elements 2 h old"} {
			if !strings.Contains(p, want) {
				t.Errorf("page %d lacks %q", i+1, want)
			}
		}
	}
}

func TestListOfContents(t *testing.T) {
	d := New(Info{Title: "t", Contents: 3, Date: time.Unix(0, 0)})
	d.Page()
	d.Chapter("First")
	d.List()
	d.Page()
	d.Chapter("Second")
	d.Page()
	d.Chapter("Third")
	pages := textOf(t, d)
	lines := strings.Fields(pages[0])
	if got := strings.Join(lines, " "); !strings.HasPrefix(got, "Contents First 1 Second 2 Third 3") {
		t.Errorf("the list says %q", got)
	}
	d.Chapter("Fourth")
	if _, err := d.Bytes(); err == nil {
		t.Error("a list of three took four")
	}
}

func TestTableHeadComesAgain(t *testing.T) {
	table := Table{Corner: "corner", Heads: []string{"one", "two"}}
	for i := range 100 {
		table.Rows = append(table.Rows, Row{Name: fmt.Sprintf("row %d", i), Cells: []string{"1.5", "−2.25"}, Remark: "small"})
	}
	d := blank()
	d.Table(table)
	pages := textOf(t, d)
	if len(pages) < 3 {
		t.Fatalf("%d pages", len(pages))
	}
	all := strings.Join(pages, "")
	for i := range 100 {
		if !strings.Contains(all, fmt.Sprintf("row %d ", i)) {
			t.Errorf("row %d is lost", i)
		}
	}
	for i, p := range pages {
		if !strings.Contains(p, "corner") || strings.Count(p, "one") != 1 {
			t.Errorf("page %d has no head", i+1)
		}
	}
}

// TestColumnsHoldTheirTexts: what fits in a line has one, and every width is used.
func TestColumnsHoldTheirTexts(t *testing.T) {
	for name, table := range map[string]Table{
		"alike":  {Corner: "a", Heads: []string{"b", "c"}, Rows: []Row{{Name: "n", Cells: []string{"1", "2"}}}},
		"uneven": {Corner: "a", Heads: []string{"time", "b", "c", "d", "e", "f"}, First: 0.5, Rows: []Row{{Name: "n", Cells: []string{"2026-09-15 00:28:37 UTC", "14 min 59 s", "64.6°", "closes throughout", "3.7 to 17.6", "25 GB"}}}},
		"names":  {Corner: "a", Heads: []string{"b"}, First: 0.1, Rows: []Row{{Name: "a name of some length that is not to be broken", Cells: []string{"1"}}}},
		"empty":  {Corner: "a"},
	} {
		d := blank()
		columns := d.columns(&table)
		sum := 0.0
		for _, c := range columns {
			sum += c
		}
		if math.Abs(sum-fieldWidth) > 1e-6 {
			t.Errorf("%s: columns of %g in all", name, sum)
		}
		for _, r := range table.Rows {
			if l := d.layRow(r, columns); l.high != cellLine+cellRoom {
				t.Errorf("%s: a row is %g high: a line is broken, columns %v", name, l.high, columns)
			}
		}
	}
}

func TestTextThatIsTooWide(t *testing.T) {
	d := blank()
	d.font("", textSize, ink)
	word := strings.Repeat("abcdef", 60)
	lines := d.split("short "+word+" end", 200)
	if strings.Join(lines, "") != "short"+word+" end" || len(lines) < 9 {
		t.Errorf("lines %q", lines)
	}
	for _, l := range lines {
		if d.width(l) > 200 {
			t.Errorf("%q is %g wide", l, d.width(l))
		}
	}
	if got := d.fit(word, 100); d.width(got) > 100 || !strings.HasSuffix(got, "…") {
		t.Errorf("cut to %q", got)
	}
}

// FuzzSplit: no line is wider than asked, and nothing but spaces and line ends is lost.
func FuzzSplit(f *testing.F) {
	for _, s := range []string{"", "two words", strings.Repeat("long", 90), "a\n\nb", "שלום עולם", "👩\u200d🚀 x", "\xff\xfe", strings.Repeat("é ", 300), "\u200b\u200b"} {
		f.Add(s, 120.0)
	}
	d := blank()
	f.Fuzz(func(t *testing.T, s string, width float64) {
		if !(width >= 15 && width <= 600) || len(s) > 1<<12 {
			return
		}
		d.font("", textSize, ink)
		lines := d.split(s, width)
		drop := func(s string) string {
			return strings.Map(func(r rune) rune {
				if r == ' ' || r == '\n' {
					return -1
				}
				return r
			}, s)
		}
		if got, want := drop(strings.Join(lines, "")), drop(s); utf8.ValidString(s) && got != want {
			t.Errorf("%q became %q", want, got)
		}
		for _, l := range lines {
			if d.width(l) > width+1e-9 && strings.IndexFunc(l, unicode.IsSpace) >= 0 {
				t.Errorf("%q is %g wide, more than %g", l, d.width(l), width)
			}
		}
	})
}

func everything(rows int) *Document {
	d := blank()
	d.Title("Title", "under it")
	d.Answer("The answer.")
	d.Caution("Keep away.")
	d.Notes([]string{"one", "two"})
	table := Table{Corner: "corner", Heads: []string{"one", "two", "three"}}
	for range rows {
		table.Rows = append(table.Rows, Row{Name: "a row of the table", Cells: []string{"1.5", "−2.25", "text"}})
	}
	d.Table(table)
	line := drawing.Line{Tone: drawing.First, Width: 1}
	for i := range 300 {
		line.X, line.Y = append(line.X, float64(i)), append(line.Y, math.Sin(float64(i)/20))
	}
	chart := drawing.Lines{X: drawing.NewAxis("x", 0, 300, true), Left: drawing.NewAxis("y", -1, 1, false), Lines: []drawing.Line{line}}
	for range 3 {
		d.Figures([]Figure{{Title: "Chart", Caption: "caption", Height: 130, Draw: chart.Draw}, {Title: "Chart", Height: 130, Draw: chart.Draw}})
	}
	return d
}

func TestSameBytes(t *testing.T) {
	first, err := everything(50).Bytes()
	if err != nil {
		t.Fatal(err)
	}
	again, err := everything(50).Bytes()
	if err != nil || !bytes.Equal(first, again) {
		t.Error("the same document made other bytes")
	}
}

// BenchmarkDocument is a document of a pass's size: four pages with six charts.
func BenchmarkDocument(b *testing.B) {
	b.ReportAllocs()
	size := 0
	for b.Loop() {
		out, err := everything(100).Bytes()
		if err != nil {
			b.Fatal(err)
		}
		size = len(out)
	}
	b.ReportMetric(float64(size), "bytes")
}
