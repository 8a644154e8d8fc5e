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

// wrap breaks a text between its words into lines of at most n cells; n is at least
// the longest word. A text that fits stays as it is, its blanks included.
func wrap(s string, n int) []string {
	if cells(s) <= n {
		return []string{s}
	}
	var lines []string
	line := ""
	for _, word := range strings.Fields(s) {
		switch {
		case line == "":
			line = word
		case cells(line)+1+cells(word) <= n:
			line += " " + word
		default:
			lines = append(lines, line)
			line = word
		}
	}
	return append(lines, line)
}

// longestWord returns how many cells the longest word of a text takes.
func longestWord(s string) int {
	longest := 0
	for _, word := range strings.Fields(s) {
		longest = max(longest, cells(word))
	}
	return longest
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
