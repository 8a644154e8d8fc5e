package reports

import (
	"bytes"
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// tool runs a program of poppler on a PDF; without it the test skips, with CI=true it fails.
func tool(t *testing.T, pdf []byte, name string, args ...string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal(err)
		}
		t.Skip(err)
	}
	file := filepath.Join(t.TempDir(), "a.pdf")
	if err := os.WriteFile(file, pdf, 0o600); err != nil {
		t.Fatal(err)
	}
	for i := range args {
		args[i] = strings.Replace(args[i], "FILE", file, 1)
	}
	out, err := exec.Command(path, args...).CombinedOutput()
	if err != nil {
		t.Fatalf("%s: %v\n%s", name, err, out)
	}
	return string(out)
}

func onePaper(t *testing.T, p *Pass) []byte {
	t.Helper()
	w := newWriter(&Report{Title: "rehearsal", From: firstAOS, To: firstAOS}, Options{PDF: true, Version: "1.2.3"}, script{}, nil)
	pdf, err := passPaper(w, p)
	if err != nil {
		t.Fatal(err)
	}
	return pdf
}

func TestPaperHasTheNumbersOfThePage(t *testing.T) {
	s := basicShape()
	s.sky = true
	p := fixturePass(s)
	text := strings.Join(strings.Fields(tool(t, onePaper(t, p), "pdftotext", "-layout", "FILE", "-")), " ")
	v := newPassView(p)
	want := []string{v.Begin, v.Highest + "°", v.Link.ModeVolume, v.Link.AchievableVolume, v.Link.Least + " to " + v.Link.Greatest + " dB", v.Element.Age, v.verdictText(), "page 1 of "}
	for _, table := range []budgetView{v.Events, v.Budget, v.Noise} {
		for _, part := range table.Parts {
			for _, r := range part.Rows {
				want = append(want, strings.Join(r.Cells, " "))
			}
		}
	}
	if len(want) < 30 {
		t.Fatalf("only %d texts to look for", len(want))
	}
	for _, x := range want {
		if !strings.Contains(text, x) {
			t.Errorf("the PDF lacks %q", x)
		}
	}
}

func TestPaperEmbedsItsFontsAndNamesItself(t *testing.T) {
	pdf := onePaper(t, fixturePass(basicShape()))
	fonts := strings.Split(strings.TrimSpace(tool(t, pdf, "pdffonts", "FILE")), "\n")[2:]
	if len(fonts) != 2 {
		t.Errorf("fonts: %q", fonts)
	}
	for _, f := range fonts {
		if !strings.Contains(f, "Identity-H       yes") {
			t.Errorf("not embedded: %s", f)
		}
	}
	info := tool(t, pdf, "pdfinfo", "FILE")
	for _, want := range []string{"Wagtail 1 over Skerry Point", "scenario rehearsal", "slantwise 1.2.3", "A4", "Pages:           4"} {
		if !strings.Contains(info, want) {
			t.Errorf("pdfinfo lacks %q:\n%s", want, info)
		}
	}
}

func TestPaperIsTheSameBytesEachTime(t *testing.T) {
	p := fixturePass(basicShape())
	first := onePaper(t, p)
	for range 3 {
		if !bytes.Equal(first, onePaper(t, p)) {
			t.Fatal("the same pass made another PDF")
		}
	}
}

func TestReportWithPapers(t *testing.T) {
	shapes := []shape{basicShape(), {spacecraft: "Dunlin 1", site: plateau(), aos: firstAOS, half: 200, miss: 300, noRadio: true}}
	r := &Report{Title: "rehearsal", From: firstAOS, To: firstAOS.Add(1e13), Load: func(_ context.Context, i int) (*Pass, error) { return fixturePass(shapes[i]), nil }}
	for _, s := range shapes {
		r.Keys = append(r.Keys, Key{Spacecraft: s.spacecraft, Station: s.site.Name, AOS: s.aos})
	}
	dir := filepath.Join(t.TempDir(), "out")
	if _, err := Write(t.Context(), dir, r, Options{PDF: true}); err != nil {
		t.Fatal(err)
	}
	papers, err := filepath.Glob(filepath.Join(dir, "passes", "*.pdf"))
	if err != nil || len(papers) != 2 {
		t.Fatalf("papers %q, %v", papers, err)
	}
	pdf, err := os.ReadFile(filepath.Join(dir, "passes.pdf"))
	if err != nil {
		t.Fatal(err)
	}
	if text := tool(t, pdf, "pdftotext", "-layout", "FILE", "-"); !strings.Contains(text, "Dunlin 1, High Plateau") || !strings.Contains(text, "2 passes: ") {
		t.Errorf("passes.pdf says\n%s", text)
	}
}
