package tree

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v3"
)

func parseYAML(text []byte) (*Node, error) {
	d := yaml.NewDecoder(bytes.NewReader(text))
	var doc, next yaml.Node
	if err := d.Decode(&doc); err != nil {
		if errors.Is(err, io.EOF) { // comments alone
			return nil, nil
		}
		return nil, yamlError(err)
	}
	switch err := d.Decode(&next); {
	case err == nil:
		return nil, &SyntaxError{Line: next.Line, Text: "a second document begins here; a scenario is one document, remove the ---"}
	case !errors.Is(err, io.EOF):
		return nil, yamlError(err)
	}
	if len(doc.Content) == 0 {
		return nil, nil
	}
	w := yamlWalk{open: map[*yaml.Node]bool{}}
	return w.node(doc.Content[0], 0)
}

var yamlLine = regexp.MustCompile(`^line (\d+): `)

// countsFromZero are the errors of the library's parser, which count lines from 0;
// those of its scanner count from 1.
var countsFromZero = regexp.MustCompile(`^did not find expected (key|node content|'-' indicator|',' or '[\]}]'|<document start>)`)

// yamlError brings the library's error into a *SyntaxError.
func yamlError(err error) error {
	text := strings.TrimPrefix(err.Error(), "yaml: ")
	out := &SyntaxError{}
	if m := yamlLine.FindStringSubmatch(text); m != nil {
		out.Line, _ = strconv.Atoi(m[1]) // digits by the pattern; 0 where they are too many
		text = text[len(m[0]):]
		if countsFromZero.MatchString(text) {
			out.Line++
		}
	}
	out.Text = "this is not YAML: " + text
	return out
}

// yamlWalk turns the library's nodes into ours.
type yamlWalk struct {
	open  map[*yaml.Node]bool // anchors whose content is being walked
	nodes int
}

func (w *yamlWalk) node(y *yaml.Node, depth int) (*Node, error) {
	w.nodes++
	if w.nodes > maxNodes {
		return nil, &SyntaxError{Line: y.Line, Text: fmt.Sprintf("the file stands for more than %d values (aliases that repeat each other?); make it smaller", maxNodes)}
	}
	if depth > maxDepth {
		return nil, &SyntaxError{Line: y.Line, Text: fmt.Sprintf("the values are nested more than %d deep", maxDepth)}
	}
	switch y.Kind {
	case yaml.AliasNode:
		return w.alias(y, depth)
	case yaml.MappingNode:
		return w.mapping(y, depth)
	case yaml.SequenceNode:
		out := &Node{Kind: List, Line: y.Line}
		for _, item := range y.Content {
			n, err := w.node(item, depth+1)
			if err != nil {
				return nil, err
			}
			out.Items = append(out.Items, n)
		}
		return out, nil
	}
	return yamlScalar(y)
}

func (w *yamlWalk) alias(y *yaml.Node, depth int) (*Node, error) {
	if w.open[y.Alias] {
		return nil, &SyntaxError{Line: y.Line, Text: fmt.Sprintf("the alias *%s stands inside what it stands for", y.Value)}
	}
	w.open[y.Alias] = true
	defer delete(w.open, y.Alias)
	n, err := w.node(y.Alias, depth+1)
	if err != nil {
		return nil, err
	}
	n.Line = y.Line
	return n, nil
}

func (w *yamlWalk) mapping(y *yaml.Node, depth int) (*Node, error) {
	out := &Node{Kind: Map, Line: y.Line}
	for i := 0; i+1 < len(y.Content); i += 2 {
		key := y.Content[i]
		if key.Kind != yaml.ScalarNode {
			return nil, &SyntaxError{Line: key.Line, Text: "a key must be a word, not a list, a group or an alias"}
		}
		n, err := w.node(y.Content[i+1], depth+1)
		if err != nil {
			return nil, err
		}
		out.Entries = append(out.Entries, Entry{Key: key.Value, Line: key.Line, Value: n})
	}
	return out, nil
}

func yamlScalar(y *yaml.Node) (*Node, error) {
	kind, ok := map[string]Kind{
		"!!null": Null, "!!bool": Bool, "!!int": Number, "!!float": Number,
		"!!str": Text, "!!timestamp": Text, "!!merge": Text,
	}[y.ShortTag()]
	if !ok {
		return nil, &SyntaxError{Line: y.Line, Text: fmt.Sprintf("the tag %s is not known here; remove it", y.Tag)}
	}
	return &Node{Kind: kind, Text: y.Value, Line: y.Line}, nil
}
