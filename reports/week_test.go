package reports

import (
	"context"
	"encoding/csv"
	"encoding/json"
	"html"
	"math"
	"strconv"
	"strings"
	"testing"
	"time"
)

// weekRows are the rows of an invented report.
func weekRows(t *testing.T, n int) (*Report, []row) {
	t.Helper()
	r := fixtureReport(n)
	rows := make([]row, n)
	for i := range rows {
		p, err := r.Load(context.Background(), i)
		if err != nil {
			t.Fatal(err)
		}
		rows[i] = newRow("page-"+strconv.Itoa(i), p)
	}
	return r, rows
}

// The days add up to the window, the spacecraft to all, and so do the stations.
func TestSumsOfTheSummaryAddUp(t *testing.T) {
	r, rows := weekRows(t, 40)
	rows[3].logged, rows[3].takenBytes, rows[3].predictedBytes = true, 8e6, 1e7
	w := summarise(r.From, r.To, rows)
	same := func(what string, all *period, parts []*period) {
		t.Helper()
		sum := period{bytes: math.NaN(), taken: math.NaN(), predicted: math.NaN()}
		for _, p := range parts {
			sum.passes, sum.worth, sum.logged = sum.passes+p.passes, sum.worth+p.worth, sum.logged+p.logged
			sum.contact, sum.closes = sum.contact+p.contact, sum.closes+p.closes
			plus(&sum.bytes, p.bytes)
			plus(&sum.taken, p.taken)
			plus(&sum.predicted, p.predicted)
		}
		if sum.passes != all.passes || sum.worth != all.worth || sum.logged != all.logged || sum.contact != all.contact || sum.closes != all.closes ||
			math.Abs(sum.bytes-all.bytes) > 1 || sum.taken != all.taken || sum.predicted != all.predicted {
			t.Errorf("%s add up to %+v, want %+v", what, sum, *all)
		}
	}
	var all *period
	parts := map[string][]*period{}
	for i := range w.periods {
		p := &w.periods[i]
		switch {
		case p.kind == windowKind && p.spacecraft+p.station == "":
			all = p
		case p.kind == windowKind && p.spacecraft != "":
			parts["spacecraft"] = append(parts["spacecraft"], p)
		case p.kind == windowKind:
			parts["stations"] = append(parts["stations"], p)
		case p.kind == dayKind && p.spacecraft+p.station == "":
			parts["days"] = append(parts["days"], p)
		}
	}
	if all.passes != 40 || all.logged != 1 || all.taken != 8e6 || all.predicted != 1e7 || !(all.bytes > 0) || all.worth == 0 || all.worth == 40 {
		t.Errorf("the window: %+v", *all)
	}
	for _, what := range []string{"spacecraft", "stations", "days"} {
		if len(parts[what]) < 2 {
			t.Errorf("%d %s", len(parts[what]), what)
		}
		same(what, all, parts[what])
	}
	if days := parts["days"]; len(days) != 4 || days[0].whole || !days[1].whole || days[3].whole || days[0].to.Sub(days[0].from) != 14*time.Hour {
		t.Errorf("the window of 72 h from 10 UTC has four days, of which the first has 14 h: %+v", days[0])
	}
}

// Overlaps against every pair.
func TestOverlappingPasses(t *testing.T) {
	_, rows := weekRows(t, 30)
	for i := range rows { // closer together, so that some overlap
		length := rows[i].los.Sub(rows[i].aos)
		rows[i].aos = firstAOS.Add(time.Duration(i*i%29) * 4 * time.Minute)
		rows[i].los = rows[i].aos.Add(length)
	}
	passes := passesOf(rows)
	want := 0
	for i := range passes {
		for k := range passes {
			if a, b := passes[i], passes[k]; i != k && a.station == b.station && a.modeBytes > 0 && b.modeBytes > 0 && a.aos.Before(b.los) && b.aos.Before(a.los) {
				want++
				break
			}
		}
	}
	if got := overlapping(passes); got != want || want == 0 || want == len(passes) {
		t.Errorf("%d passes overlap another, want %d of %d", got, want, len(passes))
	}
}

