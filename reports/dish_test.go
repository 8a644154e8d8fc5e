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

func someDish() *Dish {
	chart := CurveChart{ID: "bytes", Title: "Bytes a day", Caption: "Bytes over the diameter.", Quantity: "bytes a day", Unit: "GB",
		Curves: []Curve{{"mean", []float64{1, 2, 4}}, {"required", []float64{3, 3, 3}}}, Mark: &Mark{"least that meets all", 2.5}}
	return &Dish{
		Title: "Which dish for <Wagtail 1>", Answer: "No, the dish does not suffice.", Lines: []string{"The least is 2.5 m."}, Warnings: []string{"no rain is stated"},
		Requirements: []DishRequirement{{Name: "bytes a day", Required: "3 GB", Reached: "1 GB", Binds: true, Least: "2.50 m", Greatest: "9.00 m"}},
		Charts:       []Curves{{X: Axis{Name: "diameter", Unit: "m", Values: []float64{1, 2, 3}, Decimals: 1}, Charts: []CurveChart{chart}}},
		Costs:        []DishCost{{"1 dB less power", -4e8, "−400 MB", "+22 cm"}, {"1 K more noise", -1e8, "−100 MB", "+4 cm"}},
		Chances:      []DishChance{{"90 %", "2.90 m"}}, ChanceText: "It meets all with 48 %.",
		Limits: []DishLimits{{"yours, 3.70 m", []DishLimit{{"least transmit power", "3 dBW", "just met"}}}}, Files: []DishFile{{"trade.csv", "the curve"}},
		Notes: []Note{{Kind: Assumption, Text: "a kept orbit"}},
	}
}

func TestDishPage(t *testing.T) {
	page, err := DishPage(someDish())
	if err != nil {
		t.Fatal(err)
	}
	text := string(page)
	at := 0
	for _, want := range []string{ // in this order
		"<h1>Which dish for &lt;Wagtail 1&gt;</h1>", "No, the dish does not suffice.", "no rain is stated", "(binds)", "✗ no", "Numbers of this drawing",
		`style="--share:100.0%">−400 MB`, `style="--share:25.0%">−100 MB`, "It meets all with 48 %.", "2.90 m", "yours, 3.70 m", "least transmit power", `href="trade.csv"`, "a kept orbit", "Structure.", "Moving mounts.",
	} {
		i := strings.Index(text[at:], want)
		if i < 0 {
			t.Fatalf("the page lacks %q behind what stands in front of it", want)
		}
		at += i
	}
	var data struct {
		Drawings []struct {
			Option struct {
				Series []struct {
					Name string
					Data [][]float64
				}
			}
		}
	}
	if err := json.Unmarshal(drawingsOf(t, page), &data); err != nil {
		t.Fatal(err)
	}
	// The mark stands upright from the least to the greatest value.
	series := data.Drawings[0].Option.Series
	if m := series[len(series)-1]; len(series) != 3 || m.Name != "least that meets all" || m.Data[0][0] != 2.5 || m.Data[0][1] != 1 || m.Data[1][0] != 2.5 || m.Data[1][1] != 4 {
		t.Errorf("%+v", series)
	}
	again, err := DishPage(someDish())
	if err != nil || !bytes.Equal(page, again) {
		t.Errorf("the second page differs, %v", err)
	}
	short := someDish()
	short.Charts[0].Charts[0].Curves[0].Values = []float64{1}
	if _, err := DishPage(short); err == nil {
		t.Error("one value for three points was drawn")
	}
	bad := someDish()
	bad.Charts[0].Charts[0].Mark.At = math.Inf(1)
	if page, err := DishPage(bad); err == nil && bytes.Contains(drawingsOf(t, page), []byte("Inf")) {
		t.Error("an infinite place stands in the drawing")
	}
}

func TestDishPageDraws(t *testing.T) {
	if chartScript().code == "" {
		t.Skip("no chart script is embedded")
	}
	page, err := DishPage(someDish())
	if err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(t.TempDir(), "dish.html")
	if err := os.WriteFile(file, page, 0o644); err != nil {
		t.Fatal(err)
	}
	ctx := browser(t)
	seen := observe(t, ctx)
	show(t, ctx, "file://"+file, screen{width: 375, scheme: "dark"})
	texts := ask[string](t, ctx, `Array.from(document.querySelectorAll('#bytes svg text')).map(function (t) { return t.textContent; }).join('|')`)
	if len(seen.Said()) > 0 {
		t.Errorf("the page says %q", seen.Said())
	}
	for _, want := range []string{"bytes a day, GB", "mean", "required", "least that meets all", "diameter, m"} {
		if !strings.Contains("|"+texts+"|", "|"+want+"|") {
			t.Errorf("the drawing says %q, without %q", texts, want)
		}
	}
	if wide := ask[float64](t, ctx, `document.documentElement.scrollWidth`); wide > 375 {
		t.Errorf("the page is %g px wide on a screen of 375", wide)
	}
}
