package elements

import (
	"fmt"
	"regexp"
	"strings"
)

// tally counts keywords; a file of thousands of sets gets one warning, not one a set.
type tally struct {
	keys    []string // the first mostKeywords, in the order of the text
	line    int      // where the first one stands
	counted map[string]bool
}

// mostKeywords is how many keywords one warning lists.
const mostKeywords = 40

func (t *tally) add(key string, line int) {
	if t.counted[key] {
		return
	}
	if t.counted == nil {
		t.counted = map[string]bool{}
		t.line = line
	}
	t.counted[key] = true
	if len(t.keys) < mostKeywords {
		t.keys = append(t.keys, key)
	}
}

// list joins the keywords as say puts them, and how many more there are.
func (t *tally) list(say func(string) string) string {
	said := make([]string, len(t.keys))
	for i, k := range t.keys {
		said[i] = say(k)
	}
	s := strings.Join(said, ", ")
	if more := len(t.counted) - len(t.keys); more > 0 {
		s += fmt.Sprintf(" and %d more", more)
	}
	return s
}

var plainKeyword = regexp.MustCompile(`^[A-Za-z0-9_]{1,60}$`)

// asWritten shows a keyword; one with odd characters in it is quoted.
func asWritten(key string) string {
	if plainKeyword.MatchString(key) {
		return key
	}
	return quoted(key)
}

func withNearest(key string) string {
	if near := nearest(key, keywordNames(), 1); len(near) > 0 {
		return asWritten(key) + " (" + near[0] + "?)"
	}
	return asWritten(key)
}

// warnOfKeywords turns the tallies into warnings.
func (r *report) warnOfKeywords() {
	if len(r.passed.keys) > 0 {
		r.warn(r.passed.line, "passed over, since SGP4 does not use it: "+r.passed.list(asWritten))
	}
	if len(r.unknown.keys) > 0 {
		r.warn(r.unknown.line, "no keyword of an OMM, passed over: "+r.unknown.list(withNearest))
	}
	if len(r.assumed.keys) > 0 {
		r.warn(0, "not given, assumed: "+r.assumed.list(func(s string) string { return s }))
	}
}
