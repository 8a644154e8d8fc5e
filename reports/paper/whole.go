package paper

import "slantwise/reports/drawing"

// WholeMargin is the edge that stays white around a page of Whole, in points.
const WholeMargin = 28.0

// Whole adds a page that is drawn from edge to edge, without the document's margins; w by h
// points are within WholeMargin.
func (d *Document) Whole(draw func(c drawing.Canvas, w, h float64)) {
	d.Page()
	d.whole = true
	draw(canvas{d, WholeMargin, WholeMargin}, WholeWidth, WholeHeight)
}

// Size of what Whole draws on, above a line about letters that the font lacks and the foot.
const (
	WholeWidth  = pageWidth - 2*WholeMargin
	WholeHeight = bottom - WholeMargin
)
