// Package nearest finds the known names that an unknown one was probably meant to be.
package nearest

import (
	"sort"
	"strings"

	"github.com/agnivade/levenshtein"
)

// Names returns up to limit of the known names, the nearest first: those that
// differ from name in at most a third of the longer one's letters (two at least),
// or that begin with it. Case does not count. Equal distances keep the order of
// known. It is empty when nothing is near.
func Names(name string, known []string, limit int) []string {
	type candidate struct {
		name     string
		distance int
	}
	var near []candidate
	low := strings.ToLower(name)
	for _, k := range known {
		kl := strings.ToLower(k)
		d := levenshtein.ComputeDistance(low, kl)
		bound := max(2, max(len(low), len(kl))/3)
		prefix := len(low) >= 2 && strings.HasPrefix(kl, low)
		if d <= bound && d < len(kl) || prefix {
			near = append(near, candidate{k, d})
		}
	}
	sort.SliceStable(near, func(i, j int) bool { return near[i].distance < near[j].distance })
	var out []string
	for _, c := range near[:min(limit, len(near))] {
		out = append(out, c.name)
	}
	return out
}