// A pass with two links counts once, by the one that brings most.
func TestPassOfSeveralLinksCountsOnce(t *testing.T) {
	r, rows := weekRows(t, 2)
	rows[1].spacecraft, rows[1].station, rows[1].aos = rows[0].spacecraft, rows[0].station, rows[0].aos
	rows[0].modeBytes, rows[1].modeBytes = 1e6, 3e6
	w := summarise(r.From, r.To, rows)
	if all := w.periods[0]; all.passes != 1 || all.bytes != 3e6 || w.passes[0].links != 2 {
		t.Errorf("%+v", all)
	}
}

func TestMondays(t *testing.T) {
	for _, c := range []struct{ at, want string }{
		{"2026-09-14T00:00:00Z", "2026-09-14"}, {"2026-09-20T23:59:59Z", "2026-09-14"}, {"2027-01-01T12:00:00Z", "2026-12-28"},
	} {
		at, err := time.Parse(time.RFC3339, c.at)
		if err != nil {
			t.Fatal(err)
		}
		if got := mondayOf(at).Format("2006-01-02"); got != c.want {
			t.Errorf("%s: %s, want %s", c.at, got, c.want)
		}
	}
}

// A window longer than a week has a table of its weeks, and days are held against the day
// before where both are whole.
func TestSummaryOfLongWindow(t *testing.T) {
	r, rows := weekRows(t, 30)
	r.To = r.From.Add(10 * 24 * time.Hour)
	for i := range rows {
		length := rows[i].los.Sub(rows[i].aos)
		rows[i].aos = r.From.Add(time.Duration(i) * 8 * time.Hour)
		rows[i].los, rows[i].modeBytes = rows[i].aos.Add(length), float64(1+i/3)*1e6
	}
	w := newWriter(r, Options{}, stubScript, nil)
	out, err := weekPage(w, summarise(r.From, r.To, rows))
	if err != nil {
		t.Fatal(err)
	}
	page := html.UnescapeString(string(out))
	for _, want := range []string{"By week", "2026, week 11", "the window has", "against the day before", "Of 9 whole days", "Passes that bring least", "Volume a day", "trial.yaml"} {
		if !strings.Contains(page, want) {
			t.Errorf("no %q on the page", want)
		}
	}
	if strings.Contains(page, "<script") || strings.Contains(page, "NaN") {
		t.Error("a script, or a number that is none, on the page")
	}
}

// An empty window has a summary that says so.
func TestSummaryOfNothing(t *testing.T) {
	r, _ := weekRows(t, 0)
	files := rendered(t, r, Options{PDF: true}, stubScript)
	if page := string(files[weekFile]); !strings.Contains(page, "No pass in this window.") {
		t.Error("the summary of nothing does not say so")
	}
	var j struct{ Periods, Best, Worst []any }
	if err := json.Unmarshal(files[weekJSONFile], &j); err != nil || j.Best == nil || j.Worst == nil || len(j.Periods) != 5 {
		t.Errorf("%v, %d periods", err, len(j.Periods))
	}
}

// The numbers of the summary are those of the index's table: bytes of each pass added.
func TestSummaryAgreesWithIndex(t *testing.T) {
	files := rendered(t, fixtureReport(20), Options{}, stubScript)
	column := func(file, name string) []string {
		all, err := csv.NewReader(strings.NewReader(string(files[file]))).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		for k, head := range all[0] {
			if head == name {
				var out []string
				for _, r := range all[1:] {
					out = append(out, r[k])
				}
				return out
			}
		}
		t.Fatalf("%s has no column %s", file, name)
		return nil
	}
	want := 0.0
	for _, v := range column(indexCSVFile, "mode_bytes") {
		if v != "" {
			b, err := strconv.ParseFloat(v, 64)
			if err != nil {
				t.Fatal(err)
			}
			want += b
		}
	}
	got, err := strconv.ParseFloat(column(weekCSVFile, "mode_bytes")[0], 64)
	if err != nil || math.Abs(got-want) > 10 { // each of the twenty is rounded to a byte
		t.Errorf("%v bytes in the summary, %v in the index, %v", got, want, err)
	}
}

// The PDF of the summary says the same as its page.
func TestSummaryPaper(t *testing.T) {
	files := rendered(t, fixtureReport(20), Options{PDF: true}, stubScript)
	text := strings.Join(strings.Fields(tool(t, files[weekPaperFile], "pdftotext", "-layout", "FILE", "-")), " ")
	for _, want := range []string{"Summary", "By day", "By spacecraft", "By station", "Passes that bring most", "What these numbers stand on", "trial.yaml", "AOS"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q on paper", want)
		}
	}
}
