package reports

import (
	"html"
	"math"
	"strings"
	"testing"
	"time"
)

// basisFixture is the basis of invented pages.
func basisFixture() Basis {
	epoch := firstAOS.Add(-31 * time.Hour)
	return Basis{Scenario: "trial.yaml", Program: "v0", Orbits: []BasisOrbit{{Spacecraft: "Wagtail 1", Orbit: "element set 99001 of elements.tle", Epoch: epoch, AgeFrom: 30 * time.Hour, AgeTo: 102 * time.Hour}},
		Models:   []BasisModel{{"orbit", "SGP4"}, {"gases", "Rec. ITU-R P.676-13, P.835-6"}},
		Defaults: []Note{{Kind: Default, About: "earth", Text: "UT1 is taken as UTC."}}}
}

func comparisonFixture() *Comparison {
	none := math.NaN()
	at := func(h float64) time.Time { return firstAOS.Add(time.Duration(h * float64(time.Hour))) }
	c := &Comparison{Title: "What changes", Names: [2]string{"a.yaml", `b</title><script>alert(1)</script>.yaml`}, Answer: "2 passes before, 2 after.",
		From: firstAOS.Add(-time.Hour), To: firstAOS.Add(23 * time.Hour), Basis: [2]Basis{basisFixture(), basisFixture()}, Uplink: true, Files: []string{"c.csv", "c.json"},
		Passes: []ComparedPass{
			{Spacecraft: "Wagtail 1", Station: "Skerry Point", Change: "moved", AOS: [2]time.Time{at(0), at(0.01)}, LOS: [2]time.Time{at(0.1), at(0.11)}, AOSShift: 36, LOSShift: 36,
				PlusMinus: [2]float64{18, none}, MaxElevationDeg: [2]float64{30, 31}, MarginDB: [2]float64{3, 6.01}, Bytes: [2]float64{4e6, 5e6}, UplinkMarginDB: [2]float64{10, 9}},
			{Spacecraft: "Wagtail 1", Station: "Skerry Point", Change: "gone", AOS: [2]time.Time{at(2), {}}, LOS: [2]time.Time{at(2.1), {}}, AOSShift: none, LOSShift: none,
				PlusMinus: [2]float64{none, none}, MaxElevationDeg: [2]float64{12, none}, MarginDB: [2]float64{-2, none}, Bytes: [2]float64{0, none}, UplinkMarginDB: [2]float64{none, none}},
		},
		Totals:  []ComparedTotal{{Passes: [2]int{2, 1}, Contact: [2]time.Duration{12 * time.Minute, 6 * time.Minute}, Bytes: [2]float64{4e6, 5e6}, MarginChangeDB: 3.01}},
		Differs: []Difference{{"horizon", "", "apparent"}, {"stations[<b>].altitude_m", "42", "45"}},
	}
	c.Basis[1].Orbits[0].AgeFrom = -time.Hour
	c.Basis[1].Defaults = append(c.Basis[1].Defaults, Note{Kind: Default, Text: "only after"})
	return c
}

func TestComparisonPage(t *testing.T) {
	out, err := ComparisonPage(comparisonFixture())
	if err != nil {
		t.Fatal(err)
	}
	page := html.UnescapeString(string(out))
	if strings.Contains(string(out), "<script") || strings.Contains(string(out), "<b>]") || strings.Contains(page, "NaN") {
		t.Error("a name breaks out of the page, or a number that is none stands on it")
	}
	for _, want := range []string{
		"<td>2 → 1</td>", "+1.00 MB", ">+3.01<", "↦", "+36.000", "±18.0 s before", "3.0 → 6.0<small>+3.0", "10.0 → 9.0<small>−1.0",
		"−2.0 → –", "30.0 h to 4.3 days old", "1.0 h ahead to 4.3 days", "apparent", "Only after", `href="#granted-title"`, "Wagtail 1, before:",
		"Volume of each pass, Wagtail 1", "Shift of AOS, Wagtail 1", "Greatest margin of the uplink, Wagtail 1",
	} {
		if !strings.Contains(page, want) {
			t.Errorf("no %q on the page", want)
		}
	}
}

// Without a link there are no charts of volume and margin, and without a window no page.
func TestComparisonPageOfPassesAlone(t *testing.T) {
	c := comparisonFixture()
	none := [2]float64{math.NaN(), math.NaN()}
	for i := range c.Passes {
		c.Passes[i].Bytes, c.Passes[i].MarginDB, c.Passes[i].UplinkMarginDB = none, none, none
	}
	c.Uplink = false
	out, err := ComparisonPage(c)
	if err != nil {
		t.Fatal(err)
	}
	for _, word := range []string{"Volume of each pass", "margin of each pass", "<th scope=\"col\">volume</th>"} {
		if strings.Contains(string(out), word) {
			t.Errorf("%q on a page without a link", word)
		}
	}
	c.To = c.From
	if _, err := ComparisonPage(c); err == nil {
		t.Error("a comparison without a length is made")
	}
}

func TestChangesHaveTheirSign(t *testing.T) {
	for _, c := range []struct {
		v    float64
		want string
	}{{0.0004, "0.000"}, {-0.0004, "0.000"}, {0.0006, "+0.001"}, {-2, "−2.000"}, {math.NaN(), "–"}} {
		if got := changeBy(c.v, 3); got != c.want {
			t.Errorf("changeBy(%v) = %q, want %q", c.v, got, c.want)
		}
	}
}
