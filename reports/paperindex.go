package reports

import (
	"strconv"
	"time"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

// longPaper is from how many passes on the PDF of a window has a list of contents.
const longPaper = 60

// indexPaper returns the PDF of the whole window: how many passes close, the overview, the best
// passes, every pass by its day, assumptions and cautions.
func indexPaper(w *writer, v *indexView, rows []row) ([]byte, error) {
	r := w.report
	days := byDay(v.Rows)
	info := w.info(r.Title + ": passes and downlinks")
	if len(v.Rows) >= longPaper {
		info.Contents = len(days) + 3
	}
	info.Foot = agesText(rows)
	d := paper.New(info)
	d.Page()
	d.Title("Passes and downlinks", v.From+" to "+v.To+" UTC · scenario "+r.Title+" · "+v.Horizon+" horizon")
	d.Chapter("Answer")
	d.Answer(v.countText())
	if v.Sky != "" {
		d.Paragraph(v.Sky)
	}
	for _, l := range v.Lacks {
		d.Caution("Missing from the numbers: " + l)
	}
	for _, n := range v.Warnings {
		d.Caution(noteText(n))
	}
	if v.Chart {
		o := overviewSketch(r, rows)
		d.Figures([]paper.Figure{{Title: "Every pass", Caption: overviewCaption, Height: o.Height(), Wide: true,
			Draw: func(c vector.Canvas, w, h float64) { o.Draw(c, w, h) }}})
	}
	if v.HasRadio && len(v.Best) > 0 {
		d.Heading("Those that bring the most")
		d.Table(rowsTable(v.Best))
	}
	d.List()
	for _, day := range days {
		d.Heading("Passes of " + day.name)
		d.Chapter("Passes of " + day.name)
		d.Table(rowsTable(day.rows))
	}
	d.Heading("Assumptions")
	d.Chapter("Assumptions")
	d.Notes(noteTexts(v.Assumptions))
	if len(v.Defaults) > 0 {
		d.Heading("Left out in the scenario, and taken as")
		d.Notes(noteTexts(v.Defaults))
	}
	cautionsOn(d, w.indexBasis())
	return d.Bytes()
}

// countText says how many passes there are and what becomes of their links.
func (v *indexView) countText() string {
	c := v.Count
	text := strconv.Itoa(c.Passes) + " passes"
	if c.Passes == 1 {
		text = "1 pass"
	}
	if c.All != c.Passes {
		text += " on " + strconv.Itoa(c.All) + " pages, a page for each link"
	}
	if !v.HasRadio {
		return text + "."
	}
	return text + ": " + strconv.Itoa(c.Throughout) + " close throughout, " + strconv.Itoa(c.Partly) + " in part, " +
		strconv.Itoa(c.Never) + " do not close, " + strconv.Itoa(c.Without) + " have no data link."
}

// agesText says how old the element sets are at the passes; empty where there are none.
func agesText(rows []row) string {
	least, most, seen := time.Duration(0), time.Duration(0), false
	for i := range rows {
		r := &rows[i]
		if r.inPlace {
			continue
		}
		if !seen {
			least, most, seen = r.age, r.age, true
		}
		least, most = min(least, r.age), max(most, r.age)
	}
	switch {
	case !seen:
		return ""
	case least == most:
		return "element sets " + age(least) + " old at AOS"
	}
	return "element sets " + age(least) + " to " + age(most) + " old at AOS"
}

// dayRows are the passes of a day in UTC.
type dayRows struct {
	name string
	rows []rowView
}

// byDay splits rows, which are in the order of time, by the day of AOS.
func byDay(rows []rowView) []dayRows {
	var list []dayRows
	for _, r := range rows {
		name := r.UTC[:10]
		if len(list) == 0 || list[len(list)-1].name != name {
			list = append(list, dayRows{name: name})
		}
		last := &list[len(list)-1]
		last.rows = append(last.rows, r)
	}
	return list
}

// rowsTable is the table of passes on paper.
func rowsTable(rows []rowView) paper.Table {
	t := paper.Table{Corner: "spacecraft, station", Heads: []string{"AOS, UTC", "lasts", "highest", "link", "margin, dB", "volume"}, First: 0.28}
	for _, r := range rows {
		margin := "–"
		if r.Least != "–" || r.Greatest != "–" {
			margin = r.Least + " to " + r.Greatest
		}
		link := r.Verdict.Symbol() + " " + r.Verdict.Words()
		t.Rows = append(t.Rows, paper.Row{Name: r.Spacecraft + ", " + r.Station, Remark: r.Link, Cells: []string{r.UTC, r.Duration, r.Elevation + "°", link, margin, r.ModeVolume}})
	}
	return t
}
