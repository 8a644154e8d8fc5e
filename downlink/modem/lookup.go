package modem

import (
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/agnivade/levenshtein"
)

// UnknownError says that the catalogue lacks a name and lists the nearest that it
// has.
type UnknownError struct {
	What    string // "modulation", "coding with qpsk", "error rate of none with qpsk"
	Name    string
	Nearest []string
}

// Error returns `modulation: "qspk" is not in the catalogue; the nearest are qpsk, …`.
func (e *UnknownError) Error() string {
	return fmt.Sprintf("%s: %q is not in the catalogue; the nearest are %s", e.What, e.Name, strings.Join(e.Nearest, ", "))
}

// FindModulation returns the modulation of a name, or an *UnknownError.
func FindModulation(name string) (Modulation, error) {
	all := tables().modulations
	var names []string
	for _, m := range all {
		if m.Name == name {
			return m, nil
		}
		names = append(names, m.Name)
	}
	return Modulation{}, &UnknownError{"modulation", name, nearest(name, names)}
}

// Find returns the catalogue's entry for a modulation and coding at an error rate; 0
// takes the first entry. What it lacks is an *UnknownError.
func Find(modulation, coding string, errorRate float64) (Entry, error) {
	if _, err := FindModulation(modulation); err != nil {
		return Entry{}, err
	}
	var codings, rates []string
	for _, e := range tables().entries {
		if !slices.Contains(e.Modulations, modulation) {
			continue
		}
		codings = append(codings, e.Coding)
		if e.Coding != coding {
			continue
		}
		if errorRate == 0 || e.ErrorRate == errorRate {
			return e, nil
		}
		rates = append(rates, formatRate(e.ErrorRate))
	}
	if len(rates) > 0 {
		return Entry{}, &UnknownError{"error rate of " + coding + " with " + modulation, formatRate(errorRate), rates}
	}
	return Entry{}, &UnknownError{"coding with " + modulation, coding, nearest(coding, codings)}
}

func formatRate(r float64) string { return strconv.FormatFloat(r, 'e', -1, 64) }

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
