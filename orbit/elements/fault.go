package elements

import (
	"fmt"
	"strconv"
	"strings"
)

// Fault is one thing that is wrong in a text of element sets.
type Fault struct {
	File   string // as given to Read
	Line   int    // from 1; 0: the whole file
	Column int    // from 1, counted in characters; 0: the whole line
	Field  string // what was being read, "epoch day"; may be empty
	Text   string // the text at fault; may be empty
	// Problem says what is wrong and what is allowed; Next says what to do.
	Problem, Next string
	// Unsupported: the text is well formed but of a kind that is not read here.
	Unsupported bool
}

// Error returns `file:line:column: field "text": problem; next`.
func (f *Fault) Error() string {
	var b strings.Builder
	b.WriteString(place(f.File, f.Line, f.Column))
	if f.Field != "" {
		b.WriteString(f.Field)
		if f.Text == "" {
			b.WriteString(": ")
		} else {
			b.WriteByte(' ')
		}
	}
	if f.Text != "" {
		b.WriteString(quoted(f.Text))
		b.WriteString(": ")
	}
	b.WriteString(f.Problem)
	if f.Next != "" {
		b.WriteString("; ")
		b.WriteString(f.Next)
	}
	return b.String()
}

// maxFaults is how many faults of one text are kept in full; a wrong file of a
// million lines must not print a million lines.
const maxFaults = 20

// Faults holds all that is wrong in one text.
type Faults struct {
	List  []*Fault // the first 20, in the order of the text
	Total int      // how many there are in all, at least len(List)
}

// Error returns the faults, one a line, and how many more there are.
func (f *Faults) Error() string {
	lines := make([]string, 0, len(f.List)+1)
	for _, x := range f.List {
		lines = append(lines, x.Error())
	}
	if more := f.Total - len(f.List); more > 0 {
		lines = append(lines, fmt.Sprintf("and %d more faults", more))
	}
	return strings.Join(lines, "\n")
}

// Unwrap returns the faults for errors.As and errors.Is.
func (f *Faults) Unwrap() []error {
	out := make([]error, len(f.List))
	for i, x := range f.List {
		out[i] = x
	}
	return out
}

// Warning is something that was assumed, passed over or rounded.
type Warning struct {
	File string // empty when nothing was read
	Line int    // from 1; 0: the whole file
	Text string
}

// String returns `file:line: text`.
func (w Warning) String() string { return place(w.File, w.Line, 0) + w.Text }

func place(file string, line, column int) string {
	s := file
	for _, n := range []int{line, column} {
		if n <= 0 {
			break
		}
		if s != "" {
			s += ":"
		} else {
			s = "line "
		}
		s += strconv.Itoa(n)
	}
	if s != "" {
		s += ": "
	}
	return s
}

// quoted quotes a text and shortens a long one; a message must stay readable.
func quoted(s string) string {
	const most = 80
	if r := []rune(s); len(r) > most {
		s = string(r[:most]) + "…"
	}
	return strconv.Quote(s)
}
