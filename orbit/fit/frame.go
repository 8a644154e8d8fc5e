package fit

import (
	"fmt"
	"strings"

	"slantwise/orbit"
)

// frameWords are the words for frames in tables and flags, the first of each frame to be
// written; the others are those of CCSDS 502.0-B (from memory).
var frameWords = []struct {
	word  string
	frame orbit.Frame
}{
	{"teme", orbit.TEME}, {"earth-fixed", orbit.EarthFixed}, {"pseudo-earth-fixed", orbit.PseudoEarthFixed},
	{"true-of-date", orbit.TrueOfDate}, {"mean-of-date", orbit.MeanOfDate}, {"j2000", orbit.J2000}, {"gcrf", orbit.GCRF},
	{"itrf", orbit.EarthFixed}, {"tod", orbit.TrueOfDate}, {"eme2000", orbit.J2000}, {"icrf", orbit.GCRF},
}

// ParseFrame reads the word for a frame, in any case, with blanks or _ for hyphens.
func ParseFrame(s string) (orbit.Frame, error) {
	word := strings.NewReplacer("_", "-", " ", "-").Replace(strings.ToLower(strings.TrimSpace(s)))
	for _, f := range frameWords {
		if f.word == word {
			return f.frame, nil
		}
	}
	return 0, fmt.Errorf("frame %q is not known; it must be one of %s", s, frameList())
}

func frameList() string {
	var words []string
	for _, f := range frameWords[:7] {
		words = append(words, f.word)
	}
	return strings.Join(words, ", ")
}
