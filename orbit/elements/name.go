package elements

import (
	"fmt"
	"unicode"
)

// unknownText stands in an OMM for a name or designator that is not known, since
// OBJECT_NAME and OBJECT_ID may not be left out (CCSDS 502.0-B; from memory).
const unknownText = "UNKNOWN"

// checkName refuses characters that cannot be seen: two names that look the same
// must be the same.
func checkName(name string, line, column int, rep *report) {
	if r, ok := unseen(name); ok {
		rep.fault(Fault{Line: line, Column: column, Field: "name", Text: name,
			Problem: fmt.Sprintf("it holds the invisible character U+%04X", r), Next: "take the character out"})
	}
}

func unseen(name string) (rune, bool) {
	for _, r := range name {
		if !unicode.IsGraphic(r) {
			return r, true
		}
	}
	return 0, false
}
