package reports

import (
	"bytes"
	"context"
	"encoding/base64"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"

	"slantwise/station/pass"
)

// nasty names try to break out of markup, scripts, attributes and rows.
var nasty = []string{
	`</script><script>alert(1)</script>`, `"><img src=x onerror=alert(2)>`, `'; alert(3); '`, "<!-- <b>bold</b> & \u2028 \u202e",
	`=1+1,"a`, "{{.Title}} {b}",
	"a-name-of-one-word-that-is-far-longer-than-any-column-of-any-page-could-be-made",
}

// nastyReport has a nasty name wherever a name can stand.
func nastyReport() *Report {
	r := fixtureReport(0)
	r.Title = nasty[0]
	r.Notes = []Note{{Warning, nasty[0], nasty[1], nasty[2]}, {Assumption, nasty[1], nasty[0], ""}, {Default, "", nasty[3], nasty[0]}}
	for i := range nasty {
		r.Keys = append(r.Keys, Key{Spacecraft: nasty[i], Station: nasty[(i+1)%len(nasty)], AOS: firstAOS})
	}
	r.Load = func(_ context.Context, i int) (*Pass, error) {
		s := basicShape()
		s.half, s.site, s.spacecraft = 20, skerry(), nasty[i]
		s.site.Name = nasty[(i+1)%len(nasty)]
		p := fixturePass(s)
		q := p.Radio
		q.Transmitter, q.Antenna, q.Mode, q.ModeText = nasty[0], nasty[1], nasty[i], nasty[3]
		q.AOS.Terms[0].Name, q.AOS.Terms[0].Source = nasty[0], nasty[1]
		q.AOS.NoiseParts[0].Name = nasty[0]
		p.Elements.Name, p.Elements.Source.File = nasty[0], nasty[1]
		p.Notes = r.Notes
		return p, nil
	}
	return r
}

func TestNamesShowAsText(t *testing.T) {
	plain := rendered(t, goldenReport(), Options{}, stubScript)
	scripts := func(page []byte) int { return bytes.Count(bytes.ToLower(page), []byte("<script")) }
	want := scripts(plain["index.html"])
	for name, page := range rendered(t, nastyReport(), Options{}, stubScript) {
		if !strings.HasSuffix(name, ".html") {
			continue
		}
		if name == weekFile { // it never has a script
			if scripts(page) > 0 || bytes.Contains(page, []byte("<img")) || bytes.Contains(page, []byte("<b>bold")) {
				t.Errorf("%s: a name broke out", name)
			}
			continue
		}
		if got := scripts(page); got != want {
			t.Errorf("%s: %d script elements, want %d: a name broke out", name, got, want)
		}
		for _, bad := range []string{"<img src=x", "<b>bold", "alert(1)</script>", "\u2028"} {
			if bytes.Contains(drawingsOf(t, page), []byte(bad)) {
				t.Errorf("%s: the charts' data holds %q unescaped", name, bad)
			}
		}
		if bytes.Contains(page, []byte("<img")) || bytes.Contains(page, []byte("<b>bold")) {
			t.Errorf("%s: markup of a name stands in the page", name)
		}
	}
}

// drawingsOf returns the JSON that a page's script draws from.
func drawingsOf(t *testing.T, page []byte) []byte {
	t.Helper()
	const head = `<script type="application/json" id="drawings">`
	_, rest, ok := bytes.Cut(page, []byte(head))
	data, _, end := bytes.Cut(rest, []byte("</script>"))
	if !ok || !end {
		t.Fatal("the page has no drawings")
	}
	if !json.Valid(data) {
		t.Fatalf("the drawings are not JSON: %.200s", data)
	}
	return data
}

func TestFilesKeepNames(t *testing.T) {
	files := rendered(t, nastyReport(), Options{}, stubScript)
	rows, err := csv.NewReader(bytes.NewReader(files["passes.csv"])).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for i, name := range nasty {
		if rows[i+1][0] != name {
			t.Errorf("passes.csv, row %d: spacecraft %q, want %q", i+1, rows[i+1][0], name)
		}
	}
	if !json.Valid(files["passes.json"]) {
		t.Error("passes.json is not JSON")
	}
}

