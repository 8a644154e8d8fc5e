package reports

import (
	"context"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
)

// measuredPass is a fixture pass with a log of it: C/N0 1.5 dB low, a dropout, samples before
// the pass; and a frequency without a prediction in its middle.
func measuredPass() *Pass {
	s := basicShape()
	s.miss, s.half, s.power = 1100, 45, -104.6
	p := fixturePass(s)
	m := Measured{Number: 3, Source: "monday.csv", Note: "light <wind>", Elements: "element set 99001", Link: "X-band to dish, mode fast", Added: firstAOS.Add(time.Hour),
		PredictedBytes: 40e6, TakenBytes: 31e6, HasLock: true, Locked: []downlink.Interval{{From: firstAOS, To: firstAOS.Add(80 * time.Second)}}}
	level := MeasuredQuantity{Key: "cn0_dbhz", Title: "C/N0", Unit: "dBHz", DifferenceUnit: "dB",
		Figures: []MeasuredFigure{{By: "alone", Name: "bias", Unit: "dB", Value: -1.5, Span: 0.08, Samples: 42, Outliers: 1}, {By: "elevation", Name: "slope by elevation", Unit: "dB per 10 deg", Value: 0.2, Span: 0.3, Samples: 42}}}
	tone := MeasuredQuantity{Key: "frequency_hz", Title: "Received frequency", Unit: "Hz", DifferenceUnit: "Hz", Base: 8180e6, BaseText: "the carrier of 8180 MHz"}
	for i := -2; i <= 88; i += 2 {
		at, state := p.Pass.AOS.Add(time.Duration(i)*time.Second), usedState
		predicted, measured := math.NaN(), 60.0
		if i >= 0 {
			predicted = p.Profile.CN0DBHz[i]
			measured = predicted - 1.5 + 0.1*math.Sin(float64(i))
		} else {
			state = "outside any pass"
		}
		if i == 40 {
			measured, state = measured-20, "dropout"
		}
		level.Times, level.States = append(level.Times, at), append(level.States, state)
		level.Measured, level.Predicted, level.Difference = append(level.Measured, measured), append(level.Predicted, predicted), append(level.Difference, measured-predicted)
		if i < 0 {
			continue
		}
		f := 8180e6 + p.Profile.DopplerHz[i]
		tone.Times, tone.States = append(tone.Times, at), append(tone.States, usedState)
		tone.Measured, tone.Predicted, tone.Difference = append(tone.Measured, f+120), append(tone.Predicted, f), append(tone.Difference, 120)
	}
	m.Quantities = []MeasuredQuantity{level, tone}
	p.Measured = []Measured{m}
	return p
}

func measuredReport() *Report {
	p := measuredPass()
	return &Report{Title: "Field trial", From: firstAOS.Truncate(time.Hour), To: firstAOS.Add(time.Hour), Keys: []Key{{Spacecraft: p.Spacecraft, Station: p.Site.Name, AOS: p.Pass.AOS}},
		Load: func(context.Context, int) (*Pass, error) { return measuredPass(), nil }}
}

const measuredStem = "passes/wagtail-1-skerry-point-20260310t104231z"

// measuredPart cuts the part about measurements out of a page.
func measuredPart(t *testing.T, page string) string {
	t.Helper()
	_, rest, found := strings.Cut(page, `<section aria-labelledby="measured-title"`)
	if !found {
		t.Fatal("the page has no part about measurements")
	}
	part, _, _ := strings.Cut(rest, "</section>")
	return part
}

func TestMeasuredGolden(t *testing.T) {
	files := rendered(t, measuredReport(), Options{}, stubScript)
	compareGolden(t, []byte(measuredPart(t, string(files[measuredStem+".html"]))), "measured.html")
	compareGolden(t, files[measuredStem+measuredSuffix], "measured.csv")
}

