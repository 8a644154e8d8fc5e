package drawing

import (
	"math"
	"strings"
	"testing"
)

func TestAxesHoldTheirValuesBetweenRoundEnds(t *testing.T) {
	for _, r := range []struct{ least, greatest, from, to float64 }{
		{-1, 11.8, -5, 15}, {-171.2, 171.9, -200, 200}, {0.01, 0.034, 0.01, 0.035}, {5, 5, 4, 6}, {0, 44.4, 0, 50},
	} {
		a := NewAxis("x", r.least, r.greatest, false)
		if math.Abs(a.From-r.from) > 1e-9 || math.Abs(a.To-r.to) > 1e-9 {
			t.Errorf("%g to %g: axis from %g to %g, want %g to %g", r.least, r.greatest, a.From, a.To, r.from, r.to)
		}
		if n := len(a.Ticks); n < 3 || n > 8 || a.Ticks[0].At > a.From+1e-9 || a.Ticks[n-1].At < a.To-1e-9 {
			t.Errorf("%g to %g: ticks %v", r.least, r.greatest, a.Ticks)
		}
	}
}

func TestLabels(t *testing.T) {
	for _, r := range []struct {
		v        float64
		decimals int
		want     string
	}{{-0.04, 1, "0.0"}, {-5, 0, "−5"}, {0.25, 2, "0.25"}} {
		if got := label(r.v, r.decimals); got != r.want {
			t.Errorf("label(%g, %d) = %q, want %q", r.v, r.decimals, got, r.want)
		}
	}
}

func TestLogAxis(t *testing.T) {
	a := NewLogAxis("x", 20, 4000)
	if a.From != 10 || a.To != 10000 || math.Abs(a.place(100)-1.0/3) > 1e-12 || !math.IsInf(a.place(0), -1) {
		t.Errorf("axis %v, place of 100 %g, of 0 %g", a, a.place(100), a.place(0))
	}
}

// TestALonePointIsSeen: a value between gaps has no line, and is drawn as a dot.
func TestALonePointIsSeen(t *testing.T) {
	none := math.NaN()
	for _, r := range []struct {
		values []float64
		dots   int
	}{{[]float64{1, none, 2, none, 3}, 3}, {[]float64{1, 2, none, 3}, 1}, {[]float64{1, 2, 3}, 0}, {[]float64{none, none}, 0}} {
		l := Lines{X: NewAxis("x", 0, 4, true), Left: NewAxis("y", 0, 4, true), Lines: []Line{{X: []float64{0, 1, 2, 3, 4}[:len(r.values)], Y: r.values, Width: 1}}}
		c := NewSVG(200, 100)
		l.Draw(c, 200, 100)
		if got := strings.Count(string(c.Bytes("")), "<circle"); got != r.dots {
			t.Errorf("%v: %d dots, want %d", r.values, got, r.dots)
		}
	}
}
