package reports

import (
	"bytes"
	"html/template"
	"strings"
)

// weekView is what the template of the summary shows.
type weekView struct {
	pageView
	Heading, From, To string
	Answer            string
	Lines             []string
	Tables            []weekTable
	Figures           []figureView
	Best, Worst       []namedView
	HasRadio          bool
	HasPlan           bool
	HasLog            bool
	HasAge            bool
	CSV, JSON         template.URL
	PDF               string
}

// weekTable is a table of periods.
type weekTable struct {
	ID, Title, First string // First: the head of the first column
	Trend            bool   // days can be compared with the day before
	Rows             []periodView
}

// Unbroken returns a text of two quantities that a narrow column breaks between them alone.
func (weekTable) Unbroken(s string) string {
	const hard = "\u00a0"
	return strings.NewReplacer(" of ", " of"+hard, " to ", " to"+hard, ", ", ", ", " ", hard).Replace(s)
}

// periodView is a line of it; texts as they are to be read.
type periodView struct {
	Name, Note            string
	Passes, Worth, Logged string
	Contact, Closes       string
	Volume, Change, Plan  string
	Taken, Ages           string
	Share                 string // of the greatest volume of the table, percent
	Result                bool
}

type namedView struct {
	Page, Name, UTC, Volume string
	Reasons                 string
}

func newWeekView(w *writer, s *week) *weekView {
	r := w.report
	v := &weekView{pageView: w.stillPage("", r.Title+": summary"), Heading: r.Title, From: dayClock(r.From), To: dayClock(r.To), CSV: weekCSVFile, JSON: weekJSONFile}
	if w.options.PDF {
		v.PDF = weekPaperFile
	}
	v.foot(w.indexBasis(), "")
	all := &s.of(windowKind)[0]
	v.HasRadio, v.HasPlan, v.HasAge = finite(all.bytes), finite(all.planBytes), all.aged
	v.HasLog = all.logged > 0
	v.Answer, v.Lines = s.answer()
	v.Best, v.Worst = s.namedViews(s.best), s.namedViews(s.worst)
	for _, t := range []struct{ kind, title, first string }{{weekKind, "By week", "week"}, {dayKind, "By day", "day, UTC"}} {
		if list := s.of(t.kind); len(list) > 0 {
			v.Tables = append(v.Tables, periodTable(t.kind+"s", t.title, t.first, list, t.kind == dayKind))
		}
	}
	var craft, stations []period
	for _, p := range s.periods {
		if p.kind == windowKind && p.spacecraft != "" {
			craft = append(craft, p)
		} else if p.kind == windowKind && p.station != "" {
			stations = append(stations, p)
		}
	}
	v.Tables = append(v.Tables, periodTable("craft", "By spacecraft", "spacecraft", append(craft, *all), false), periodTable("stations", "By station", "station", append(stations, *all), false))
	for _, k := range s.sketches() {
		v.Figures = append(v.Figures, figureOf(k.id, k.title, k.caption, wideHeight, &k))
	}
	return v
}

func weekPage(w *writer, s *week) ([]byte, error) {
	v := newWeekView(w, s)
	if w.options.OneFile {
		c, err := s.csv()
		if err != nil {
			return nil, err
		}
		j, err := s.json()
		if err != nil {
			return nil, err
		}
		v.CSV, v.JSON = dataAddress("text/csv", c), dataAddress("application/json", j)
	}
	var out bytes.Buffer
	err := pageTemplates().ExecuteTemplate(&out, "week.html", v)
	return out.Bytes(), err
}

// periodTable lays out periods; with trend each whole day is held against the whole day
// before it.
func periodTable(id, title, first string, list []period, trend bool) weekTable {
	t := weekTable{ID: id, Title: title, First: first}
	most := 0.0
	for i := range list {
		if (list[i].kind != windowKind || list[i].spacecraft+list[i].station != "") && list[i].bytes > most {
			most = list[i].bytes
		}
	}
	for i := range list {
		p := &list[i]
		r := periodView{Passes: fixed(float64(p.passes), 0), Worth: fixed(float64(p.worth), 0), Logged: fixed(float64(p.logged), 0),
			Contact: span(p.contact), Closes: span(p.closes), Volume: withUnit(p.bytes, byteScales), Plan: withUnit(p.planBytes, byteScales), Taken: p.takenText(), Ages: p.agesText()}
		switch p.kind {
		case dayKind:
			r.Name = p.from.Format("Mon 2006-01-02")
		case weekKind:
			year, n := p.from.ISOWeek()
			r.Name = fixed(float64(year), 0) + ", week " + fixed(float64(n), 0)
		default:
			r.Name = p.spacecraft + p.station
		}
		if r.Name == "" {
			r.Name, r.Result = "all", true
		} else if most > 0 && p.bytes > 0 {
			r.Share = string(appendFixed(nil, 100*p.bytes/most, 1))
		}
		if p.kind != windowKind && !p.whole {
			r.Note = "the window has " + fixed(p.to.Sub(p.from).Hours(), 1) + " h of it"
		}
		if trend {
			r.Change = "–"
			if i > 0 && p.whole && list[i-1].whole && list[i-1].bytes > 0 {
				r.Change, t.Trend = changeBy(100*(p.bytes/list[i-1].bytes-1), 0)+" %", true
			}
		}
		t.Rows = append(t.Rows, r)
	}
	return t
}

