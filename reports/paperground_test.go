package reports

import (
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
	vector "slantwise/reports/drawing"
)

// wholePass is a pass with everything that a paper can show.
func wholePass() *Pass {
	s := basicShape()
	s.sky = true
	p := fixturePass(s)
	p.Ground = groundOf(p)
	p.Ground.Sky = []SkyBody{{"Sun", 207, 32}, {"Moon", 156, -6}}
	p.Radio.Sights = []Sight{sightAt(60, 0), sightAt(30, 20)}
	n := len(p.Profile.Seconds)
	lost := downlink.Interval{From: s.aos.Add(60 * time.Second), To: s.aos.Add(75 * time.Second)}
	p.Radio.Mount = &Mount{LowerAxis: "azimuth", UpperAxis: "elevation", StartLowerDeg: 12.5, EndLowerDeg: 190.25, GreatestLowerDegS: 8.75, GreatestUpperDegS: 1.5,
		ToleranceDeg: 0.125, LargestErrorDeg: 3.5, Lost: []downlink.Interval{lost}, LostSeconds: 15, UnplannedS: 41.5, LostModeBytes: 7.5e6,
		Slews: []MountSlew{{lost, true}}, LowerDeg: constant(1, n), UpperDeg: constant(2, n), ErrorDeg: constant(0, n)}
	return p
}

func TestPaperHasMapSightsAndMount(t *testing.T) {
	p := wholePass()
	text := strings.Join(strings.Fields(tool(t, onePaper(t, p), "pdftotext", "-layout", "FILE", "-")), " ")
	for _, want := range []string{
		"Over the ground", groundText(p), "The Sun stands at azimuth 207 deg, elevation 32 deg", "The Moon stands 6 deg under the horizon.",
		"How the antenna sees the station", ": 60.0°", ": 30.0°", "The Sun is in the beam", "The Moon does not come into the beam.",
		"It does not follow 15.0 s of the pass within 0.125°", "7.50 MB of the mode are lost by it", "would lose 41.5 s.",
		"from 12.5° to 190.3°", "at 8.75 °/s at most", "turns over,", "The error reaches 3.50°.", "keep clear of it",
		"element set of " + dayClock(p.Elements.Epoch) + " UTC, 31.0 h old at AOS",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("the PDF lacks %q", want)
		}
	}
}

// TestSketchOfSightIsTrue holds the lines without script against the angle that they show.
func TestSketchOfSightIsTrue(t *testing.T) {
	for _, c := range [][2]float64{{60, 0}, {30, 20}, {70, -45}, {143, -76}} {
		s := sightAt(c[0], c[1])
		var lines [][]vector.Point
		s.draw(&lineKeeper{vector.NewSVG(260, 190), &lines}, 260, 190)
		way := func(l []vector.Point) float64 { return math.Atan2(l[1].Y-l[0].Y, l[1].X-l[0].X) }
		if got := math.Abs(math.Remainder(way(lines[1])-way(lines[0]), 2*math.Pi)); math.Abs(unit.Angle(got).Degrees()-c[0]) > 1e-6 {
			t.Errorf("%v: the lines enclose %.4f deg", c, unit.Angle(got).Degrees())
		}
		arc := lines[2]
		if len(arc) != 25 || math.Abs(math.Hypot(arc[0].X-lines[0][0].X, arc[0].Y-lines[0][0].Y)-sightArc) > 1e-6 {
			t.Errorf("%v: arc of %d points from %v", c, len(arc), arc[0])
		}
	}
}

// lineKeeper keeps the lines that are drawn.
type lineKeeper struct {
	*vector.SVG
	lines *[][]vector.Point
}

func (k *lineKeeper) Line(points []vector.Point, s vector.Stroke) {
	*k.lines = append(*k.lines, points)
}

// TestOddNamesOnPaper: names are whatever a scenario says.
func TestOddNamesOnPaper(t *testing.T) {
	for _, name := range []string{"x" + strings.Repeat("veryLong", 40), "ground\x07station\x00", "תחנה 7", "🛰️ relay", "क्ष", "a\nb", "%s %d <>&\"(\\", strings.Repeat("many words of a long name ", 30), ""} {
		s := basicShape()
		s.spacecraft = name
		site := *s.site
		site.Name = name
		s.site = &site
		pdf := onePaper(t, fixturePass(s))
		text := tool(t, pdf, "pdftotext", "-layout", "FILE", "-")
		if !strings.Contains(text, "Link budget") || !strings.Contains(text, "page 1 of ") {
			t.Errorf("%q: the paper is not whole", name)
		}
		if lacks := strings.ContainsAny(name, "क\x07"); lacks != strings.Contains(text, "An empty box stands") {
			t.Errorf("%q: boxes are told: %v", name, !lacks)
		}
		if lacks := strings.Contains(name, "🛰"); lacks != strings.Contains(text, "stands for a letter that this document cannot hold: U+1F6F0.") {
			t.Errorf("%q: the sign for other letters is told: %v", name, !lacks)
		}
	}
}
