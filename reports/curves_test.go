package reports

import (
	"bytes"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func someCurves() *Curves {
	return &Curves{
		Title: "Path to <Skerry Point>", Lines: []string{"exceeded for 1 % of an average year"}, Warnings: []string{"rain is missing"},
		X: Axis{Name: "elevation", Unit: "deg", Values: []float64{5, 30, 90}, Decimals: 1},
		Charts: []CurveChart{{ID: "attenuation", Title: "Attenuation", Caption: "Attenuation over elevation.", Quantity: "attenuation", Unit: "dB",
			Curves: []Curve{{"total", []float64{9, 3, 1.5}}, {"rain", []float64{4, math.NaN(), 0.5}}}}},
		Notes: []Note{{Kind: Default, Text: "no wet refractivity is stated"}},
	}
}

// The page holds what it was given: escaped, with a gap where there is no value, and
// the warning at its head.
func TestCurvesPage(t *testing.T) {
	page, err := CurvesPage(someCurves())
	if err != nil {
		t.Fatal(err)
	}
	text := string(page)
	for _, want := range []string{"<h1>Path to &lt;Skerry Point&gt;</h1>", "<li>rain is missing</li>", "<td>4.00</td>", "<td>–</td>", "no wet refractivity is stated"} {
		if !strings.Contains(text, want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	if strings.Index(text, "rain is missing") > strings.Index(text, "Numbers of this drawing") {
		t.Error("the warning stands behind the charts")
	}
	var data struct {
		Drawings []struct {
			ID, Kind string
			Option   struct {
				Series []struct{ Data [][]*float64 }
			}
		}
	}
	if err := json.Unmarshal(drawingsOf(t, page), &data); err != nil {
		t.Fatal(err)
	}
	d := data.Drawings[0]
	if d.ID != "attenuation" || d.Kind != "curve" || len(d.Option.Series) != 2 || *d.Option.Series[0].Data[1][1] != 3 || d.Option.Series[1].Data[1][1] != nil {
		t.Errorf("drawing %+v", d)
	}
	again, err := CurvesPage(someCurves())
	if err != nil || !bytes.Equal(page, again) {
		t.Errorf("the second page differs, %v", err)
	}
	short := someCurves()
	short.Charts[0].Curves[0].Values = short.Charts[0].Curves[0].Values[:2]
	if _, err := CurvesPage(short); err == nil {
		t.Error("two values for three points were drawn")
	}
}

// The chart is drawn by a browser, and its lines have as many names.
func TestCurvesPageDraws(t *testing.T) {
	if chartScript().code == "" {
		t.Skip("no chart script is embedded")
	}
	page, err := CurvesPage(someCurves())
	if err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(t.TempDir(), "curves.html")
	if err := os.WriteFile(file, page, 0o644); err != nil {
		t.Fatal(err)
	}
	ctx := browser(t)
	seen := observe(t, ctx)
	show(t, ctx, "file://"+file, screen{width: 1440, scheme: "light"})
	texts := ask[string](t, ctx, `Array.from(document.querySelectorAll('#attenuation svg text')).map(function (t) { return t.textContent; }).join('|')`)
	if len(seen.Said()) > 0 {
		t.Errorf("the page says %q", seen.Said())
	}
	for _, want := range []string{"attenuation, dB", "total", "rain", "elevation, deg"} {
		if !strings.Contains("|"+texts+"|", "|"+want+"|") {
			t.Errorf("the drawing says %q, without %q", texts, want)
		}
	}
}

// Few lines are told apart by their dashes, many by symbols too.
func TestCurvesDifferWithoutColour(t *testing.T) {
	for count := 2; count <= len(looks); count++ {
		c := someCurves()
		c.Charts[0].Curves = nil
		for i := range count {
			c.Charts[0].Curves = append(c.Charts[0].Curves, Curve{string(rune('a' + i)), []float64{1, 2, 3}})
		}
		js, err := json.Marshal(c.draw(&c.Charts[0]))
		if err != nil {
			t.Fatal(err)
		}
		var d struct {
			Option struct {
				Series []struct {
					Symbol    string
					LineStyle struct{ Type string }
				}
			}
		}
		if err := json.Unmarshal(js, &d); err != nil {
			t.Fatal(err)
		}
		seen := map[string]bool{}
		for _, s := range d.Option.Series {
			seen[s.LineStyle.Type+" "+s.Symbol] = true
			if count <= 3 && s.Symbol != "none" {
				t.Errorf("%d lines have symbols", count)
			}
		}
		if len(seen) != count {
			t.Errorf("%d lines have %d looks", count, len(seen))
		}
	}
}