// takenText is the volume of the logged passes over what was predicted for them.
func (p *period) takenText() string {
	if !finite(p.taken) {
		return "–"
	}
	s := withUnit(p.taken, byteScales) + " of " + withUnit(p.predicted, byteScales)
	if p.predicted > 0 {
		s += ", " + fixed(100*p.taken/p.predicted, 0) + " %"
	}
	return s
}

func (p *period) agesText() string {
	switch {
	case !p.aged:
		return "–"
	case age(p.ageFrom) == age(p.ageTo):
		return age(p.ageFrom)
	}
	return age(p.ageFrom) + " to " + age(p.ageTo)
}

// answer says in a sentence what the window brings, and what else comes first.
func (w *week) answer() (string, []string) {
	all := &w.of(windowKind)[0]
	if all.passes == 0 {
		return "No pass in this window.", nil
	}
	s := countedPasses(all.passes) + ", " + span(all.contact) + " of contact"
	if finite(all.bytes) {
		s = withUnit(all.bytes, byteScales) + " in " + countedPasses(all.worth) + " worth taking, of " + fixed(float64(all.passes), 0) + "; " +
			span(all.contact) + " of contact, " + span(all.closes) + " with a link that closes"
	}
	var lines []string
	if finite(all.planBytes) {
		lines = append(lines, "By the rate plans "+withUnit(all.planBytes, byteScales)+" of the user’s bytes.")
	}
	if line := w.trend(); line != "" {
		lines = append(lines, line)
	}
	if all.logged > 0 {
		lines = append(lines, countedPasses(all.logged)+" in the logbook; bytes taken of those predicted: "+all.takenText()+".")
	}
	if w.overlapping > 0 {
		lines = append(lines, countedPasses(w.overlapping)+" worth taking overlap another over the same station: one antenna cannot take both, and the sums count both.")
	}
	if all.aged {
		lines = append(lines, "Element sets are "+all.agesText()+" old at AOS; the older, the less sure are times and pointing.")
	}
	return s + ".", lines
}

func countedPasses(n int) string {
	if n == 1 {
		return "1 pass"
	}
	return fixed(float64(n), 0) + " passes"
}

// trend tells how the whole days of the window differ; empty where there are no two.
func (w *week) trend() string {
	var whole []period
	for _, d := range w.of(dayKind) {
		if d.whole && finite(d.bytes) {
			whole = append(whole, d)
		}
	}
	if len(whole) < 2 {
		return ""
	}
	least, most := whole[0], whole[0]
	for _, d := range whole {
		if d.bytes < least.bytes {
			least = d
		}
		if d.bytes > most.bytes {
			most = d
		}
	}
	first, last := whole[0], whole[len(whole)-1]
	s := "Of " + fixed(float64(len(whole)), 0) + " whole days " + least.from.Format("01-02") + " brings least, " + withUnit(least.bytes, byteScales) + ", and " +
		most.from.Format("01-02") + " most, " + withUnit(most.bytes, byteScales)
	if first.bytes > 0 {
		s += "; from the first to the last " + changeBy(100*(last.bytes/first.bytes-1), 0) + " %"
	}
	if first.aged && last.aged {
		s += ", with element sets " + first.agesText() + " old on the first and " + last.agesText() + " on the last"
	}
	return s + "."
}

func (w *week) namedViews(list []weekPass) []namedView {
	m := w.middles()
	var out []namedView
	for i := range list {
		p := &list[i]
		out = append(out, namedView{Page: passFolder + "/" + p.page + ".html", Name: p.spacecraft + " over " + p.station, UTC: dayClock(p.aos),
			Volume: withUnit(p.modeBytes, byteScales), Reasons: strings.Join(p.reasons(m[p.spacecraft]), "; ")})
	}
	return out
}
