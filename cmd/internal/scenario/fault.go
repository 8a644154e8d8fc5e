package scenario

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
)

// Fault is one thing that is wrong in what the user wrote.
type Fault struct {
	Place   string // the file, or where else the value comes from
	Line    int    // from 1; 0 where it is not known
	Key     string // "spacecraft[0].transmitters[1].frequency_mhz"; empty for the whole file
	Problem string // what is wrong, with the value and what is allowed
	Next    string // what to do; may be empty
}

// Error returns "place:line: key: problem; next".
func (f *Fault) Error() string {
	var b strings.Builder
	b.WriteString(f.Place)
	if f.Line > 0 {
		b.WriteString(":" + strconv.Itoa(f.Line))
	}
	b.WriteString(": ")
	if f.Key != "" {
		b.WriteString(f.Key + ": ")
	}
	b.WriteString(f.Problem)
	if f.Next != "" {
		b.WriteString("; " + f.Next)
	}
	return b.String()
}

// maxFaults is how many faults are kept; a wrong file of a million lines must not
// print a million lines.
const maxFaults = 100

// faults collects everything that is wrong.
type faults struct {
	list []error
	more int
}

func (f *faults) add(err error) {
	if len(f.list) < maxFaults {
		f.list = append(f.list, err)
	} else {
		f.more++
	}
}

func (f *faults) count() int { return len(f.list) + f.more }

// err returns all faults joined, or nil.
func (f *faults) err() error {
	if f.more > 0 {
		return errors.Join(append(f.list, fmt.Errorf("and %d more faults", f.more))...)
	}
	return errors.Join(f.list...)
}

// quote shows a value in a message, cut where it is long.
func quote(s string) string {
	const longest = 60
	if r := []rune(s); len(r) > longest {
		s = string(r[:longest]) + "…"
	}
	return strconv.Quote(s)
}
