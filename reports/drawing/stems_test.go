package drawing

import (
	"math"
	"strings"
	"testing"
)

// Two sets at one place stand beside each other, each with its foot on zero; a value that
// does not exist has no mark.
func TestStemsStandOnZeroBesideEachOther(t *testing.T) {
	s := &Stems{X: NewAxis("UTC", 0, 10, true), Left: NewAxis("margin, dB", -10, 10, true), Sets: []StemSet{
		{Name: "before", Symbol: Ring, Tone: Second, Dash: Dotted, Stems: []Stem{{X: 5, Y: -5}, {X: 7, Y: math.NaN()}}},
		{Name: "after", Symbol: Circle, Tone: First, Stems: []Stem{{X: 5, Y: 10, Spread: 2}}},
	}}
	svg := NewSVG(200, 100)
	s.Draw(svg, 200, 100)
	text := string(svg.Bytes("stems"))
	// The field is 36 to 188 wide, so that 5 lies at 112, less and more 2; it is 29.5 to 70
	// high (the legend of one row stands at 21.5, and 8 are left), so that 0 lies in its middle.
	for _, want := range []string{`points="110,49.75 110,59.88" stroke="var(--line-2)"`, `points="114,49.75 114,29.5" stroke="var(--line-1)"`, `cx="110" cy="59.88"`, `cx="114" cy="29.5"`} {
		if !strings.Contains(text, want) {
			t.Errorf("no %s in the drawing", want)
		}
	}
	if n := strings.Count(text, "<circle"); n != 4 { // two, and two in the legend
		t.Errorf("%d marks, want 4", n)
	}
	if strings.Contains(text, "NaN") {
		t.Error("NaN in a drawing")
	}
}
