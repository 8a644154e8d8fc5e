package pdf

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
	"unicode/utf8"
)

// poppler runs a program of poppler on a file; without it the test skips, with CI=true it fails.
func poppler(t *testing.T, content []byte, name string, args ...string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal(err)
		}
		t.Skip(err)
	}
	file := filepath.Join(t.TempDir(), "a.pdf")
	if err := os.WriteFile(file, content, 0o600); err != nil {
		t.Fatal(err)
	}
	var out, told bytes.Buffer
	cmd := exec.Command(path, append([]string{file}, args...)...)
	cmd.Stdout, cmd.Stderr = &out, &told
	if err := cmd.Run(); err != nil || told.Len() > 0 {
		t.Fatalf("%s: %v\n%s", name, err, &told)
	}
	return out.String()
}

// sample is a file of two pages with every kind of mark.
func sample(t testing.TB, lines ...string) []byte {
	file, fonts := New(Info{Title: "Größe (α) \\ 🛰", Subject: "s", Creator: "c", Date: time.Date(2026, 3, 1, 2, 3, 4, 0, time.UTC), Language: "en"}, condensed(t))
	first := file.Page(595, 842)
	for i, line := range lines {
		first.Text(40, 60+20*float64(i), fonts[0], 10, line)
	}
	second := file.Page(595, 842)
	second.Pen(Colour{1, 2, 3}, 0.5, 3, 2)
	second.Move(10, 10)
	second.Line(20, 30)
	second.Draw()
	second.Save()
	second.Circle(50, 50, 20)
	second.Clip()
	second.Fill(Colour{200, 255, 0})
	second.Rectangle(20, 20, 60, 60)
	second.Paint(true)
	second.Restore()
	to := second.Target(50)
	first.Link(40, 50, 100, 20, to)
	file.Bookmark("two", to)
	file.Bookmark("one", first.Target(0))
	content, err := file.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	return content
}

func TestTextComesBack(t *testing.T) {
	list := []string{"Margin −3.5 dB at 67.3° ✓", "Łódź, Ålesund, Αθήνα, Київ", "brackets (a) <b> \\c", strings.Repeat("ABCDEFGH ", 8) + "end"}
	text := poppler(t, sample(t, list...), "pdftotext", "-layout", "-")
	for _, want := range list {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not in\n%s", want, text)
		}
	}
}

// TestOddTextComesBack: what the face lacks is a box to the eye and the true letter to a search, beyond
// the basic plane a sign that a letter is missing; what has no shape is left out; letters to the left
// come back in the order in which they are read.
func TestOddTextComesBack(t *testing.T) {
	for in, want := range map[string]string{
		"sat 🛰 up": "sat � up", "alpha\tbeta\ngamma": "alpha beta gamma", "x\u200by\ufe0fz\u202e!": "xyz!", "क 漢": "क 漢",
		"station חוף one": "station חוף one", "bell\x07": "bell␇", "\xff bad": "� bad",
	} {
		got := poppler(t, sample(t, in), "pdftotext", "-layout", "-")
		got = strings.Map(func(r rune) rune {
			if r == 0x202a || r == 0x202b || r == 0x202c || r == ' ' {
				return -1 // pdftotext marks the direction, and guesses spaces there
			}
			return r
		}, got)
		if want = strings.ReplaceAll(want, " ", ""); !strings.Contains(got, want) {
			t.Errorf("%q came back as %q, want %q", in, got, want)
		}
	}
}

func TestFileSaysWhatItIs(t *testing.T) {
	content := sample(t, "a")
	info := poppler(t, content, "pdfinfo")
	for _, want := range []string{"Größe (α) \\ �", "Sun Mar  1 02:03:04 2026", "Pages:           2", "595 x 842 pts", "PDF version:     1."} {
		if !strings.Contains(info, want) {
			t.Errorf("pdfinfo lacks %q:\n%s", want, info)
		}
	}
	fonts := strings.Fields(strings.Split(poppler(t, content, "pdffonts"), "\n")[2])
	if !strings.HasSuffix(fonts[0], "dejavusanscondensed") || fonts[4] != "yes" || fonts[6] != "yes" {
		t.Errorf("fonts: %q", fonts)
	}
	poppler(t, content, "pdftoppm", "-r", "20") // tells faults on its second output
}

// TestSameBytes: the same calls make the same bytes.
func TestSameBytes(t *testing.T) {
	if !bytes.Equal(sample(t, "a", "Łódź"), sample(t, "a", "Łódź")) {
		t.Error("the same calls made other bytes")
	}
}

// FuzzText writes any text: each visible letter is drawn, and has a width.
func FuzzText(f *testing.F) {
	face := condensed(f)
	for _, s := range []string{"plain", "שלום (a) עולם", "e\u0301 \u202eabc\u202c", "👩\u200d🚀", "\xff\xfe", "a\u2029b", "مرحبا 123", "\x00\x7f\u0085"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		one := newFont(face)
		seen := 0
		for _, r := range s {
			if Visible(r) >= 0 {
				seen++
			}
		}
		if got := utf8.RuneCountInString(shown(s)); got != seen {
			t.Errorf("%q: %d letters drawn of %d", s, got, seen)
		}
		if w := one.Width(s, 10); !(w >= 0) || seen == 0 && w != 0 {
			t.Errorf("%q: width %g", s, w)
		}
	})
}

// FuzzFile writes any text into a file, and as its title and bookmark.
func FuzzFile(f *testing.F) {
	face := condensed(f)
	f.Add("sat 🛰 (a) \\ up")
	f.Add("\x00\xff\r\n)")
	f.Fuzz(func(t *testing.T, s string) {
		file, fonts := New(Info{Title: s, Subject: s, Creator: s}, face)
		page := file.Page(100, 100)
		page.Text(0, 0, fonts[0], 10, s)
		file.Bookmark(s, page.Target(1))
		b, err := file.Bytes()
		if err != nil || !bytes.HasSuffix(bytes.TrimSpace(b), []byte("%%EOF")) {
			t.Errorf("%v, no end", err)
		}
	})
}
