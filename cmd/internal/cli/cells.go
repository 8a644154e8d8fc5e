package cli

import (
	"strings"
	"unicode"

	"golang.org/x/text/width"
)

// cells returns how many terminal cells a text takes: two for the wide letters of
// East Asia, none for marks that combine.
func cells(s string) int {
	n := 0
	for _, r := range s {
		n += runeCells(r)
	}
	return n
}

func runeCells(r rune) int {
	if r < 0x300 {
		return 1
	}
	if unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf) {
		return 0
	}
	switch width.LookupRune(r).Kind() {
	case width.EastAsianWide, width.EastAsianFullwidth:
		return 2
	}
	return 1
}

// shorten cuts a text to at most n cells; a cut text ends in an ellipsis.
func shorten(s string, n int) string {
	if cells(s) <= n {
		return s
	}
	used := 0
	for i, r := range s {
		used += runeCells(r)
		if used > n-1 {
			return s[:i] + "…"
		}
	}
	return s
}

// printable replaces what could steer a terminal or break a line.
func printable(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || unicode.In(r, unicode.Bidi_Control) {
			return '\uFFFD'
		}
		return r
	}, s)
}
