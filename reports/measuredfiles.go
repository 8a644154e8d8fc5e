package reports

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"strings"

	"slantwise/reports/paper"
)

// measuredJSON stands in a pass's JSON. Fields get added, not renamed.
type measuredJSON struct {
	Number         int64                  `json:"logbook_number"`
	Source         string                 `json:"source"`
	Remark         string                 `json:"remark"`
	Elements       string                 `json:"elements"`
	Link           string                 `json:"link"`
	AddedUTC       string                 `json:"added_utc"`
	PredictedBytes number                 `json:"predicted_bytes"`
	TakenBytes     number                 `json:"taken_bytes"`
	Locked         []intervalJSON         `json:"locked"` // null: not logged
	Quantities     []measuredQuantityJSON `json:"quantities"`
	Faults         []string               `json:"faults"`
}

type measuredQuantityJSON struct {
	Quantity   string               `json:"quantity"`
	Unit       string               `json:"unit"`
	UTC        []string             `json:"utc"`
	Measured   []number             `json:"measured"`
	Predicted  []number             `json:"predicted"`
	Difference []number             `json:"difference"`
	State      []string             `json:"state"`
	Figures    []measuredFigureJSON `json:"figures"`
}

type measuredFigureJSON struct {
	By        string `json:"by"`
	Parameter string `json:"parameter"`
	Value     number `json:"value"`
	PlusMinus number `json:"plus_minus"`
	Unit      string `json:"unit"`
	Samples   int    `json:"samples"`
	Outliers  int    `json:"outliers"`
}

// measuredDecimals is how exactly measured values are written.
const measuredDecimals = 3

func measuredHeads(p *Pass) []measuredJSON {
	var out []measuredJSON
	for i := range p.Measured {
		m := &p.Measured[i]
		h := measuredJSON{Number: m.Number, Source: m.Source, Remark: m.Note, Elements: m.Elements, Link: m.Link, AddedUTC: utcText(m.Added),
			PredictedBytes: number{m.PredictedBytes, 0}, TakenBytes: number{m.TakenBytes, 0}, Quantities: []measuredQuantityJSON{}, Faults: append([]string{}, m.Faults...)}
		if m.HasLock {
			h.Locked = intervals(m.Locked)
		}
		for k := range m.Quantities {
			h.Quantities = append(h.Quantities, m.Quantities[k].json())
		}
		out = append(out, h)
	}
	return out
}

func (q *MeasuredQuantity) json() measuredQuantityJSON {
	h := measuredQuantityJSON{Quantity: q.Key, Unit: q.Unit, State: q.States, Figures: []measuredFigureJSON{}}
	for i, t := range q.Times {
		h.UTC = append(h.UTC, utcText(t))
		h.Measured = append(h.Measured, number{q.Measured[i], measuredDecimals})
		h.Predicted = append(h.Predicted, number{q.Predicted[i], measuredDecimals})
		h.Difference = append(h.Difference, number{q.Difference[i], measuredDecimals})
	}
	for _, f := range q.Figures {
		h.Figures = append(h.Figures, measuredFigureJSON{f.By, f.Name, number{f.Value, 4}, number{f.Span, 4}, f.Unit, f.Samples, f.Outliers})
	}
	return h
}

// measuredCSV returns every sample that was logged during a pass, a row a quantity and instant.
func measuredCSV(p *Pass) []byte {
	var out bytes.Buffer
	w := csv.NewWriter(&out)
	put := func(row ...string) { _ = w.Write(row) } // a buffer takes everything
	put("logbook_number", "utc", "quantity", "measured", "predicted", "difference", "state")
	for i := range p.Measured {
		m := &p.Measured[i]
		for k := range m.Quantities {
			q := &m.Quantities[k]
			for j, t := range q.Times {
				put(itoa(m.Number), utcText(t), q.Key, cellOf(q.Measured[j]), cellOf(q.Predicted[j]), cellOf(q.Difference[j]), q.States[j])
			}
		}
	}
	w.Flush()
	return out.Bytes()
}

// cellOf writes a measured value, empty where there is none.
func cellOf(v float64) string {
	if !finite(v) {
		return ""
	}
	return string(appendFixed(nil, v, measuredDecimals))
}

// checkMeasured refuses columns that are not of one length.
func checkMeasured(list []Measured) error {
	for i := range list {
		for _, q := range list[i].Quantities {
			n := len(q.Times)
			if n == 0 {
				return errors.New("a measured quantity has no sample")
			}
			if len(q.Measured) != n || len(q.Predicted) != n || len(q.Difference) != n || len(q.States) != n {
				return fmt.Errorf("measured %s: its columns are not of one length", q.Key)
			}
		}
	}
	return nil
}

// measuredOn writes the measurements of a pass on paper.
func measuredOn(d *paper.Document, p *Pass) {
	if len(p.Measured) == 0 {
		return
	}
	fr := newFrame(p)
	d.Heading("Measured over predicted")
	d.Chapter("Measured over predicted")
	for i := range p.Measured {
		m := &p.Measured[i]
		v := m.view()
		d.Paragraph(v.Title + ", from " + v.Source + ", added " + v.Added + " UTC.")
		for _, a := range v.Answers {
			d.Answer(a + ".")
		}
		for _, f := range v.Facts {
			d.Paragraph(f + ".")
		}
		for _, f := range v.Faults {
			d.Caution(f)
		}
		d.Figures(paperFigures(m.sketches(fr, i)))
		t := paper.Table{Corner: "measured less predicted", Heads: []string{"value", "± (95 %)", "unit", "samples", "outliers"}}
		for _, r := range v.Rows {
			t.Rows = append(t.Rows, paper.Row{Name: r.Quantity + ", " + r.Name, Remark: "by " + r.By, Cells: []string{r.Value, r.Span, r.Unit, r.Samples, r.Outliers}})
		}
		d.Table(t)
		d.Paragraph("Predicted with " + v.Elements + linkWords(v.Link) + ".")
		if v.Note != "" {
			d.Paragraph("Remark: " + strings.TrimSuffix(v.Note, ".") + ".")
		}
	}
}

func linkWords(link string) string {
	if link == "" {
		return ""
	}
	return ", for " + link
}
