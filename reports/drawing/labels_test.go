package drawing

import (
	"flag"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "write the golden files anew")

// words is a canvas that keeps the fields of its words.
type words struct {
	*SVG
	fields []field
	texts  []string
}

func (w *words) Write(t Text) {
	wide := w.Width(t.Text, t.Size)
	left := t.At.X - [...]float64{Start: 0, Middle: 0.5, End: 1}[t.Align]*wide
	w.fields = append(w.fields, field{left, t.At.Y - 0.75*t.Size, left + wide, t.At.Y})
	w.texts = append(w.texts, t.Text)
	w.SVG.Write(t)
}

// covered returns two words of which one lies on the other.
func (w *words) covered() string {
	for i, f := range w.fields {
		for k, g := range w.fields[:i] {
			if f.over(g) > 2 {
				return w.texts[k] + " and " + w.texts[i]
			}
		}
	}
	return ""
}

func testSky(from, step, sun, moon float64) *Sky {
	s := &Sky{}
	for k := range 5 {
		s.Track = append(s.Track, Place{math.Mod(from+float64(k)*step, 360), []float64{5, 25, 50, 25, 5}[k]})
	}
	for i, name := range []string{"AOS", "culmination", "LOS"} {
		s.Events = append(s.Events, Event{At: s.Track[2*i], Symbol: [...]Symbol{Triangle, Circle, Square}[i], Lines: []string{name, "13:46:43"}})
	}
	s.Events = append(s.Events, Event{At: Place{sun, 32}, Symbol: Ring, Lines: []string{"Sun"}}, Event{At: Place{moon, 6}, Symbol: Diamond, Lines: []string{"Moon"}})
	return s
}

func TestNoWordOfTheSkyCoversAnother(t *testing.T) {
	covered, all := 0, 0
	for from := 0.0; from < 360; from += 24 {
		for _, step := range []float64{4, 20, 45, -30} {
			for _, moon := range []float64{0, 60, 158, 250} {
				c := &words{SVG: NewSVG(245, 200)}
				testSky(from, step, math.Mod(moon+100, 360), moon).Draw(c, 245, 200)
				if len(c.texts) < 12 {
					t.Fatalf("only %d words: %q", len(c.texts), c.texts)
				}
				all++
				if two := c.covered(); two != "" {
					covered++
					t.Logf("from %g by %g, Moon at %g: %s", from, step, moon, two)
				}
			}
		}
	}
	if covered > 0 {
		t.Errorf("words cover each other in %d of %d skies", covered, all)
	}
}

func testMap() *Map {
	at := func(r, az float64) Point { s, c := math.Sincos(az * math.Pi / 180); return Point{r * s, -r * c} }
	var circle []Point
	for az := 0.0; az <= 360; az += 10 {
		circle = append(circle, at(0.8, az))
	}
	return &Map{Land: [][]Point{{{-0.5, -0.5}, {0.2, -0.6}, {0.3, 0.4}, {-0.4, 0.5}}, {{-0.2, -0.2}, {0.1, -0.2}, {0, 0.1}}},
		Night: [][]Point{{{0.4, -2}, {2, -2}, {2, 2}, {0.4, 2}}}, Grid: [][]Point{{{-1, 0}, {1, 0}}}, Reached: [][]Point{circle},
		Track: [][]Point{{at(0.8, 20), at(0.4, 60), at(0.8, 120)}}, Beside: [][]Point{{at(0.8, 20), at(1.1, 10)}},
		Events: []MapEvent{{At: at(0.8, 20), Symbol: Triangle, Lines: []string{"AOS", "10:00:00"}}, {At: at(0.4, 60), Symbol: Circle, Lines: []string{"culmination"}}, {At: at(0.8, 120), Symbol: Square}}}
}

// drawings are one of each kind with every kind of mark.
func drawings() map[string]func(c Canvas, w, h float64) {
	over := []float64{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10}
	lines := &Lines{X: NewAxis("time, s", 0, 10, true), Left: NewAxis("power, dBm", -12, 3, false), Hatched: []Span{{From: 0, To: 2}}, Marked: []Span{{From: 4, To: 8, Label: "fast"}}}
	right := NewLogAxis("rate, bit/s", 100, 10000)
	lines.Right = &right
	for i := range 4 {
		one := Line{Name: []string{"sum", "<part> & \"more\"", "third", "rate"}[i], X: over, Dash: [][]float64{nil, Dashed, Dotted, Dashed}[i], Symbol: []Symbol{NoSymbol, Ring, OpenSquare, OpenDiamond}[i], Tone: Tone(i % 2 * int(First)), Width: 1, Right: i == 3}
		for k := range over {
			one.Y = append(one.Y, []float64{float64(k) - 9, 2 - float64(k), -5, 100 * float64(k+1)}[i])
		}
		lines.Lines = append(lines.Lines, one)
	}
	lines.Lines[1].Y[4] = math.NaN()
	overview := &Overview{X: NewAxis("UTC", 0, 24, true), Rows: []string{"A station of a name that is far too long for its row in a chart", "B"},
		Kinds: []Kind{{"closes", Circle, First}, {"does not", OpenTriangle, Soft}}, Dots: []Dot{{3, 0, Circle, First}, {7, 1, OpenTriangle, Soft}}}
	return map[string]func(c Canvas, w, h float64){"lines": lines.Draw, "sky": testSky(30, 30, 200, 100).Draw, "map": testMap().Draw, "overview": overview.Draw}
}

func TestGoldenDrawings(t *testing.T) {
	for name, draw := range drawings() {
		c := NewSVG(260, 180)
		draw(c, 260, 180)
		got := strings.ReplaceAll(string(c.Bytes("a drawing")), "><", ">\n<") + "\n"
		if strings.Contains(got, "NaN") || strings.Contains(got, "Inf") {
			t.Errorf("%s: a number that does not exist", name)
		}
		file := filepath.Join("testdata", name+".svg.golden")
		if *update {
			if err := os.WriteFile(file, []byte(got), 0o666); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if got != string(want) {
			g, w := strings.Split(got, "\n"), strings.Split(string(want), "\n")
			for i := range g {
				if i >= len(w) || g[i] != w[i] {
					t.Errorf("%s differs from line %d on:\ngot  %s\nrun go test ./reports/drawing -update when it should, and read the difference", file, i+1, g[i])
					break
				}
			}
		}
	}
}

func BenchmarkDrawings(b *testing.B) {
	for name, draw := range drawings() {
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				c := NewSVG(260, 180)
				draw(c, 260, 180)
			}
		})
	}
}
