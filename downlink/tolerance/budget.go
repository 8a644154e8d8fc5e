package tolerance

import (
	"errors"
	"fmt"
	"math"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// Names of the items that follow the terms of a budget.
const (
	NoiseItem          = "noise density"
	GOverTItem         = "measured G/T"
	BoltzmannItem      = "Boltzmann constant"
	RateItem           = "data rate"
	RequiredItem       = "required Eb/N0"
	ImplementationItem = "implementation loss"
)

// Spread is the tolerance of a named term.
type Spread struct {
	Term                string
	Favourable, Adverse unit.DB
	Law                 Law
	Source              string
}

// FromBudget makes the items of a budget's margin: its terms in their order, the
// noise density k T (or a measured G/T and k where the gain is not known), the data
// rate, the required Eb/N0 and the implementation loss. Their design values add up to
// the budget's margin. A term without a spread is taken as exact. The budget needs a
// margin; a spread that names no term, or names one twice, is an error.
func FromBudget(b *downlink.Budget, implementation unit.DB, spreads []Spread) ([]Item, error) {
	if math.IsNaN(float64(b.Margin)) || math.IsInf(float64(b.Margin), 0) {
		return nil, errors.New("the budget has no margin; choose a mode with a data rate and a required Eb/N0")
	}
	var items []Item
	add := func(name, source string, design float64) {
		items = append(items, Item{Name: name, Design: unit.DB(design), Source: source})
	}
	for _, t := range b.Terms {
		v := float64(t.Sign) * t.Value
		if t.Unit == "dBm" {
			v -= 30 // the table counts from one watt, as the noise does
		}
		add(t.Name, t.Source, v)
	}
	k := float64(unit.BoltzmannDB)
	if math.IsNaN(b.SystemNoise.Kelvins()) {
		add(GOverTItem, "scenario", float64(b.GOverT))
		add(BoltzmannItem, "exact", -k)
	} else {
		add(NoiseItem, "k T of the budget", -k-10*math.Log10(b.SystemNoise.Kelvins()))
	}
	add(RateItem, "mode", -10*math.Log10(b.DataRate.BitsPerSecond()))
	add(RequiredItem, "mode", -float64(b.RequiredEbN0))
	add(ImplementationItem, "scenario", -float64(implementation))
	return items, spread(items, spreads)
}

// spread gives each spread to the item that it names.
func spread(items []Item, spreads []Spread) error {
	var faults []error
	given := map[string]bool{}
	for _, s := range spreads {
		found := false
		for i := range items {
			if items[i].Name == s.Term {
				items[i].Favourable, items[i].Adverse, items[i].Law = s.Favourable, s.Adverse, s.Law
				items[i].Source = join(items[i].Source, s.Source)
				found = true
			}
		}
		switch {
		case !found:
			faults = append(faults, fmt.Errorf("tolerance of %q: the budget has no such term; it has %s", s.Term, names(items)))
		case given[s.Term]:
			faults = append(faults, fmt.Errorf("tolerance of %q: it is given twice; give it once", s.Term))
		}
		given[s.Term] = true
	}
	return errors.Join(faults...)
}

func join(a, b string) string {
	if b == "" {
		return a
	}
	return a + "; tolerance: " + b
}

func names(items []Item) string {
	s := ""
	for i, it := range items {
		if i > 0 {
			s += ", "
		}
		s += fmt.Sprintf("%q", it.Name)
	}
	return s
}
