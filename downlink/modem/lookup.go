package modem

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"github.com/agnivade/levenshtein"
)

// UnknownError says that the catalogue lacks a name and lists the nearest that it
// has.
type UnknownError struct {
	What    string // "modulation", "coding with qpsk"
	Name    string
	Nearest []string
}

// Error returns `modulation: "qspk" is not in the catalogue; the nearest are qpsk, …`.
func (e *UnknownError) Error() string {
	return fmt.Sprintf("%s: %q is not in the catalogue; the nearest are %s", e.What, e.Name, strings.Join(e.Nearest, ", "))
}

// FindModulation returns the standard modulation of a name, or an *UnknownError.
func FindModulation(name string) (Modulation, error) { return Standard().FindModulation(name) }

// FindModulation returns the modulation of a name, or an *UnknownError.
func (c *Catalogue) FindModulation(name string) (Modulation, error) {
	names := make([]string, len(c.modulations))
	for i, m := range c.modulations {
		if m.Name == name {
			return m, nil
		}
		names[i] = m.Name
	}
	return Modulation{}, &UnknownError{"modulation", name, nearest(name, names)}
}

// Find returns the row of a modulation and coding, or an *UnknownError. The row is
// shared: it must not be changed.
func (c *Catalogue) Find(modulation, coding string) (*Row, error) {
	if i, ok := c.index[[2]string{modulation, coding}]; ok {
		return &c.rows[i], nil
	}
	if _, err := c.FindModulation(modulation); err != nil {
		return nil, err
	}
	var codings []string
	for i := range c.rows {
		if c.rows[i].Modulation.Name == modulation {
			codings = append(codings, c.rows[i].Coding.Name)
		}
	}
	return nil, &UnknownError{"coding with " + modulation, coding, nearest(coding, codings)}
}

// nearest returns up to four of the names by their distance to name.
func nearest(name string, names []string) []string {
	names = slices.Clone(names)
	slices.Sort(names)
	names = slices.Compact(names)
	slices.SortStableFunc(names, func(a, b string) int {
		return cmp.Compare(levenshtein.ComputeDistance(name, a), levenshtein.ComputeDistance(name, b))
	})
	return names[:min(4, len(names))]
}
