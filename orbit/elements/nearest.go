package elements

import (
	"slices"
	"strings"

	"github.com/agnivade/levenshtein"
)

// nearest returns up to n of the candidates, the most alike to s first; only those
// within half of their length count as alike. Equal distances keep the order of the
// candidates.
func nearest(s string, candidates []string, n int) []string {
	type scored struct {
		text     string
		distance int
	}
	var found []scored
	want := strings.ToLower(s)
	for _, c := range candidates {
		// The distance is at least the difference of the lengths; what this rules out
		// need not be computed, which matters when a text of megabytes stands for a name.
		if long, short := max(len(want), len(c)), min(len(want), len(c)); 2*short < long {
			continue
		}
		d := levenshtein.ComputeDistance(want, strings.ToLower(c))
		if 2*d <= max(len(want), len(c)) {
			found = append(found, scored{c, d})
		}
	}
	slices.SortStableFunc(found, func(a, b scored) int { return a.distance - b.distance })
	var out []string
	for _, f := range found[:min(n, len(found))] {
		out = append(out, f.text)
	}
	return out
}

// suggestion returns `; did you mean "x"?`, or nothing when nothing is alike.
func suggestion(s string, candidates []string) string {
	if near := nearest(s, candidates, 1); len(near) > 0 {
		return `; did you mean "` + near[0] + `"?`
	}
	return ""
}