// TestMeasuredNumbersAgree holds JSON, CSV, page and PDF against each other.
func TestMeasuredNumbersAgree(t *testing.T) {
	p := measuredPass()
	files := rendered(t, measuredReport(), Options{PDF: true}, stubScript)
	var got struct {
		Measured []struct {
			Taken      float64 `json:"taken_bytes"`
			Locked     []any
			Quantities []struct {
				Quantity             string
				UTC, State           []string
				Measured, Difference []*float64
			}
		}
	}
	if err := json.Unmarshal(files[measuredStem+".json"], &got); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(strings.NewReader(string(files[measuredStem+measuredSuffix]))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	row := rows[1:]
	for k, q := range got.Measured[0].Quantities {
		want := &p.Measured[0].Quantities[k]
		for i := range q.UTC {
			if row[0][1] != q.UTC[i] || row[0][2] != q.Quantity || row[0][6] != q.State[i] || math.Abs(*q.Measured[i]-want.Measured[i]) > 6e-4 {
				t.Fatalf("row %v, JSON %s %v, put in %g", row[0], q.UTC[i], *q.Measured[i], want.Measured[i])
			}
			if exists := q.Difference[i] != nil; exists != finite(want.Difference[i]) || exists == (row[0][5] == "") {
				t.Errorf("difference at %s: JSON %v, CSV %q, put in %g", q.UTC[i], q.Difference[i], row[0][5], want.Difference[i])
			}
			row = row[1:]
		}
	}
	if len(row) > 0 || got.Measured[0].Taken != 31e6 || len(got.Measured[0].Locked) != 1 {
		t.Errorf("%d rows of the CSV are left, taken %g, locked %v", len(row), got.Measured[0].Taken, got.Measured[0].Locked)
	}
	text := strings.Join(strings.Fields(tool(t, files[measuredStem+".pdf"], "pdftotext", "-layout", "FILE", "-")), " ")
	page := measuredPart(t, string(files[measuredStem+".html"]))
	for _, want := range []string{"measured less predicted −1.50 ± 0.08 dB", "Taken 31.0 MB of 40.0 MB predicted (77.5 %)", "In lock 10:42:31 to 10:43:51 UTC, 1 min 20 s in all", "2 of 46 samples do not count"} {
		if !strings.Contains(text, want) {
			t.Errorf("the PDF lacks %q", want)
		}
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	if !strings.Contains(page, "light &lt;wind&gt;") || strings.Contains(page, "<wind>") {
		t.Error("the remark is not escaped")
	}
}

// TestNothingMeasuredChangesNothing: a pass without a log has no word of logs.
func TestNothingMeasuredChangesNothing(t *testing.T) {
	for name, content := range rendered(t, fixtureReport(2), Options{}, stubScript) {
		if strings.Contains(string(content), "easured-") || strings.Contains(name, "measured") || strings.Contains(string(content), `"measured":[`) {
			t.Errorf("%s speaks of measurements", name)
		}
	}
}

func TestMeasuredColumnsOfOtherLengthsAreRefused(t *testing.T) {
	p := measuredPass()
	p.Measured[0].Quantities[0].States = p.Measured[0].Quantities[0].States[1:]
	if err := checkPass(p); err == nil || !strings.Contains(err.Error(), "cn0_dbhz") {
		t.Errorf("error %v", err)
	}
}

// TestMeasuredInTheBrowser: drawings within the narrowest screen, without a word on the console.
func TestMeasuredInTheBrowser(t *testing.T) {
	ctx := browser(t)
	root := toDisk(t, measuredReport(), Options{Static: true}, script{})
	said := observe(t, ctx)
	for _, s := range []screen{{375, "light"}, {1440, "dark"}} {
		show(t, ctx, root+measuredStem+".html", s)
		if n := ask[int](t, ctx, `document.querySelectorAll('.measured .still > svg').length`); n != 4 {
			t.Errorf("%d px: %d drawings, want 4", s.width, n)
		}
		if wide := ask[int](t, ctx, `document.documentElement.scrollWidth`); wide > int(s.width) {
			t.Errorf("%d px wide on a screen of %d", wide, s.width)
		}
	}
	said.Quiet(t, "file://")
}
