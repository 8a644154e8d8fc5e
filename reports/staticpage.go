package reports

import (
	"html/template"

	vector "slantwise/reports/drawing"
)

// staticWidth is how wide drawings without script are laid out, in points: the width of a column
// on a screen.
const staticWidth = 360.0

// markup returns a chart as a drawing to stand in a page.
func (s *sketch) markup(name string) template.HTML {
	w, h := staticWidth, s.height()
	if s.wide {
		w = 2 * staticWidth
	}
	if s.tall > 0 {
		h = s.tall
	}
	svg := vector.NewSVG(w, h)
	s.draw(svg, w, h)
	return template.HTML(svg.Bytes(name))
}

// addStatic puts drawings into the views of a pass's charts, which are in the order of its sketches.
func addStatic(views []figureView, list []sketch) {
	for i := range views {
		views[i].Drawing = list[i].markup(list[i].title + ". " + list[i].caption)
	}
}
