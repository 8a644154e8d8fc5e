package reports

import (
	"bytes"
	"fmt"
	"strings"
	"testing"
	"time"

	vector "slantwise/reports/drawing"
)

func someBasis(c Caution) Basis {
	day := 24 * time.Hour
	return Basis{Scenario: "rehearsal", Program: "1.2.3", Caution: c, Models: []BasisModel{{"rain", "Rec. ITU-R P.618-14"}},
		Orbits:   []BasisOrbit{{Spacecraft: "Pipit 2", Orbit: "element set 99002", Epoch: firstAOS, AgeFrom: 2 * day, AgeTo: 3 * day}},
		Defaults: []Note{{Kind: Default, About: "station A", Text: "polarisation left out: circular"}}}
}

// wordsOf is the text of a paper in one line.
func wordsOf(t *testing.T, pdf []byte) string {
	t.Helper()
	return strings.Join(strings.Fields(tool(t, pdf, "pdftotext", "-layout", "FILE", "-")), " ")
}

func inOrder(t *testing.T, text string, want ...string) {
	t.Helper()
	at := 0
	for _, w := range want {
		i := strings.Index(text[at:], w)
		if i < 0 {
			t.Fatalf("%q is missing, or stands before %q", w, text[max(0, at-40):at])
		}
		at += i + len(w)
	}
}

func TestTimelineOnPaper(t *testing.T) {
	v := timelineFixture()
	v.Spacecraft[0], v.Basis = "Wagtail 1", someBasis(CautionPlan)
	v.Notes = []string{"the mount loses 14.6 s"}
	pdf, err := TimelinePaper(v)
	if err != nil {
		t.Fatal(err)
	}
	inOrder(t, wordsOf(t, pdf), "Contact plan", "2026-03-10 12:00:00 to 2026-03-11 12:00:00 UTC · scenario rehearsal", "Value 10: proven.",
		"Antennas over time", "A Wagtail 1, B Pipit 2", "Tuesday, 2026-03-10", "Wednesday, 2026-03-11", "2026-03-10 13:05:00", "1 234 567", "fixed; r1; UHF: 1 MB",
		"Volume by spacecraft", "Recorders", "of 4 GB", "Not taken, and why", "2026-03-10 13:10:00", "it serves one at a time", "one more contact is worth 5", "the mount loses 14.6 s",
		"polarisation left out", "Moving mounts.", "Pipit 2: element set 99002, epoch", "Rec. ITU-R P.618-14", CautionPlan.Text())
	inOrder(t, wordsOf(t, pdf), "slantwise 1.2.3", "page 1 of 2", "elements 2.0 days to 3.0 days old over the time of this document")
	again, err := TimelinePaper(v)
	if err != nil || !bytes.Equal(pdf, again) {
		t.Error("the same plan made another file")
	}
	v.To = v.From
	if _, err := TimelinePaper(v); err == nil {
		t.Error("a plan without length was taken")
	}
}

// TestLongPlanOnPaper: a list of contents with pages, a note on what is left out, antennas on more
// than one drawing.
func TestLongPlanOnPaper(t *testing.T) {
	v := timelineFixture()
	v.Spacecraft[0], v.Basis = "Wagtail 1", someBasis(CautionPlan)
	for i := range 30 {
		v.Antennas = append(v.Antennas, fmt.Sprintf("antenna %d", i))
	}
	for i := range 90 {
		c, w := v.Contacts[0], v.Windows[0]
		c.Antenna, w.Antenna, w.Why = i%31, i%31, strings.Repeat("because of a rule ", 20)
		v.Contacts, v.Windows = append(v.Contacts, c), append(v.Windows, w)
	}
	pdf, err := TimelinePaper(v)
	if err != nil {
		t.Fatal(err)
	}
	text := wordsOf(t, pdf)
	inOrder(t, text, "Contents", "Answer 1", "Antennas over time 1", "Contacts 5", "Volume", "Recorders", "Cautions", "Antennas over time", "antenna 29", "because of a rule because", "…", "31 more windows are not taken")
	if strings.Contains(text, strings.Repeat("because of a rule ", 9)) {
		t.Error("a reason is not cut")
	}
}

