package reports

import (
	"fmt"
	"math"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

const (
	sheetSpaceW = paper.WholeWidth
	sheetSpaceH = paper.WholeHeight
)

// lowest is a canvas that keeps how far texts reach, and tells of two that lie over each other.
type lowest struct {
	x, y    float64
	texts   []laidText
	overlap string
}

type laidText struct {
	text      string
	x0, x1, y float64
}

func (l *lowest) Line([]vector.Point, vector.Stroke)                      {}
func (l *lowest) Area([]vector.Point, vector.Tone, *vector.Stroke)        {}
func (l *lowest) Disc(vector.Point, float64, vector.Tone, *vector.Stroke) {}
func (l *lowest) Width(text string, size float64) float64                 { return sheetWidth(text, size, false) }

func (l *lowest) Inside(_ [][]vector.Point, draw func()) { draw() }

func (l *lowest) Write(t vector.Text) {
	w := sheetWidth(t.Text, t.Size, t.Bold)
	one := laidText{t.Text, t.At.X, t.At.X + w, t.At.Y}
	if t.Align == vector.End {
		one.x0, one.x1 = t.At.X-w, t.At.X
	}
	l.x, l.y = max(l.x, one.x1), max(l.y, one.y)
	for _, o := range l.texts {
		// Base lines nearer than the small text is high, and more of both than a stroke.
		if math.Abs(o.y-one.y) < 5 && min(o.x1, one.x1)-max(o.x0, one.x0) > 1.5 {
			l.overlap = fmt.Sprintf("%q at %.1f and %q at %.1f", o.text, o.y, one.text, one.y)
		}
	}
	l.texts = append(l.texts, one)
}
