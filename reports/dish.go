package reports

import (
	"bytes"
	"fmt"
	"html/template"
	"math"
)

// Dish is the page of a station's sizing.
type Dish struct {
	Title    string
	Answer   string   // one sentence
	Lines    []string // what else is to be said at the head
	Warnings []string

	Requirements []DishRequirement
	Charts       []Curves // each with one chart and an axis of its own
	Costs        []DishCost
	Chances      []DishChance
	ChanceText   string       // about the dish that the chances are of; empty: no tolerances are given
	Limits       []DishLimits // a dish after the other
	Files        []DishFile
	Notes        []Note
	Basis        Basis
	Scriptless   bool // the charts are drawn in the page
}

// DishRequirement is a row of what is required; texts as they are to be read.
type DishRequirement struct {
	Name, Required, Reached string
	Met, Binds              bool
	Least, Greatest         string // diameters that it needs by itself
}

// DishCost is a row of the sensitivities: what a small change costs.
type DishCost struct {
	Name  string
	Bytes float64 // a day, negative where it costs
	Text  string  // of the bytes
	Dish  string  // how much greater the dish becomes
}

// DishChance is a diameter with the probability that it meets all.
type DishChance struct{ Probability, Diameter string }

// DishLimits is what a dish allows.
type DishLimits struct {
	Dish string
	Rows []DishLimit
}

// DishLimit is one of its limits.
type DishLimit struct{ Name, Value, Meaning string }

// DishFile is a file beside the page.
type DishFile struct{ Name, What string }

// dishView is what the template shows.
type dishView struct {
	pageView
	*Dish
	Title   string // of both
	Figures []figureView
	Bars    []costBar
}

// costBar is a row of the ranked bars.
type costBar struct {
	DishCost
	Share template.CSS // of the dearest, for the bar
}

// DishPage returns the page as one file of HTML that holds everything inside.
func DishPage(d *Dish) ([]byte, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	w := newWriter(&Report{}, Options{OneFile: true, Static: d.Scriptless}, chartScript(), nil)
	v := dishView{pageView: w.page("", d.Title), Dish: d, Title: d.Title}
	v.foot(&d.Basis, "")
	var drawings []drawing
	for i := range d.Charts {
		c := &d.Charts[i]
		for k := range c.Charts {
			one := &c.Charts[k]
			if !d.Scriptless {
				drawings = append(drawings, c.draw(one))
			}
			v.Figures = append(v.Figures, c.view(one, d.Scriptless))
		}
	}
	dearest := 0.0
	for _, c := range d.Costs {
		dearest = max(dearest, math.Abs(c.Bytes))
	}
	for _, c := range d.Costs {
		share := 0.0
		if dearest > 0 {
			share = 100 * math.Abs(c.Bytes) / dearest
		}
		v.Bars = append(v.Bars, costBar{c, template.CSS(fmt.Sprintf("--share:%.1f%%", share))})
	}
	var err error
	if v.Data, err = w.drawn(drawings); err != nil {
		return nil, err
	}
	var out bytes.Buffer
	err = pageTemplates().ExecuteTemplate(&out, "dish.html", v)
	return out.Bytes(), err
}

// check refuses charts that cannot be drawn.
func (d *Dish) check() error {
	for i := range d.Charts {
		if err := d.Charts[i].check(); err != nil {
			return err
		}
	}
	return nil
}
