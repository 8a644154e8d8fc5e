package reports

import (
	"time"

	"slantwise/reports/paper"
)

// dishCautions are those of the page of a dish.
var dishCautions = []string{
	"Structure. This document knows of radio alone. Foundation, tower or roof, wind, ice and earthquake are for a licensed structural engineer under the local codes; loads grow faster than the diameter.",
	"Lightning and power. Earthing, surge protection and supply are for licensed electrical engineers under the local codes.",
	"Transmitting. A dish that is to transmit needs a hazard study of its beam and a licence before it is bought.",
	"Statistics. Bytes, margins and availability are those of an average year on a kept orbit: no promise for one pass, one day or one storm.",
}

// DishPaper returns a sizing answer as a PDF file: the sentence first, what is required, the trades and
// maps, what small changes cost, chances, limits, and what it stands on. from is the date of the file.
func DishPaper(v *Dish, from time.Time) ([]byte, error) {
	if err := v.check(); err != nil {
		return nil, err
	}
	chapters := []chapter{
		{"What is required", len(v.Requirements) > 0, v.requirementsOn},
		{"Trades", len(v.Charts) > 0, v.chartsOn},
		{"What small changes cost", len(v.Costs) > 0, v.costsOn},
		{"With every tolerance in it", v.ChanceText != "", v.chancesOn},
		{"What the dish allows", len(v.Limits) > 0, v.limitsOn},
		{"What was taken for granted", len(v.Notes) > 0, func(d *paper.Document) { d.Notes(noteTexts(v.Notes)) }},
		{"Before anything is built", true, func(d *paper.Document) { d.Notes(dishCautions) }},
	}
	info := infoOf(v.Title, &v.Basis, from)
	info.Contents = countOf(chapters) + 2 // the answer and the cautions
	d := paper.New(info)
	d.Page()
	d.Title(v.Title, "scenario "+v.Basis.Scenario)
	d.Chapter("Answer")
	d.Answer(v.Answer)
	for _, text := range v.Lines {
		d.Paragraph(text)
	}
	for _, text := range v.Warnings {
		d.Caution(text)
	}
	d.List()
	chaptersOn(d, chapters)
	v.Basis.defaultsOn(d)
	cautionsOn(d, &v.Basis)
	return d.Bytes()
}

func (v *Dish) requirementsOn(d *paper.Document) {
	t := paper.Table{Corner: "requirement", Heads: []string{"required", "reached now", "met now", "least diameter", "up to"}, First: 0.3}
	for _, r := range v.Requirements {
		row := paper.Row{Name: r.Name, Cells: []string{r.Required, r.Reached, "✗ no", r.Least, r.Greatest}}
		if r.Met {
			row.Cells[2] = "✓ yes"
		}
		if r.Binds {
			row.Remark = "this one binds"
		}
		t.Rows = append(t.Rows, row)
	}
	d.Table(t)
}

func (v *Dish) chartsOn(d *paper.Document) {
	var list []sketch
	for i := range v.Charts {
		c := &v.Charts[i]
		for k := range c.Charts {
			list = append(list, c.sketch(&c.Charts[k]))
		}
	}
	d.Figures(paperFigures(list))
}

func (v *Dish) costsOn(d *paper.Document) {
	t := paper.Table{Corner: "change", Heads: []string{"bytes a day", "dish"}, First: 0.5}
	for _, c := range v.Costs {
		t.Rows = append(t.Rows, paper.Row{Name: c.Name, Cells: []string{c.Text, c.Dish}})
	}
	d.Table(t)
}

func (v *Dish) chancesOn(d *paper.Document) {
	d.Paragraph(v.ChanceText)
	if len(v.Chances) == 0 {
		return
	}
	t := paper.Table{Corner: "meets all with a probability of", Heads: []string{"diameter"}, First: 0.5}
	for _, c := range v.Chances {
		t.Rows = append(t.Rows, paper.Row{Name: c.Probability, Cells: []string{c.Diameter}})
	}
	d.Table(t)
}

func (v *Dish) limitsOn(d *paper.Document) {
	for _, l := range v.Limits {
		t := paper.Table{Corner: l.Dish, Heads: []string{"value", "meaning"}, First: 0.3, Left: true}
		for _, r := range l.Rows {
			t.Rows = append(t.Rows, paper.Row{Name: r.Name, Cells: []string{r.Value, r.Meaning}})
		}
		d.Table(t)
	}
}
