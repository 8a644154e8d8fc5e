package tolerance

import (
	"fmt"
	"strings"

	"slantwise/orbit/unit"
)

// Law is how a term is spread between its limits.
type Law int

// Laws. Gaussian has its limits at three sigma and is not cut there; Arcsine is the
// law of the sine of an unknown phase, as of a mismatch.
const (
	SingleValue Law = iota // the design value is exact
	Uniform
	Triangular // top at the design value
	Gaussian
	Arcsine
)

var lawNames = [...]string{"single", "uniform", "triangular", "gaussian", "arcsine"}

// String returns the law as the scenario writes it.
func (l Law) String() string {
	if l < 0 || int(l) >= len(lawNames) {
		return fmt.Sprintf("law %d", int(l))
	}
	return lawNames[l]
}

// Laws lists the names of all laws.
func Laws() []string { return lawNames[:] }

// ParseLaw returns the law of a name.
func ParseLaw(name string) (Law, error) {
	for i, n := range lawNames {
		if n == name {
			return Law(i), nil
		}
	}
	return 0, fmt.Errorf("law: %q is not known; it must be one of %s", name, strings.Join(lawNames[:], ", "))
}

// offset returns the mean's distance from the design value for the tolerances
// f >= 0 and a <= 0, in dB.
func (l Law) offset(f, a float64) float64 {
	switch l {
	case SingleValue:
		return 0
	case Triangular: // mean of a triangle: a third of the sum of its corners a, 0, f
		return (f + a) / 3
	}
	return (f + a) / 2 // the others are symmetric about the middle of their limits
}

// variance returns the variance in dB² for the tolerances f >= 0 and a <= 0.
func (l Law) variance(f, a float64) float64 {
	w := f - a
	switch l {
	case Uniform:
		return w * w / 12
	case Triangular:
		return (f*f + a*a - f*a) / 18
	case Gaussian:
		return w * w / 36
	case Arcsine:
		return w * w / 8
	}
	return 0
}

// Item is a term of the table.
type Item struct {
	Name       string
	Design     unit.DB // the most likely value; in dB relative to the term's unit, losses negative
	Favourable unit.DB // how much better it may be, 0 or greater
	Adverse    unit.DB // how much worse it may be, 0 or less
	Law        Law
	Source     string // where the figures are from
}

// Mean returns the mean of the term.
func (it *Item) Mean() unit.DB {
	return it.Design + unit.DB(it.Law.offset(float64(it.Favourable), float64(it.Adverse)))
}

// Variance returns the variance of the term in dB².
func (it *Item) Variance() float64 {
	return it.Law.variance(float64(it.Favourable), float64(it.Adverse))
}
