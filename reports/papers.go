package reports

import (
	"cmp"
	"slices"
	"strings"

	"slantwise/reports/paper"
)

// info is what the PDF files of a report say about themselves. Their date is the window's start:
// files carry no clock, and the same input gives the same bytes.
func (w *writer) info(title string) paper.Info {
	return paper.Info{Title: title, Subject: "scenario " + w.report.Title, Creator: program(w.options.Version), Date: w.report.From}
}

// program names the program with its version where that is known.
func program(version string) string { return strings.TrimSpace("slantwise " + version) }

// passPaper returns the PDF of a pass: the answer first, then when and where, charts, budgets,
// assumptions and cautions, with the words and numbers of its page.
func passPaper(w *writer, p *Pass) ([]byte, error) {
	v := newPassView(p)
	v.addNotes(p.Notes)
	info := w.info(v.Spacecraft + " over " + v.Station + ", " + v.Begin + " UTC")
	info.Foot = v.orbitText()
	d := paper.New(info)
	d.Page()
	d.Title(v.Spacecraft+" over "+v.Station, "scenario "+w.report.Title)
	d.Chapter("Answer")
	v.answerOn(d)
	for _, n := range v.Warnings {
		d.Caution(noteText(n))
	}
	d.Heading("When and where")
	d.Table(paperTable(v.Events))
	v.linkOn(d)
	if v.Link != nil && v.Link.Mount != nil {
		v.Link.Mount.on(d)
	}
	d.Heading("Along the pass")
	d.Chapter("Along the pass")
	d.Figures(paperFigures(sketches(p, newFrame(p))))
	measuredOn(d, p)
	groundOn(d, p)
	sightsOn(d, p)
	if v.Link != nil {
		d.Heading("Link budget")
		d.Chapter("Link budget")
		d.Paragraph("Losses are shown with the sign with which they enter the sum. Received power and noise are at the input of the first amplifier, after the feed loss.")
		d.Table(paperTable(v.Budget))
		d.Notes(noteTexts(v.Doubts))
		d.Heading("System noise")
		d.Table(paperTable(v.Noise))
	}
	for i := range v.LinkSets {
		v.LinkSets[i].on(d)
	}
	for i := range v.Uplinks {
		v.Uplinks[i].on(d)
	}
	v.assumptionsOn(d)
	basis := w.report.Basis.ofPass(p)
	cautionsOn(d, &basis)
	return d.Bytes()
}

// orbitText names the orbit that the numbers come from, with its age.
func (v *passView) orbitText() string {
	if v.Element.InPlace != "" {
		return "orbit: " + v.Element.InPlace
	}
	return "element set of " + v.Element.Epoch + " UTC, " + v.Element.Age + " old at AOS"
}

// answerOn writes what is asked first.
func (v *passView) answerOn(d *paper.Document) {
	when := v.Begin + " to " + v.EndClock + " UTC, " + v.Duration
	if v.HasZone {
		when += "; " + v.Local + " at the station"
	}
	d.Answer(when)
	d.Answer(v.verdictText())
	if v.CutText != "" {
		d.Paragraph(v.CutText)
	}
	var rows []paper.Row
	fact := func(name, value, remark string) {
		rows = append(rows, paper.Row{Name: name, Remark: remark, Cells: []string{value}})
	}
	fact("Highest", v.Highest+"° at azimuth "+v.HighestToward, "")
	if l := v.Link; l != nil {
		if l.HasMargin {
			fact("Volume, mode "+l.Mode, l.ModeVolume, "at "+l.ModeRate+" while it closes")
			if l.Plan != nil {
				fact("Volume, planned modes", l.Plan.Bytes, l.Plan.Changes)
			}
			fact("Volume, achievable rate", l.AchievableVolume, "were the rate always the best")
			fact("Margin", l.Least+" to "+l.Greatest+" dB", l.Required+" dB required")
		}
		if l.Strongest != "" {
			fact("Strongest", l.Strongest+" dBm", "at the first amplifier")
		}
		fact("Link", l.Transmitter+", "+l.Frequency+", to "+l.Antenna, l.ModeText)
	}
	for _, u := range v.Uplinks {
		if u.HasMargin {
			fact("Commanding, "+u.Name, "margin "+u.Least+" to "+u.Greatest+" dB", u.Required+" dB required; works for "+u.Of)
		}
	}
	if s := v.Surety; s != nil {
		fact("By the orbit’s error", strings.TrimPrefix(s.Edges+", highest ±"+s.Elevation+"°", ", "), "one standard deviation")
	}
	if v.Element.InPlace != "" {
		fact("Orbit", v.Element.InPlace, "")
	} else {
		fact("Age of the element set", v.Element.Age, "at AOS, epoch "+v.Element.Epoch+" UTC")
	}
	d.Table(paper.Table{Corner: "In short", Heads: []string{""}, Rows: rows, Left: true, First: 0.35})
	if l := v.Link; l != nil {
		l.Sky.on(d)
		l.Sky.bodiesOn(d)
	}
}

// verdictText says what becomes of the link.
func (v *passView) verdictText() string {
	l := v.Link
	switch {
	case l == nil:
		return "No radio here: this is the geometry alone."
	case !l.HasMargin:
		return "A carrier without data: there is power to receive and no link to close."
	}
	switch v.Verdict.state {
	case neverCloses:
		return "The link does not close in mode " + l.Mode + ": the margin reaches " + l.Greatest + " dB at most, " + l.Required + " dB are required."
	case closesThrough:
		return "The link closes throughout in mode " + l.Mode + ", " + l.Of + "."
	}
	return "The link closes for " + v.Verdict.Closed() + " of " + l.Of + " in mode " + l.Mode + ": " + strings.Join(l.Closes, ", ") + " UTC."
}

