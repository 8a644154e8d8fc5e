// Package tree reads YAML, TOML and JSON into one kind of tree that keeps where
// each key stands, so that a fault in a value can be told with its line. It knows
// nothing of what the keys mean.
package tree

import (
	"bytes"
	"fmt"
	"unicode/utf8"
)

// Kind is what a node is.
type Kind int

// Kinds of nodes.
const (
	Null Kind = iota
	Text
	Number // Node.Text as it is written; it may be more than a float64 holds
	Bool
	List
	Map
	Loose // a scalar from outside the file, where text and number look the same
)

// String returns the kind in words, "a list".
func (k Kind) String() string {
	return [...]string{"nothing", "text", "a number", "true or false", "a list", "a group of keys", "a value"}[k]
}

// Node is a value of the file.
type Node struct {
	Kind    Kind
	Text    string // of a scalar
	Line    int    // from 1; 0 where it is not known
	Origin  string // where a value from outside the file comes from; empty for the file
	Entries []Entry
	Items   []*Node
}

// Entry is a key of a Map with its value. Keys may stand twice: that is for the
// reader of the tree to refuse.
type Entry struct {
	Key   string
	Line  int
	Value *Node
}

// Get returns the first value of a key, or nil.
func (n *Node) Get(key string) *Node {
	for _, e := range n.Entries {
		if e.Key == key {
			return e.Value
		}
	}
	return nil
}

// SyntaxError says why a text is no YAML, TOML or JSON.
type SyntaxError struct {
	Line int // from 1; 0 where it is not known
	Text string
}

// Error returns the text of the error, without the line.
func (e *SyntaxError) Error() string { return e.Text }

// Format is the notation of a file.
type Format int

// Formats.
const (
	YAML Format = iota
	TOML
	JSON
)

// Limits against files that would take all memory: a small YAML text can stand for
// an endless number of values.
const (
	maxDepth = 64
	maxNodes = 1_000_000
)

// Parse reads a text. Its top must be a group of keys. The error is a *SyntaxError.
func Parse(text []byte, format Format) (*Node, error) {
	text = bytes.TrimPrefix(text, []byte("\xef\xbb\xbf"))
	if err := checkText(text); err != nil {
		return nil, err
	}
	// Every value but the first stands behind a comma or a line end, so that this
	// bounds them before the memory for them is taken.
	if bytes.Count(text, []byte(","))+bytes.Count(text, []byte("\n")) > maxNodes {
		return nil, &SyntaxError{Text: fmt.Sprintf("the file holds more than %d values; make it smaller", maxNodes)}
	}
	parse := [...]func([]byte) (*Node, error){parseYAML, parseTOML, parseJSON}[format]
	root, err := parse(text)
	if err != nil {
		return nil, err
	}
	if root == nil || root.Kind == Null {
		return nil, &SyntaxError{Text: "the file is empty"}
	}
	if root.Kind != Map {
		return nil, &SyntaxError{Line: root.Line, Text: fmt.Sprintf("the file holds %s where keys with values are expected", root.Kind)}
	}
	return root, nil
}

// checkText refuses what is no text in UTF-8.
func checkText(text []byte) error {
	if len(bytes.TrimSpace(text)) == 0 {
		return &SyntaxError{Text: "the file is empty"}
	}
	if bytes.HasPrefix(text, []byte("\xff\xfe")) || bytes.HasPrefix(text, []byte("\xfe\xff")) {
		return &SyntaxError{Text: "the file is in UTF-16; save it in UTF-8"}
	}
	if at := bytes.IndexByte(text, 0); at >= 0 {
		return &SyntaxError{Line: lineAt(text, at), Text: "the file is binary, not text"}
	}
	for at := 0; at < len(text); {
		r, n := utf8.DecodeRune(text[at:])
		if r == utf8.RuneError && n == 1 {
			return &SyntaxError{Line: lineAt(text, at), Text: fmt.Sprintf("byte 0x%02X is not UTF-8; save the file in UTF-8", text[at])}
		}
		at += n
	}
	return nil
}

// lineAt returns the line, from 1, of a byte.
func lineAt(text []byte, at int) int { return 1 + bytes.Count(text[:at], []byte("\n")) }

// lineEnds returns the offsets of the line ends.
func lineEnds(text []byte) []int {
	var ends []int
	for i, c := range text {
		if c == '\n' {
			ends = append(ends, i)
		}
	}
	return ends
}
