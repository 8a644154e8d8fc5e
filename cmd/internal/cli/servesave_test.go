package cli

import (
	"archive/zip"
	"bytes"
	"encoding/json"
	"io"
	"math"
	"net/http"
	"net/url"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"slantwise/cmd/internal/web"
)

// visit gets an address and returns the status and the body.
func visit(t *testing.T, address string) (int, []byte) {
	t.Helper()
	r, err := http.Get(address)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	b, err := io.ReadAll(r.Body)
	if err != nil {
		t.Fatal(err)
	}
	return r.StatusCode, b
}

var saveKey = regexp.MustCompile(`<meta name="save-key" content="([^"]+)">`)

// wish has a scenario written as the page does, and returns the status and the answer.
func wish(t *testing.T, at, name string, q *web.Question) (int, string) {
	t.Helper()
	_, page := visit(t, at)
	key := saveKey.FindSubmatch(page)
	if key == nil {
		t.Fatal("the page has no key")
	}
	body, err := json.Marshal(web.Wish{Name: name, Question: *q})
	if err != nil {
		t.Fatal(err)
	}
	request, err := http.NewRequest("POST", at+"api/scenarios", bytes.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	request.Header.Set("Content-Type", "application/json")
	request.Header.Set("Slantwise-Save-Key", string(key[1]))
	r, err := http.DefaultClient.Do(request)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	text, err := io.ReadAll(r.Body)
	if err != nil {
		t.Fatal(err)
	}
	return r.StatusCode, string(text)
}

// unpackDemo brings the demo into the working folder by the archive that the live page
// of the demo hands out, unchanged.
func unpackDemo(t *testing.T) {
	t.Helper()
	at := serve(t)
	var s web.State
	ask(t, at+"api/state", nil, &s)
	var id string
	for _, c := range s.Next {
		if c.Transmitter != "" {
			id = c.ID
			break
		}
	}
	code, body := visit(t, at+"api/scenario?"+url.Values{"contact": {id}}.Encode())
	if code != http.StatusOK {
		t.Fatalf("status %d: %s", code, body)
	}
	z, err := zip.NewReader(bytes.NewReader(body), int64(len(body)))
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		text, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Base(f.Name), text, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	if code, said := wish(t, at, "a.yaml", &web.Question{Contact: id}); code != http.StatusConflict || !strings.Contains(said, "demo has no folder") {
		t.Errorf("the demo is written: status %d, %s", code, said)
	}
}

// TestSavedWhatIf answers a question, has its scenario written, serves that, and finds
// the same numbers there; check takes it.
func TestSavedWhatIf(t *testing.T) {
	t.Chdir(t.TempDir())
	unpackDemo(t)
	if err := os.Rename("what-if.yaml", "team.yaml"); err != nil {
		t.Fatal(err)
	}
	const clock = "2026-09-15T00:55:00Z"
	at := serve(t, "--scenario", "team.yaml", "--clock", clock, "--speed", "0")
	var s web.State
	ask(t, at+"api/state", nil, &s)
	if !s.CanSave {
		t.Fatal("the page says that it cannot write")
	}
	dish, power, pointing, least, exceeded := 4.6, 1.25, 0.07, 9.0, 0.3
	q := &web.Question{Mode: "middle", DishM: &dish, PowerW: &power, PointingErrorDeg: &pointing, LeastElevationDeg: &least, ExceededPercent: &exceeded}
	for _, c := range s.Next {
		if c.Spacecraft == "Wagtail 1" && c.Station == "Skerry Point" {
			q.Contact = c.ID
			break
		}
	}
	var a web.Answer
	if code := ask(t, at+"api/what-if", q, &a); code != http.StatusOK {
		t.Fatalf("status %d", code)
	}
	if math.Abs(float64(a.After.Bytes-a.Before.Bytes)) < 1e6 {
		t.Fatalf("the question changes too little to tell anything: %+v", a)
	}
	if code, said := wish(t, at, "bigger.yaml", q); code != http.StatusCreated {
		t.Fatalf("status %d: %s", code, said)
	}
	before, err := os.ReadFile("bigger.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if code, said := wish(t, at, "bigger.yaml", &web.Question{Contact: q.Contact}); code != http.StatusConflict {
		t.Errorf("written over a file: status %d: %s", code, said)
	}
	elsewhere := filepath.Join(t.TempDir(), "elsewhere.yaml")
	if err := os.Symlink(elsewhere, "link.yaml"); err != nil {
		t.Fatal(err)
	}
	if code, said := wish(t, at, "link.yaml", q); code != http.StatusConflict {
		t.Errorf("written through a link: status %d: %s", code, said)
	}
	if _, err := os.Stat(elsewhere); err == nil {
		t.Error("a file stands outside the folder")
	}
	if after, err := os.ReadFile("bigger.yaml"); err != nil || !bytes.Equal(before, after) {
		t.Errorf("the file has changed: %v", err)
	}
	if !strings.Contains(string(before), "# An imaging satellite.") {
		t.Error("the comments are lost")
	}
	if code, out, errOut := invoke(t, "check", "--scenario", "bigger.yaml"); code != ExitAnswer {
		t.Fatalf("check: code %d, %s%s", code, out, errOut)
	}

	next := serve(t, "--scenario", "bigger.yaml", "--clock", clock, "--speed", "0")
	ask(t, next+"api/state", nil, &s)
	var d web.Detail
	for _, c := range s.Next {
		if c.Spacecraft == "Wagtail 1" && c.Station == "Skerry Point" {
			ask(t, next+"api/contacts/"+c.ID, nil, &d)
			break
		}
	}
	var same web.Answer
	ask(t, next+"api/what-if", web.Question{Contact: d.ID}, &same)
	if same.Before != a.After {
		t.Errorf("the saved scenario has %+v, the answer was %+v", same.Before, a.After)
	}
	if d.Mode != "middle" || float64(d.DishM) != dish || float64(d.PowerW) != power || float64(d.PointingErrorDeg) != pointing || float64(d.ExceededPercent) != exceeded {
		t.Errorf("the saved scenario has %+v", d)
	}
}
