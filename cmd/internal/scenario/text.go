package scenario

import (
	"slices"
	"strings"
	"unicode"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
)

// maxText is how long a text may be, in bytes.
const maxText = 4096

// text returns the text of a key; ok is false where it is not there or wrong, and
// the fault is noted then. It is never empty.
func (o object) text(key string) (s string, ok bool) {
	n := o.get(key)
	if n == nil {
		return "", false
	}
	return o.textAt(n, key, false)
}

// textAt reads the text of a node. With plain a number is taken as it is written, as
// a catalogue number may stand without quotes.
func (o object) textAt(n *tree.Node, name string, plain bool) (string, bool) {
	switch {
	case n.Kind == tree.Null:
		o.fault(n, name, "the key has no value", "give a text or remove the key")
	case n.Kind == tree.Number && !plain:
		o.fault(n, name, "%s is a number; it must be text", "put it in quotes", n.Text)
	case n.Kind != tree.Text && n.Kind != tree.Loose && n.Kind != tree.Number:
		o.fault(n, name, "%s is not allowed; it must be text", "put it in quotes if it is meant so", show(n))
	case strings.TrimSpace(n.Text) == "":
		o.fault(n, name, "%s is empty", "give a text", show(n))
	case strings.TrimSpace(n.Text) != n.Text:
		o.fault(n, name, "%s begins or ends with a blank", "remove it", show(n))
	case len(n.Text) > maxText:
		o.fault(n, name, "%s has %d bytes; it must have at most %d", "shorten it", show(n), len(n.Text), maxText)
	case strings.ContainsFunc(n.Text, unicode.IsControl):
		o.fault(n, name, "%s holds a control character", "remove it", show(n))
	default:
		return n.Text, true
	}
	return "", false
}

// word returns a word that must be one of those given, or the first of them where
// the key is not there. given tells whether a good word is there.
func (o object) word(key string, words ...string) (w string, given bool) {
	s, ok := o.text(key)
	if !ok {
		return words[0], false
	}
	if slices.Contains(words, s) {
		return s, true
	}
	o.notWord(o.get(key), key, s, words)
	return words[0], false
}

func (o object) notWord(at *tree.Node, key, s string, words []string) {
	next := ""
	if near := nearest.Names(s, words, 1); len(near) > 0 {
		next = "did you mean " + near[0] + "?"
	}
	o.fault(at, key, "%s is not allowed; it must be one of %s", next, quote(s), list(words))
}

// flag returns true or false of a key, false where it is not there.
func (o object) flag(key string) bool {
	n := o.get(key)
	if n == nil {
		return false
	}
	if n.Kind != tree.Bool && !(n.Kind == tree.Loose && (n.Text == "true" || n.Text == "false")) {
		o.fault(n, key, "%s is not allowed; it must be true or false", "", show(n))
		return false
	}
	return n.Text == "true" || n.Text == "True" || n.Text == "TRUE"
}
