package drawing

import (
	"math"
	"strings"
	"testing"
)

// Bars of a group stand beside each other on the foot, each with a face of its own; nought
// is a line, and what does not exist is nothing.
func TestBarsHaveFacesOfTheirOwn(t *testing.T) {
	s := &Bars{Name: "day", Groups: []string{"one", "two"}, Left: NewAxis("volume", 0, 10, true), Sets: []BarSet{
		{Name: "a", Tone: First, Fill: Full, Values: []float64{10, 0}}, {Name: "b", Tone: Second, Fill: Slanted, Values: []float64{5, math.NaN()}},
	}}
	svg := NewSVG(200, 100)
	s.Draw(svg, 200, 100)
	text := string(svg.Bytes("bars"))
	// The field is 36 to 188 wide and 29.5 to 70 high: the first group's middle is at 74, and
	// bars are 24 wide with 6 % of room on both sides.
	for _, want := range []string{
		`points="51.44,70 51.44,29.5 72.56,29.5 72.56,70" fill="var(--line-1)"`, `points="75.44,70 75.44,49.75 96.56,49.75 96.56,70" fill="var(--paper)"`,
		`points="127.44,70 148.56,70" stroke="var(--line-1)"`, ">two</text>",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("no %s in the drawing", want)
		}
	}
	if strings.Contains(text, "NaN") {
		t.Error("NaN in a drawing")
	}
	if strokes := strings.Count(text, `stroke="var(--line-2)" stroke-width="0.8"`); strokes < 8 {
		t.Errorf("%d strokes in a slanted face", strokes)
	}
}