// on writes what the path in the numbers is.
func (s *skyView) on(d *paper.Document) {
	if s.Missing != "" {
		d.Caution("Missing from every number here: " + s.Missing + ". The real link is weaker by what that takes. " + s.MissingText)
	}
	switch {
	case s.Clear:
		d.Paragraph("Every number is that of a clear sky, as the scenario asks.")
	case s.Percent != "":
		text := "Power, noise, margin, rate and volume are those with the attenuation and noise exceeded " + s.Percent + " of an average year."
		if b := s.Beside; b != nil {
			text += " Under a clear sky: margin " + b.Least + " to " + b.Greatest + " dB, volume " + b.ModeVolume + "."
		}
		d.Paragraph(text)
	}
}

// linkOn writes the tables of modes and of the plan.
func (v *passView) linkOn(d *paper.Document) {
	if len(v.Modes) > 0 {
		t := paper.Table{Corner: "mode", Heads: []string{"rate", "closes for", "margin, dB", "volume"}}
		for _, m := range v.Modes {
			name := m.Name
			if m.Chosen {
				name += " (shown here)"
			}
			t.Rows = append(t.Rows, paper.Row{Name: name, Remark: m.Text, Cells: []string{m.Rate, m.Closed, m.Margin, m.Volume}, Result: m.Chosen})
		}
		d.Heading("Modes of this transmitter")
		d.Table(t)
	}
	if v.Link == nil || v.Link.Plan == nil || len(v.Link.Plan.Steps) == 0 {
		return
	}
	t := paper.Table{Corner: "from, to, UTC", Heads: []string{"mode", "rate", "net rate", "least margin, dB", "volume"}}
	for _, s := range v.Link.Plan.Steps {
		rate, net := cmp.Or(s.Rate, "–"), cmp.Or(s.NetRate, "–")
		t.Rows = append(t.Rows, paper.Row{Name: s.From + " to " + s.To, Cells: []string{s.Mode, rate, net, s.Margin, s.Volume}})
	}
	d.Heading("Which mode when")
	d.Chapter("Which mode when")
	d.Table(t)
}

// on writes an uplink with the caution about its radiation.
func (u *uplinkView) on(d *paper.Document) {
	d.Heading("Uplink " + u.Name)
	d.Chapter("Uplink " + u.Name)
	d.Paragraph("The station sends at " + u.Frequency + " from " + u.Antenna + ". Received power and noise are at the input of the spacecraft’s receiver.")
	if u.Radiation != nil {
		d.Caution(u.Radiation.Caution)
	}
	d.Table(paperTable(u.Budget))
	if u.Radiation != nil {
		d.Heading("Radiation of the station")
		d.Table(paperTable(u.Radiation.Table))
	}
}

// assumptionsOn writes what was taken as given.
func (v *passView) assumptionsOn(d *paper.Document) {
	d.Heading("Assumptions")
	d.Chapter("Assumptions")
	text := "Element set " + v.Element.Name
	if v.Element.From != "" {
		text += " from " + v.Element.From
	}
	text += ", epoch " + v.Element.Epoch + " UTC, " + v.Element.Age + " old at AOS. An element set errs by about a kilometre along the track when it is fresh and by more each day."
	if v.Element.InPlace != "" {
		text = "Flown by this orbit: " + v.Element.InPlace + ". How far it is off is not known from it alone."
	}
	if v.Surety != nil {
		text += " Here the position is uncertain " + v.Surety.Basis + "."
	}
	d.Paragraph(text)
	d.Notes(noteTexts(v.Assumptions))
	if len(v.Defaults) > 0 {
		d.Heading("Left out in the scenario, and taken as")
		d.Notes(noteTexts(v.Defaults))
	}
}

// noteText writes a note in a line.
func noteText(n Note) string {
	text := n.Text
	if n.About != "" {
		text = n.About + ": " + text
	}
	if n.Source != "" {
		text += " (" + n.Source + ")"
	}
	return text
}

func noteTexts(notes []Note) []string {
	list := make([]string, len(notes))
	for i, n := range notes {
		list[i] = noteText(n)
	}
	return list
}

// paperTable is a table of a page on paper.
func paperTable(v budgetView) paper.Table {
	t := paper.Table{Corner: v.Corner, Heads: v.Heads}
	for _, part := range v.Parts {
		if part.Title != "" {
			t.Rows = append(t.Rows, paper.Row{Name: part.Title})
		}
		for _, r := range part.Rows {
			name := r.Name
			if r.Unit != "" {
				name += ", " + r.Unit
			}
			t.Rows = append(t.Rows, paper.Row{Name: name, Remark: r.Source, Cells: r.Cells, Result: r.Result})
		}
	}
	return t
}

func paperFigures(list []sketch) []paper.Figure {
	out := make([]paper.Figure, len(list))
	for i, s := range list {
		out[i] = paper.Figure{Title: s.title, Caption: s.caption, Height: s.height(), Wide: s.wide, Draw: s.draw}
	}
	// Low ones first, so that both of a row are of one height.
	slices.SortStableFunc(out, func(a, b paper.Figure) int { return cmp.Compare(a.Height, b.Height) })
	return out
}
