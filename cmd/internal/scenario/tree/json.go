package tree

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"sort"
)

func parseJSON(text []byte) (*Node, error) {
	// The token reader below does not tell every fault; the whole check does.
	var whole json.RawMessage
	if err := json.Unmarshal(text, &whole); err != nil {
		out := &SyntaxError{Text: "this is not JSON: " + err.Error()}
		var se *json.SyntaxError
		if errors.As(err, &se) {
			out.Line = lineAt(text, min(int(se.Offset), len(text)))
		}
		return nil, out
	}
	w := jsonWalk{d: json.NewDecoder(bytes.NewReader(text)), ends: lineEnds(text)}
	w.d.UseNumber()
	return w.node(0)
}

// jsonWalk builds the tree from the library's tokens.
type jsonWalk struct {
	d    *json.Decoder
	ends []int // offsets of the line ends
}

// line returns the line of the token that was read last.
func (w *jsonWalk) line() int {
	last := int(w.d.InputOffset()) - 1 // tokens do not span lines
	return 1 + sort.SearchInts(w.ends, last)
}

func (w *jsonWalk) node(depth int) (*Node, error) {
	tok, err := w.d.Token()
	if err != nil {
		return nil, &SyntaxError{Line: w.line(), Text: "this is not JSON: " + err.Error()}
	}
	if depth > maxDepth {
		return nil, &SyntaxError{Line: w.line(), Text: fmt.Sprintf("the values are nested more than %d deep", maxDepth)}
	}
	out := &Node{Line: w.line()}
	switch v := tok.(type) {
	case string:
		out.Kind, out.Text = Text, v
	case json.Number:
		out.Kind, out.Text = Number, v.String()
	case bool:
		out.Kind, out.Text = Bool, fmt.Sprint(v)
	case json.Delim:
		if v == '[' {
			return out, w.list(out, depth)
		}
		return out, w.object(out, depth)
	}
	return out, nil
}

func (w *jsonWalk) list(out *Node, depth int) error {
	out.Kind = List
	for w.d.More() {
		n, err := w.node(depth + 1)
		if err != nil {
			return err
		}
		out.Items = append(out.Items, n)
	}
	return w.close()
}

func (w *jsonWalk) object(out *Node, depth int) error {
	out.Kind = Map
	for w.d.More() {
		key, err := w.node(depth + 1)
		if err != nil {
			return err
		}
		n, err := w.node(depth + 1)
		if err != nil {
			return err
		}
		out.Entries = append(out.Entries, Entry{Key: key.Text, Line: key.Line, Value: n})
	}
	return w.close()
}

// close reads the bracket that ends a list or an object.
func (w *jsonWalk) close() error {
	if _, err := w.d.Token(); err != nil {
		return &SyntaxError{Line: w.line(), Text: "this is not JSON: " + err.Error()}
	}
	return nil
}