// A number that does not exist is an empty cell, a null or a dash, and never gets to
// a chart.
func TestNoNaNLeaves(t *testing.T) {
	r := goldenReport()
	load := r.Load
	r.Load = func(ctx context.Context, i int) (*Pass, error) {
		p, err := load(ctx, i)
		f := p.Profile
		nan, inf := math.NaN(), math.Inf(-1)
		for _, c := range append(columns(p), laterColumns(p)...) {
			for k := range c.values {
				if k%3 == 1 {
					c.values[k] = nan
				}
			}
		}
		if q := p.Radio; q != nil {
			f.ReceivedPowerDBm[5], f.MarginDB[6] = inf, math.Inf(1)
			q.Least.Value, q.Greatest.Value = nan, nan
			f.Volume.ModeBytes, f.Volume.AchievableBytes = nan, inf
			q.AOS.EbN0, q.AOS.Margin, q.AOS.GOverT, q.AOS.OffBoresight = -1, -1, -1, -1
			q.AOS.Terms[1].Value, q.AOS.ReceivedPowerDBm, q.AOS.AchievableRate = nan, nan, -1
			q.AOS.NoiseParts[0].Temperature = -1
		}
		return p, err
	}
	for name, content := range rendered(t, r, Options{}, stubScript) {
		if strings.HasSuffix(name, ".js") || strings.HasSuffix(name, ".css") {
			continue
		}
		if bytes.Contains(content, []byte("NaN")) || bytes.Contains(content, []byte("Inf,")) || bytes.Contains(content, []byte("+Inf")) {
			t.Errorf("%s holds a NaN or an infinity", name)
		}
		if strings.HasSuffix(name, ".html") && name != weekFile {
			drawingsOf(t, content)
		}
		if strings.HasSuffix(name, ".json") && !json.Valid(content) {
			t.Errorf("%s is not JSON", name)
		}
	}
}

// Every number of a chart stands in the CSV and the JSON, and both say the same.
func TestFilesAgree(t *testing.T) {
	p := skyPass()
	rows, err := csv.NewReader(bytes.NewReader(samplesCSV(p))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	js, err := passJSON(p)
	if err != nil {
		t.Fatal(err)
	}
	var parsed struct {
		Events  []struct{ Event, UTC string }
		Samples map[string][]any
	}
	if err := json.Unmarshal(js, &parsed); err != nil {
		t.Fatal(err)
	}
	if got, want := len(rows), len(p.Profile.Seconds)+1; got != want {
		t.Errorf("the CSV has %d rows, want %d: all samples and the header", got, want)
	}
	for k, name := range rows[0] {
		if name == "achievable_limit" || name == "usable" {
			continue
		}
		column := parsed.Samples[name]
		if len(column) != len(rows)-1 {
			t.Errorf("column %s: %d values in the JSON, %d in the CSV", name, len(column), len(rows)-1)
			continue
		}
		for i, v := range column {
			if text := strings.Trim(jsonText(t, v), `"`); !sameNumber(text, rows[i+1][k]) {
				t.Fatalf("column %s, sample %d: %s in the JSON, %s in the CSV", name, i, text, rows[i+1][k])
			}
		}
	}
	if parsed.Events[0].UTC != rows[1][0] || parsed.Events[2].UTC != rows[len(rows)-1][0] {
		t.Errorf("AOS and LOS %v are not the first and the last sample, %s and %s", parsed.Events, rows[1][0], rows[len(rows)-1][0])
	}
}

func jsonText(t *testing.T, v any) string {
	t.Helper()
	b, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

func sameNumber(a, b string) bool {
	var x, y float64
	if json.Unmarshal([]byte(a), &x) == nil && json.Unmarshal([]byte(b), &y) == nil {
		return x == y
	}
	return a == b
}

func TestOneFile(t *testing.T) {
	files := rendered(t, goldenReport(), Options{OneFile: true}, stubScript)
	if len(files) != 5 {
		t.Errorf("%d files, want the index, the summary and three pages", len(files))
	}
	for name, page := range files {
		for _, beside := range []string{`src="`, `<link rel="stylesheet"`, chartFile + `"`, `.csv" href`} {
			if bytes.Contains(page, []byte(beside)) {
				t.Errorf("%s needs something beside it: %s", name, beside)
			}
		}
		if !bytes.Contains(page, []byte("data:text/csv;charset=utf-8;base64,")) || name != weekFile && !bytes.Contains(page, []byte(stubScript.code)) {
			t.Errorf("%s does not hold its CSV or the chart script", name)
		}
	}
	p, _ := goldenReport().Load(context.Background(), 0)
	want := base64.StdEncoding.EncodeToString(samplesCSV(p))
	if page := files["passes/wagtail-1-skerry-point-20260310t104231z.html"]; !bytes.Contains(page, []byte(strings.ReplaceAll(want, "+", "&#43;"))) && !bytes.Contains(page, []byte(want)) {
		t.Error("the page's CSV is not that of the pass")
	}
}

func TestBrokenPassIsRefused(t *testing.T) {
	for name, spoil := range map[string]func(*Pass){
		"no profile":   func(p *Pass) { p.Profile = nil },
		"one sample":   func(p *Pass) { p.Profile.Seconds = p.Profile.Seconds[:1] },
		"short column": func(p *Pass) { p.Profile.RangeKm = p.Profile.RangeKm[1:] },
		"short margin": func(p *Pass) { p.Profile.MarginDB = nil },
		"lost term":    func(p *Pass) { p.Profile.TermValues = p.Profile.TermValues[1:] },
	} {
		p := fixturePass(basicShape())
		spoil(p)
		if err := checkPass(p); err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
	if p := fixturePass(basicShape()); p.Pass.Cut != pass.CutNone || checkPass(p) != nil {
		t.Error("a whole pass is refused")
	}
}
