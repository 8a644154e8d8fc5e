package reports

import (
	"strings"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

// groundOn writes the map of the pass with the Sun and the Moon, in words too.
func groundOn(d *paper.Document, p *Pass) {
	m := groundSketch(p)
	if m == nil {
		return
	}
	d.Heading("Over the ground")
	d.Chapter("Over the ground")
	text := groundText(p)
	for _, b := range p.Ground.Sky {
		text += " " + b.String()
	}
	d.Paragraph(text)
	source := " Coastline: Natural Earth, public domain."
	if coast() == nil {
		source = " This program was built without its coastline."
	}
	d.Figures([]paper.Figure{{Title: "Map around the station", Caption: mapKey + source, Height: 236, Wide: true, Draw: m.Draw}})
}

// bodiesOn says when the Sun or the Moon is in the antenna's beam.
func (s *skyView) bodiesOn(d *paper.Document) {
	var parts []string
	for _, b := range s.Bodies {
		if len(b.When) == 0 {
			parts = append(parts, "The "+b.Name+" does not come into the beam.")
			continue
		}
		parts = append(parts, "The "+b.Name+" is in the beam "+strings.Join(b.When, ", ")+" UTC.")
	}
	if len(parts) > 0 {
		d.Paragraph(strings.Join(parts, " "))
	}
}

// sightsOn draws how the antenna of the spacecraft sees the station.
func sightsOn(d *paper.Document, p *Pass) {
	if p.Radio == nil || len(p.Radio.Sights) == 0 {
		return
	}
	d.Heading("How the antenna sees the station")
	d.Chapter("How the antenna sees the station")
	d.Small(sightsText)
	var list []paper.Figure
	for i, v := range sightViews(p) {
		s := &p.Radio.Sights[i]
		list = append(list, paper.Figure{Title: v.Name + ", " + v.Clock + ": " + v.Angle, Caption: v.Text, Height: 150,
			Draw: func(c vector.Canvas, w, h float64) { s.draw(c, w, h) }})
	}
	d.Figures(list)
}

// on writes how the mount takes the pass.
func (m *mountView) on(d *paper.Document) {
	d.Heading("The mount")
	d.Chapter("The mount")
	d.Paragraph(m.text())
	text := "The " + m.Lower + " axis goes from " + m.From + "° to " + m.To + "°, as the cable counts it, at " + m.LowerRate + " °/s at most, the " + m.Upper + " axis at " + m.UpperRate + " °/s."
	for _, s := range m.Slews {
		text += " It " + s + " UTC."
	}
	if len(m.Slews) > 0 {
		text += " The error reaches " + m.Largest + "°."
	}
	d.Paragraph(text + " The mount moves without warning under program control: keep clear of it, and lock it out before work.")
}

// text says whether the mount follows.
func (m *mountView) text() string {
	if m.Followed {
		return "It follows the whole pass within " + m.Tolerance + "°."
	}
	text := "It does not follow " + m.Lost + " s of the pass within " + m.Tolerance + "°: " + strings.Join(m.Spans, ", ") + " UTC"
	switch {
	case m.LostMode != "":
		text += "; " + m.LostMode + " of the mode are lost by it"
	case m.LostBest != "":
		text += "; " + m.LostBest + " at the achievable rate are lost by it"
	}
	return text + ". Volumes are without them. Turning after the spacecraft without a plan would lose " + m.Unplanned + " s."
}
