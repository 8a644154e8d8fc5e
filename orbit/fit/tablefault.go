package fit

import (
	"fmt"
	"strconv"
	"strings"
)

// TableFault is one thing that is wrong in a table.
type TableFault struct {
	Line          int    // from 1; 0: the whole table
	Column        string // its name; may be empty
	Text          string // what stands there; may be empty
	Problem, Next string
}

// TableFaults holds all that is wrong in a table.
type TableFaults struct {
	File  string
	List  []TableFault // the first 20
	Total int
}

const mostFaults = 20

func (f *TableFaults) add(line int, column, text, problem, next string) {
	if f.Total++; len(f.List) < mostFaults {
		f.List = append(f.List, TableFault{Line: line, Column: column, Text: text, Problem: problem, Next: next})
	}
}

// Error returns the faults, one a line: `file:line: column "text": problem; next`.
func (f *TableFaults) Error() string {
	lines := make([]string, 0, len(f.List)+1)
	for _, x := range f.List {
		s := f.File
		if x.Line > 0 {
			s += ":" + strconv.Itoa(x.Line)
		}
		s += ": "
		if x.Column != "" {
			s += x.Column + ": "
		}
		if x.Text != "" {
			s += quoted(x.Text) + " "
		}
		lines = append(lines, s+x.Problem+"; "+x.Next)
	}
	if more := f.Total - len(f.List); more > 0 {
		lines = append(lines, fmt.Sprintf("%s: and %d more faults", f.File, more))
	}
	return strings.Join(lines, "\n")
}

// quoted shortens a long text; a message must stay readable.
func quoted(s string) string {
	const most = 60
	if r := []rune(s); len(r) > most {
		s = string(r[:most]) + "…"
	}
	return strconv.Quote(s)
}
