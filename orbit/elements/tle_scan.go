package elements

import (
	"regexp"
	"strings"
	"unicode"

	"slantwise/orbit"
)

// tleLineKind is the part that a line plays in a two-line element set.
type tleLineKind int

const (
	lineName tleLineKind = iota
	lineOne
	lineTwo
	lineOdd // as long as an element line, but with another line number
)

// dataLine matches the head of line 1 or 2, short ones too; what else begins with
// "1 " or "2 " is a name, as long as it is shorter than minDataLine.
var dataLine = regexp.MustCompile(`^[12]\s+[0-9A-Za-z]?[0-9]{1,5}([UCS]?\s|$)`)

const (
	tleColumns  = 69
	minDataLine = 25 // one more than the 24 characters that a name line has by custom
)

// tleKind tells what a line without blanks around it is.
func tleKind(line string) tleLineKind {
	r := []rune(line[:min(len(line), 8)])
	if len(r) < 2 || !unicode.IsSpace(r[1]) {
		return lineName
	}
	if len(line) < minDataLine && !dataLine.MatchString(line) {
		return lineName
	}
	switch {
	case r[0] == '1':
		return lineOne
	case r[0] == '2':
		return lineTwo
	case r[0] >= '3' && r[0] <= '9' && len(line) > tleColumns-5:
		return lineOdd
	}
	return lineName
}

// tleLine is one line with its blanks around taken off.
type tleLine struct {
	text   string
	number int // in the file, from 1
	indent int // leading blanks taken off
}

// cols returns the 1-based columns a to b.
func (l tleLine) cols(a, b int) string { return l.text[a-1 : b] }

// tleScanner puts lines together to sets.
type tleScanner struct {
	rep       *report
	name, one *tleLine // read and waiting for what must follow
	sets      []orbit.Elements
}

func readTLE(text string, rep *report) []orbit.Elements {
	s := tleScanner{rep: rep}
	number := 0
	for raw := range strings.Lines(text) {
		number++
		body := strings.TrimRight(raw, " \r\n")
		bare := strings.TrimLeft(body, " ")
		if bare == "" || bare[0] == '#' {
			continue
		}
		s.line(tleLine{text: bare, number: number, indent: len(body) - len(bare)})
	}
	s.dropOne()
	s.dropName()
	return s.sets
}

func (s *tleScanner) line(l tleLine) {
	kind := tleKind(l.text)
	if kind == lineOdd {
		s.rep.fault(Fault{Line: l.number, Column: l.indent + 1, Field: "line number", Text: l.text[:1],
			Problem: "the first column of an element line must be 1 or 2", Next: nextFetch})
		kind = lineOne
		if s.one != nil {
			kind = lineTwo
		}
	}
	switch kind {
	case lineName:
		s.dropOne()
		s.dropName()
		s.name = &l
	case lineOne:
		s.dropOne()
		s.one = &l
	case lineTwo:
		s.two(l)
	}
}

func (s *tleScanner) two(l tleLine) {
	if s.one == nil {
		s.rep.fault(Fault{Line: l.number, Text: l.text, Problem: "line 2 of an element set without its line 1 before it", Next: nextFetch})
		s.name = nil
		return
	}
	if el, ok := parseTLE(s.name, *s.one, l, s.rep); ok {
		s.sets = append(s.sets, el)
	}
	s.name, s.one = nil, nil
}

// dropOne complains of a line 1 that was not followed by its line 2.
func (s *tleScanner) dropOne() {
	if s.one == nil {
		return
	}
	s.rep.fault(Fault{Line: s.one.number, Text: s.one.text, Problem: "line 1 of an element set without its line 2 after it", Next: nextFetch})
	s.name, s.one = nil, nil
}

// dropName complains of a name line that was not followed by an element set.
func (s *tleScanner) dropName() {
	if s.name == nil {
		return
	}
	s.rep.fault(Fault{Line: s.name.number, Text: s.name.text,
		Problem: "this line is no element line, and as a name it has no element set after it",
		Next:    "put the set below its name, or a # before a remark"})
	s.name = nil
}

const nextFetch = "fetch the set again, or copy it whole"
