package reports

import "slantwise/reports/paper"

// weekPaper returns the PDF of the summary, with the words and numbers of its page.
func weekPaper(w *writer, s *week) ([]byte, error) {
	v := newWeekView(w, s)
	d := paper.New(w.info(w.report.Title + ": summary"))
	d.Page()
	d.Title("Summary", v.From+" to "+v.To+" UTC · scenario "+w.report.Title)
	d.Chapter("Answer")
	d.Answer(v.Answer)
	for _, l := range v.Lines {
		d.Paragraph(l)
	}
	for _, t := range v.Tables {
		d.Heading(t.Title)
		d.Chapter(t.Title)
		d.Table(v.onPaper(&t))
	}
	d.Heading("Charts")
	d.Chapter("Charts")
	list := s.sketches()
	for i := range list {
		list[i].tall = wideHeight
	}
	d.Figures(paperFigures(list))
	for _, l := range []struct {
		title  string
		passes []namedView
	}{{"Passes that bring most, and why", v.Best}, {"Passes that bring least, and why", v.Worst}} {
		if len(l.passes) == 0 {
			continue
		}
		d.Heading(l.title)
		d.Chapter(l.title)
		var notes []string
		for _, p := range l.passes {
			notes = append(notes, p.Name+", "+p.UTC+" UTC, "+p.Volume+": "+p.Reasons)
		}
		d.Notes(notes)
	}
	cautionsOn(d, w.indexBasis())
	return d.Bytes()
}

// onPaper is a table of periods on paper.
func (v *weekView) onPaper(t *weekTable) paper.Table {
	out := paper.Table{Corner: t.First, Heads: []string{"passes", "contact"}}
	if v.HasRadio {
		out.Heads = append(out.Heads, "worth taking", "link closes", "volume")
	}
	if t.Trend {
		out.Heads = append(out.Heads, "day before")
	}
	if v.HasPlan {
		out.Heads = append(out.Heads, "rate plan")
	}
	if v.HasLog {
		out.Heads = append(out.Heads, "logged", "taken")
	}
	if v.HasAge {
		out.Heads = append(out.Heads, "elements’ age")
	}
	for _, r := range t.Rows {
		row := paper.Row{Name: r.Name, Remark: r.Note, Result: r.Result, Cells: []string{r.Passes, r.Contact}}
		if v.HasRadio {
			row.Cells = append(row.Cells, r.Worth, r.Closes, r.Volume)
		}
		if t.Trend {
			row.Cells = append(row.Cells, r.Change)
		}
		if v.HasPlan {
			row.Cells = append(row.Cells, r.Plan)
		}
		if v.HasLog {
			row.Cells = append(row.Cells, r.Logged, r.Taken)
		}
		if v.HasAge {
			row.Cells = append(row.Cells, r.Ages)
		}
		out.Rows = append(out.Rows, row)
	}
	return out
}