// TestStripsAreTrue: bars begin and end where the plan says, cut at the day's ends.
func TestStripsAreTrue(t *testing.T) {
	v := timelineFixture()
	first, second := v.strips(v.From.Truncate(24*time.Hour)), v.strips(v.From.Truncate(24*time.Hour).Add(24*time.Hour))
	text := func(bars []vector.Bar) (out string) {
		for _, b := range bars {
			out += fmt.Sprintf("%.3f to %.3f: %d %s\n", b.From, b.To, b.Kind, b.Label)
		}
		return out
	}
	got := text(first[0].Bars)
	want := text([]vector.Bar{
		{From: 13 + 1./6, To: 13 + 1./3, Kind: vector.LeftOut}, {From: 13, To: 13 + 1./12, Kind: vector.Around}, {From: 13.25, To: 13 + 16./60, Kind: vector.Around},
		{From: 13 + 1./12, To: 13.25, Kind: vector.Taken, Label: "A"}, {From: 23 + 5./6, To: 23 + 11./12, Kind: vector.Around},
		{From: 23 + 11./12, To: 24 + 1./12, Kind: vector.Held, Label: "B"}})
	if got != want {
		t.Errorf("the first day has\n%s, want\n%s", got, want)
	}
	if n := len(second[0].Bars); n != 3 {
		t.Errorf("the second day has %d bars: what is closed, the contact over midnight and its tear-down", n)
	}
}

func TestShortPlanIsDrawnOverItsOwnTime(t *testing.T) {
	day := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	for _, r := range []struct {
		from, to float64 // of the plan, hours
		want     string
	}{{12.1, 12.4, "12 to 13, 5 ticks, last 13:00"}, {20.5, 26, "20 to 24, 9 ticks, last 24:00"}, {1, 12.5, "1 to 13, 13 ticks, last 13:00"}, {0, 24, "0 to 24, 9 ticks, last 24:00"}} {
		v := Timeline{From: day.Add(time.Duration(r.from * float64(time.Hour))), To: day.Add(time.Duration(r.to * float64(time.Hour)))}
		a := v.hours(day)
		if got := fmt.Sprintf("%g to %g, %d ticks, last %s", a.From, a.To, len(a.Ticks), a.Ticks[len(a.Ticks)-1].Label); got != r.want {
			t.Errorf("a plan from %g to %g h: %s, want %s", r.from, r.to, got, r.want)
		}
	}
}

func sized() *Dish {
	d := someDish()
	d.Basis = someBasis(CautionSizing)
	return d
}

func TestDishOnPaper(t *testing.T) {
	pdf, err := DishPaper(sized(), firstAOS)
	if err != nil {
		t.Fatal(err)
	}
	inOrder(t, wordsOf(t, pdf), "Which dish for <Wagtail 1>", "No, the dish does not suffice.", "The least is 2.5 m.", "⚠ no rain is stated", "Contents", "What is required 1", "Cautions 2",
		"bytes a day 3 GB 1 GB ✗ no 2.50 m 9.00 m", "this one binds", "Trades", "mean", "required", "least that meets all", "1 dB less power −400 MB +22 cm", "It meets all with 48 %.", "90 % 2.90 m",
		"least transmit power 3 dBW just met", "a kept orbit", "Structure.", "What these numbers stand on", CautionSizing.Text())
	bad := someDish()
	bad.Charts[0].Charts[0].Curves[0].Values = nil
	if _, err := DishPaper(bad, firstAOS); err == nil {
		t.Error("a curve without values was taken")
	}
}

// TestScriptlessCurves: the same lines as the page with script, in the page.
func TestScriptlessCurves(t *testing.T) {
	c, d := someCurves(), someDish()
	c.Scriptless, d.Scriptless = true, true
	for name, page := range map[string]func() ([]byte, error){"curves": func() ([]byte, error) { return CurvesPage(c) }, "dish": func() ([]byte, error) { return DishPage(d) }} {
		out, err := page()
		if err != nil {
			t.Fatal(err)
		}
		text := string(out)
		if strings.Contains(text, "<script") || !strings.Contains(text, "script-src &#39;none&#39;") || strings.Count(text, `<svg xmlns="http://www.w3.org/2000/svg" role="img"`) != 1 {
			t.Errorf("%s: a script, no ban of scripts, or not one drawing", name)
		}
	}
	l := c.lines(&c.Charts[0])
	if l.X.From != 5 || l.X.To != 90 || len(l.Lines) != 2 || l.Lines[0].Y[2] != 1.5 || l.Left.From > 0.5 || l.Left.To < 9 {
		t.Errorf("the chart is %+v", l)
	}
	m := d.Charts[0].lines(&d.Charts[0].Charts[0])
	if last := m.Lines[len(m.Lines)-1]; last.Name != "least that meets all" || last.X[0] != 2.5 || last.X[1] != 2.5 {
		t.Errorf("the mark is %+v", last)
	}
}
