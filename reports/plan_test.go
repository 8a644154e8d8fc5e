package reports

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"
)

// plannedPass is the fixture with a plan of two modes and a silence between them.
func plannedPass() *Pass {
	p := fixturePass(basicShape())
	n := len(p.Profile.Seconds)
	at := func(s int) time.Time { return p.Profile.Start.Add(time.Duration(s) * time.Second) }
	plan := &Plan{
		Bytes: 60e6, Changes: 2, FreeBytes: 75e6, ShannonBytes: 600e6, ShareOfFree: 0.8, ShareOfShannon: 0.1, SingleMode: "safe", SingleBytes: 50e6,
		Steps: []PlanStep{
			{From: at(0), To: at(200), Mode: "safe", SymbolRate: 1.2e6, InformationRate: 1e6, NetRate: 0.96e6, LeastMarginDB: 3.4, Bytes: 24e6},
			{From: at(200), To: at(240), Mode: "silent", LeastMarginDB: math.NaN()},
			{From: at(240), To: at(600), Mode: "fast <1>", InformationRate: 4e6, NetRate: 3.8e6, LeastMarginDB: 3.1, Bytes: 36e6},
		},
	}
	for i := range n {
		rate, margin := 0.96e6, 5.0
		switch {
		case i >= 240:
			rate, margin = 3.8e6, 4
		case i >= 200:
			rate, margin = 0, math.NaN()
		}
		plan.RateBps, plan.MarginDB = append(plan.RateBps, rate), append(plan.MarginDB, margin)
		plan.FreeBps, plan.ShannonBps = append(plan.FreeBps, 3.8e6), append(plan.ShannonBps, 3e7)
		plan.SoFar = append(plan.SoFar, float64(i)*1e5)
	}
	p.Radio.Plan = plan
	return p
}

// The page says the bytes, both shares and every step, and escapes names; the drawing
// marks the steps and reads margin and rate in their units.
func TestPlanOnThePage(t *testing.T) {
	p := plannedPass()
	w := newWriter(&Report{Keys: []Key{{Spacecraft: p.Spacecraft, Station: p.Site.Name, AOS: p.Pass.AOS}}}, Options{}, script{}, nil)
	page, err := passPage(w, 0, p)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{
		"60.0 MB", "80.0 % of free switching, 10.0 % of Shannon’s limit", "2 changes", "Which mode when", "mode safe by itself brings 50.0 MB",
		"fast &lt;1&gt;", "<td>safe<small>1.20 Mbaud</small></td><td>1.00 Mbit/s<small>net 960 kbit/s</small></td><td>3.4</td><td>24.0 MB</td>",
		`<td>silent</td><td>–</td><td>–</td>`, `id="plan"`,
	} {
		if !strings.Contains(string(page), want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	fr := newFrame(p)
	fig := planFigure(p, fr)
	d := fr.draw(&fig)
	if len(d.Marks) != 3 || d.Marks[1].Label != "silent" || d.Marks[1].To-d.Marks[1].From != 40 {
		t.Errorf("marks %+v", d.Marks)
	}
	if len(d.Reads) != 2 || d.Reads[0].Unit != "dB" || d.Reads[1].Unit != "Mbit/s" {
		t.Errorf("readings %+v", d.Reads)
	}
}

// CSV and JSON have the plan behind all other columns; the index has its bytes and
// shares, empty and null without a plan.
func TestPlanInTheFiles(t *testing.T) {
	p := plannedPass()
	rows, err := csv.NewReader(strings.NewReader(string(samplesCSV(p)))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if head := strings.Join(rows[0], ","); !strings.HasSuffix(head, ",plan_rate_bps,plan_margin_db,plan_bytes,free_switching_rate_bps,shannon_rate_bps") {
		t.Errorf("columns %s", head)
	}
	if end := strings.Join(rows[211][len(rows[0])-5:], ","); end != "0,,21000000,3800000,30000000" {
		t.Errorf("the silent sample ends with %s", end)
	}
	text, err := passJSON(p)
	if err != nil {
		t.Fatal(err)
	}
	var answer struct {
		Radio struct {
			Plan struct {
				Bytes float64
				Share float64 `json:"share_of_free_switching_percent"`
				Steps []struct {
					Mode   string
					Margin *float64 `json:"least_margin_db"`
				}
			}
		}
	}
	if err := json.Unmarshal(text, &answer); err != nil {
		t.Fatal(err)
	}
	if q := answer.Radio.Plan; q.Bytes != 60e6 || q.Share != 80 || len(q.Steps) != 3 || q.Steps[1].Margin != nil || *q.Steps[2].Margin != 3.1 {
		t.Errorf("plan %+v", q)
	}
	list := []row{newRow("a", p), newRow("b", fixturePass(basicShape()))}
	index, err := indexCSV(list)
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(string(index), "\n")
	if !strings.HasSuffix(lines[1], ",60000000,80.00,10.00,2,,,,") || !strings.HasSuffix(lines[2], ",,,,,,,,") {
		t.Errorf("index rows end with %q and %q", lines[1], lines[2])
	}
}
