package tree

import (
	"errors"
	"fmt"
	"sort"
	"strings"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"
)

func parseTOML(text []byte) (*Node, error) {
	// The library's own reading finds all that the expressions below do not tell:
	// keys that stand twice, tables that are defined again.
	var whole map[string]any
	if err := toml.Unmarshal(text, &whole); err != nil {
		out := &SyntaxError{Text: "this is not TOML: " + strings.TrimPrefix(err.Error(), "toml: ")}
		var de *toml.DecodeError
		if errors.As(err, &de) {
			out.Line, _ = de.Position()
		}
		return nil, out
	}
	w := tomlWalk{root: &Node{Kind: Map, Line: 1}, ends: lineEnds(text)}
	w.p.Reset(text)
	table := w.root
	for w.p.NextExpression() {
		e := w.p.Expression()
		var err error
		switch e.Kind {
		case unstable.Table:
			table = w.descend(w.root, e.Key())
		case unstable.ArrayTable:
			table = w.appendTable(e.Key())
		case unstable.KeyValue:
			err = w.keyValue(table, e, 0)
		}
		if err != nil {
			return nil, err
		}
	}
	if err := w.p.Error(); err != nil {
		return nil, &SyntaxError{Text: "this is not TOML: " + err.Error()}
	}
	return w.root, nil
}

// tomlWalk builds the tree from the library's expressions.
type tomlWalk struct {
	p    unstable.Parser
	root *Node
	ends []int // offsets of the line ends
}

func (w *tomlWalk) line(n *unstable.Node) int { return 1 + sort.SearchInts(w.ends, int(n.Raw.Offset)) }

// descend follows a dotted key and makes the groups that are not there yet. Of a
// list of tables the last one is meant.
func (w *tomlWalk) descend(n *Node, key unstable.Iterator) *Node {
	for key.Next() {
		n = w.child(n, key.Node())
	}
	return n
}

func (w *tomlWalk) child(n *Node, key *unstable.Node) *Node {
	name := string(key.Data)
	next := n.Get(name)
	if next == nil {
		next = &Node{Kind: Map, Line: w.line(key)}
		n.Entries = append(n.Entries, Entry{Key: name, Line: next.Line, Value: next})
	}
	if next.Kind == List {
		next = next.Items[len(next.Items)-1]
	}
	return next
}

// appendTable adds a table to the list that a dotted key names.
func (w *tomlWalk) appendTable(key unstable.Iterator) *Node {
	n := w.root
	for key.Next() {
		k := key.Node()
		if !key.IsLast() {
			n = w.child(n, k)
			continue
		}
		list := n.Get(string(k.Data))
		if list == nil {
			list = &Node{Kind: List, Line: w.line(k)}
			n.Entries = append(n.Entries, Entry{Key: string(k.Data), Line: list.Line, Value: list})
		}
		n = &Node{Kind: Map, Line: w.line(k)}
		list.Items = append(list.Items, n)
	}
	return n
}

func (w *tomlWalk) keyValue(table *Node, e *unstable.Node, depth int) error {
	key := e.Key()
	for key.Next() {
		k := key.Node()
		if !key.IsLast() {
			table = w.child(table, k)
			continue
		}
		v, err := w.value(e.Value(), w.line(k), depth)
		if err != nil {
			return err
		}
		table.Entries = append(table.Entries, Entry{Key: string(k.Data), Line: w.line(k), Value: v})
	}
	return nil
}

// value returns a value; the library tells no line of most of them, so that of the
// key stands for it.
func (w *tomlWalk) value(v *unstable.Node, line, depth int) (*Node, error) {
	if depth > maxDepth {
		return nil, &SyntaxError{Line: line, Text: fmt.Sprintf("the values are nested more than %d deep", maxDepth)}
	}
	out := &Node{Line: line, Text: string(v.Data)}
	switch v.Kind {
	case unstable.Bool:
		out.Kind = Bool
	case unstable.Integer, unstable.Float:
		out.Kind = Number
	case unstable.Array:
		out.Kind = List
		for it := v.Children(); it.Next(); {
			item, err := w.value(it.Node(), line, depth+1)
			if err != nil {
				return nil, err
			}
			out.Items = append(out.Items, item)
		}
	case unstable.InlineTable:
		out.Kind = Map
		for it := v.Children(); it.Next(); {
			if err := w.keyValue(out, it.Node(), depth+1); err != nil {
				return nil, err
			}
		}
	default: // strings, dates and times
		out.Kind = Text
	}
	return out, nil
}
