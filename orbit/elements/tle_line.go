package elements

import (
	"fmt"
	"strings"
)

// dashes are characters that look like a minus sign and are none; they come from
// copying out of documents and web pages.
var dashes = map[rune]string{
	'‐': "hyphen", '‑': "non-breaking hyphen", '‒': "figure dash", '–': "en dash",
	'—': "em dash", '―': "horizontal bar", '−': "minus sign of Unicode", '﹣': "small hyphen", '－': "full-width hyphen",
}

// oddCharacter describes a character that has no place in an element line or a
// number; empty for plain printable ASCII.
func oddCharacter(r rune) (problem, next string) {
	if r >= ' ' && r <= '~' {
		return "", ""
	}
	if name, ok := dashes[r]; ok {
		return fmt.Sprintf("the %s (U+%04X) stands where only the ASCII minus is read", name, r), `write "-"`
	}
	switch {
	case r == '\t':
		return "a tab stands where blanks must", "replace it by blanks, so that the columns line up"
	case r == '\u00a0':
		return "a no-break space (U+00A0) stands where a blank must", "replace it by a blank"
	}
	return fmt.Sprintf("the character U+%04X has no place here; only printable ASCII is read", r), nextFetch
}

// sound checks characters, length and checksum; only a line with the right
// characters and length can be split into fields.
func (l tleLine) sound(rep *report) bool {
	column := l.indent
	for _, r := range l.text {
		column++
		if problem, next := oddCharacter(r); problem != "" {
			rep.fault(Fault{Line: l.number, Column: column, Text: string(r), Problem: problem, Next: next})
			return false
		}
	}
	n := len(l.text)
	if n < tleColumns {
		rep.fault(Fault{Line: l.number, Column: l.indent + n + 1, Text: l.text,
			Problem: fmt.Sprintf("the line ends after %d columns; an element line has %d", n, tleColumns), Next: nextFetch})
		return false
	}
	if n > tleColumns {
		rep.fault(Fault{Line: l.number, Column: l.indent + tleColumns + 1, Text: l.text[tleColumns:],
			Problem: fmt.Sprintf("text after column %d, where an element line ends", tleColumns), Next: "take it off"})
		return false
	}
	l.verify(rep)
	return true
}

// verify compares the checksum in the last column.
func (l tleLine) verify(rep *report) {
	given, want := l.text[tleColumns-1], '0'+byte(checksum(l.text))
	f := Fault{Line: l.number, Column: l.indent + tleColumns, Field: "checksum", Text: string(given), Next: nextFetch}
	switch {
	case given < '0' || given > '9':
		f.Problem = "must be a digit"
	case given != want:
		f.Problem = fmt.Sprintf("the line adds up to %c: a character was changed or lost", want)
	default:
		return
	}
	rep.fault(f)
}

// checksum is the sum of the digits of the first 68 columns, 1 for each minus sign,
// modulo 10.
func checksum(line string) int {
	sum := 0
	for _, c := range []byte(line[:tleColumns-1]) {
		switch {
		case c >= '0' && c <= '9':
			sum += int(c - '0')
		case c == '-':
			sum++
		}
	}
	return sum % 10
}

// nameOf returns the name of a name line: without the leading "0 " that some files
// carry.
func nameOf(l *tleLine, rep *report) string {
	if l == nil {
		return ""
	}
	name := l.text
	if name == "0" {
		return ""
	}
	name = strings.TrimLeft(strings.TrimPrefix(name, "0 "), " ")
	checkName(name, l.number, l.indent+1, rep)
	return name
}
