package scenario

import (
	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
)

var (
	controlKeys   = []string{"tolerances", "criteria"}
	toleranceKeys = []string{"term", "favourable_db", "adverse_db", "law", "source"}
	criterionKeys = []string{"name", "margin", "sigmas", "least_db", "source"}
)

// Control is what a design is judged by.
type Control struct {
	Spreads  []tolerance.Spread
	Criteria []tolerance.Criterion
}

// control reads the tolerances of the terms and the criteria.
func (r *reader) control(top object) Control {
	o := top.child("design_control", controlKeys)
	o.about = "design control"
	var c Control
	for _, it := range o.objects("tolerances", "tolerances", maxParts, toleranceKeys) {
		c.Spreads = append(c.Spreads, it.spread())
	}
	items := o.objects("criteria", "criteria", maxParts, criterionKeys)
	called := names("criterion", items)
	for i, it := range items {
		c.Criteria = append(c.Criteria, it.criterion(called[i]))
	}
	return c
}

func (o object) spread() tolerance.Spread {
	s := tolerance.Spread{Term: o.needText("term", "the term's name as in the budget")}
	s.Favourable = unit.DB(o.numberOr("favourable_db", span{low: 0, high: 1000, unit: "dB", next: "it says how much better the term may be"}, 0))
	s.Adverse = unit.DB(o.numberOr("adverse_db", span{low: -1000, high: 0, unit: "dB", next: "it says how much worse the term may be, as a negative figure"}, 0))
	if !o.has("law") {
		o.missing("law", "one of "+list(tolerance.Laws()))
	}
	if w, given := o.word("law", tolerance.Laws()...); given {
		law, err := tolerance.ParseLaw(w)
		o.addAll(o.get("law"), "law", err)
		s.Law = law
	}
	if s.Law == tolerance.SingleValue && (s.Favourable != 0 || s.Adverse != 0) && o.has("law") && !o.meant["law"] {
		o.fault(o.get("law"), "law", "a single value has no tolerance, and one is given", "give the law of the spread, or leave the tolerances out")
	}
	s.Source, _ = o.text("source")
	return s
}

func (o object) criterion(name string) tolerance.Criterion {
	c := tolerance.Criterion{Name: name}
	if !o.has("margin") {
		o.missing("margin", "one of "+list(tolerance.Statements()))
	}
	if w, given := o.word("margin", tolerance.Statements()...); given {
		statement, err := tolerance.ParseStatement(w)
		o.addAll(o.get("margin"), "margin", err)
		c.Statement = statement
	}
	c.Least = unit.DB(o.required("least_db", marginDB, "the margin to be reached"))
	if c.Statement == tolerance.MeanLessSigmas {
		c.Sigmas = o.required("sigmas", above(0, 10, ""), "how many sigmas are taken off the mean")
	} else {
		o.useless("unless margin is mean_minus_sigmas", "sigmas")
	}
	c.Source, _ = o.text("source")
	return c
}
