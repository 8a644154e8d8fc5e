package reports

import (
	"bytes"
	"context"
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"
)

// staticFiles writes a report of one pass without script.
func staticFiles(t *testing.T, o Options) map[string]string {
	t.Helper()
	s := basicShape()
	s.sky = true
	r := &Report{Title: "rehearsal", From: firstAOS, To: firstAOS.Add(1e13), Keys: []Key{{Spacecraft: s.spacecraft, Station: s.site.Name, AOS: s.aos}},
		Load: func(context.Context, int) (*Pass, error) { return fixturePass(s), nil }}
	files := map[string]string{}
	o.Static, o.Workers = true, 1
	put := func(name string, content []byte) error { files[name] = string(content); return nil }
	if err := newWriter(r, o, script{code: "chart()", licence: "free"}, put).write(t.Context()); err != nil {
		t.Fatal(err)
	}
	return files
}

func TestStaticPagesHaveDrawingsAndNoScript(t *testing.T) {
	for _, o := range []Options{{}, {OneFile: true}} {
		files, pages := staticFiles(t, o), 0
		for name, text := range files {
			if strings.HasSuffix(name, ".js") || name == licenceFile {
				t.Errorf("%s is written, and no page asks for it", name)
			}
			if !strings.HasSuffix(name, ".html") {
				continue
			}
			pages++
			if strings.Contains(text, "<script") || strings.Contains(text, `id="missing"`) || !strings.Contains(text, "script-src &#39;none&#39;") {
				t.Errorf("%s: a script, its absence, or no ban of scripts", name)
			}
			places, drawn := strings.Count(text, `class="drawing"`), strings.Count(text, `<svg xmlns="http://www.w3.org/2000/svg" role="img" viewBox="0 0 360 `)
			if name == indexFile || name == weekFile {
				drawn = strings.Count(text, `viewBox="0 0 720 `)
			}
			if places == 0 || places != drawn {
				t.Errorf("%s: %d places for charts, %d drawn", name, places, drawn)
			}
		}
		if pages != 3 {
			t.Errorf("%d pages", pages)
		}
	}
}

func TestDrawingsAreWellFormed(t *testing.T) {
	s := basicShape()
	s.sky, s.spacecraft = true, `<b>&"`
	p := fixturePass(s)
	for _, one := range sketches(p, newFrame(p)) {
		text := string(one.markup(`a "name" & <more>`))
		for d := xml.NewDecoder(strings.NewReader(text)); ; {
			if _, err := d.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%s: %v", one.id, err)
			}
		}
		if strings.Contains(text, "NaN") || strings.Contains(text, "Inf") {
			t.Errorf("%s: a number that does not exist", one.id)
		}
		if !bytes.Equal([]byte(text), []byte(one.markup(`a "name" & <more>`))) {
			t.Errorf("%s: not the same bytes again", one.id)
		}
	}
}
