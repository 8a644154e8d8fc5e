package tree

import (
	"bytes"
	"fmt"
	"strings"

	"go.yaml.in/yaml/v3"
)

// Edit changes values of a text and writes it as YAML. Of YAML without anchors the
// comments stay; of all else the values alone.
type Edit struct{ top *yaml.Node }

// Place is a group of keys in an Edit; the zero Place is nowhere.
type Place struct{ group *yaml.Node }

// NewEdit begins to change a text that Parse has read as root. It does not change root.
func NewEdit(text []byte, format Format, root *Node) *Edit {
	if format == YAML {
		var doc yaml.Node
		text = bytes.TrimPrefix(text, []byte("\xef\xbb\xbf"))
		if err := yaml.Unmarshal(text, &doc); err == nil && len(doc.Content) == 1 && !anchored(&doc) {
			return &Edit{top: &doc}
		}
	}
	return &Edit{top: &yaml.Node{Kind: yaml.DocumentNode, Content: []*yaml.Node{toYAML(root)}}}
}

// anchored tells whether a node below stands for another: a change there would be one
// in two places.
func anchored(n *yaml.Node) bool {
	if n.Anchor != "" || n.Kind == yaml.AliasNode {
		return true
	}
	for _, c := range n.Content {
		if anchored(c) {
			return true
		}
	}
	return false
}

// toYAML writes text in quotes, so that none is taken for something else.
func toYAML(n *Node) *yaml.Node {
	switch n.Kind {
	case Map:
		out := &yaml.Node{Kind: yaml.MappingNode}
		for _, e := range n.Entries {
			out.Content = append(out.Content, quoted(e.Key), toYAML(e.Value))
		}
		return out
	case List:
		out := &yaml.Node{Kind: yaml.SequenceNode}
		for _, item := range n.Items {
			out.Content = append(out.Content, toYAML(item))
		}
		return out
	case Text:
		out := quoted(n.Text)
		out.Style = yaml.DoubleQuotedStyle
		return out
	case Null:
		return &yaml.Node{Kind: yaml.ScalarNode, Tag: "!!null", Value: "null"}
	}
	return &yaml.Node{Kind: yaml.ScalarNode, Value: n.Text} // a number, true or false, or what looks like one
}

func quoted(text string) *yaml.Node {
	return &yaml.Node{Kind: yaml.ScalarNode, Tag: "!!str", Value: text}
}

// Root is the top of the file.
func (e *Edit) Root() Place { return Place{e.top.Content[0]} }

// get returns the value of a key, or nil.
func (p Place) get(key string) *yaml.Node {
	if p.group == nil || p.group.Kind != yaml.MappingNode {
		return nil
	}
	for i := 0; i+1 < len(p.group.Content); i += 2 {
		if p.group.Content[i].Value == key {
			return p.group.Content[i+1]
		}
	}
	return nil
}

// Item finds the group with a name in the list of a key.
func (e *Edit) Item(at Place, key, name string) (Place, bool) {
	list := at.get(key)
	if list == nil {
		return Place{}, false
	}
	for _, item := range list.Content {
		if n := (Place{item}).get("name"); n != nil && strings.TrimSpace(n.Value) == strings.TrimSpace(name) {
			return Place{item}, true
		}
	}
	return Place{}, false
}

// Keep leaves only the item with a name in the list of a key; false where there is none.
func (e *Edit) Keep(at Place, key, name string) bool {
	item, ok := e.Item(at, key, name)
	if ok {
		at.get(key).Content = []*yaml.Node{item.group}
	}
	return ok
}

// Set sets a scalar at a dotted key, and makes the groups that are missing on the way.
func (e *Edit) Set(at Place, key string, value Node) {
	parts := strings.Split(key, ".")
	for _, part := range parts[:len(parts)-1] {
		next := at.get(part)
		if next == nil {
			next = &yaml.Node{Kind: yaml.MappingNode}
			at.group.Content = append(at.group.Content, quoted(part), next)
		}
		at = Place{next}
	}
	last := parts[len(parts)-1]
	n := at.get(last)
	if n == nil {
		n = &yaml.Node{}
		at.group.Content = append(at.group.Content, quoted(last), n)
	}
	scalar := toYAML(&value)
	n.Kind, n.Tag, n.Value, n.Style, n.Content = scalar.Kind, scalar.Tag, scalar.Value, scalar.Style, nil
}

// Remove takes a dotted key away where it is there.
func (e *Edit) Remove(at Place, key string) {
	group, last, deep := strings.Cut(key, ".")
	if deep {
		e.Remove(Place{at.get(group)}, last)
		return
	}
	if at.get(key) == nil {
		return
	}
	c := at.group.Content
	for i := 0; i+1 < len(c); i += 2 {
		if c[i].Value == key {
			at.group.Content = append(c[:i:i], c[i+2:]...)
			return
		}
	}
}

// Text returns the YAML with lines of comment at its top.
func (e *Edit) Text(heading []string) ([]byte, error) {
	var b bytes.Buffer
	for _, line := range heading {
		fmt.Fprintf(&b, "# %s\n", strings.Map(inComment, line))
	}
	b.WriteByte('\n')
	out := yaml.NewEncoder(&b)
	out.SetIndent(2)
	if err := out.Encode(e.top); err != nil {
		return nil, fmt.Errorf("writing YAML: %w", err)
	}
	if err := out.Close(); err != nil {
		return nil, fmt.Errorf("writing YAML: %w", err)
	}
	return b.Bytes(), nil
}

// inComment keeps a comment in its line.
func inComment(r rune) rune {
	if r < ' ' || r == 0x7f || r == 0x85 || r == 0x2028 || r == 0x2029 {
		return ' '
	}
	return r
}
