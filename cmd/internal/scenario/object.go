package scenario

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/modem"
	"slantwise/downlink/propagation"
	"slantwise/orbit"
)

// reader turns the tree of a scenario into domain values and collects what is wrong
// and what was assumed on the way.
type reader struct {
	place         string // the file as it was named
	src           *source
	need          Need
	asked         propagation.Exceedance // the percentage at which curves of the climate will be read; 0: at none
	catalogue     *modem.Catalogue       // in which modes are looked up; nil: the standard one
	codingsUnread bool                   // a file of its rows is at fault
	earthTurn     orbit.EarthOrientation // of the scenario
	span          Window                 // of the scenario
	faults        faults
	assumptions   []Note
	warnings      []Note
}

// object reads the keys of one group. The zero value has no key at all.
type object struct {
	r     *reader
	node  *tree.Node
	path  string          // key path with a dot at its end; empty at the top
	about string          // what the group is, "station Skerry Point", for notes
	meant map[string]bool // known keys that an unknown one was probably meant to be
}

// object checks that node is a group of known keys, each once.
func (r *reader) object(node *tree.Node, path string, known []string) object {
	o := object{r: r, node: node, meant: map[string]bool{}}
	if path != "" {
		o.path = path + "."
	}
	if node == nil {
		return o
	}
	if node.Kind != tree.Map {
		r.faultAt(node, path, "%s is not allowed; it must be a group of keys (%s)", show(node), list(known))
		o.node = nil
		return o
	}
	seen := map[string]int{}
	for _, e := range node.Entries {
		if first := seen[e.Key]; first > 0 {
			o.fault(&tree.Node{Line: e.Line}, safeKey(e.Key), "the key stands twice, first in line %d", "remove one of the two", first)
			continue
		}
		seen[e.Key] = max(e.Line, 1)
		if !slices.Contains(known, e.Key) {
			o.unknown(e, known)
		}
	}
	return o
}

var plainKey = regexp.MustCompile(`^[A-Za-z0-9_-]{1,60}$`)

// safeKey quotes a key that could look like something else in a message.
func safeKey(key string) string {
	if plainKey.MatchString(key) {
		return key
	}
	return quote(key)
}

func (o object) unknown(e tree.Entry, known []string) {
	at := &tree.Node{Line: e.Line}
	e.Key = safeKey(e.Key)
	switch near := nearest.Names(e.Key, known, 1); {
	case len(near) > 0:
		o.meant[near[0]] = true
		o.fault(at, e.Key, "the key is not known", "did you mean %s?", near[0])
	case len(known) == 0:
		o.fault(at, e.Key, "the key is not known", "no key is taken here yet, remove it")
	default:
		o.fault(at, e.Key, "the key is not known", "it must be one of %s", list(known))
	}
}

// fault adds a fault at a key of the group. The arguments fill problem and next
// together.
func (o object) fault(at *tree.Node, key, problem, next string, args ...any) {
	if next != "" {
		problem += "\x00" + next
	}
	text := fmt.Sprintf(problem, args...)
	problem, next, _ = strings.Cut(text, "\x00")
	o.r.add(at, o.path+key, problem, next)
}

// faultAt adds a fault without advice beyond its text.
func (r *reader) faultAt(at *tree.Node, path, format string, args ...any) {
	r.add(at, path, fmt.Sprintf(format, args...), "")
}

func (r *reader) add(at *tree.Node, path, problem, next string) {
	f := &Fault{Place: r.place, Key: path, Problem: problem, Next: next}
	if at != nil {
		f.Line = at.Line
		if at.Origin != "" {
			f.Place, f.Line = at.Origin, 0
		}
	}
	r.faults.add(f)
}

// addAll adds an error of another package, or each of those joined in it, at a node.
func (o object) addAll(at *tree.Node, key string, err error) {
	if err == nil {
		return
	}
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		for _, e := range joined.Unwrap() {
			o.addAll(at, key, e)
		}
		return
	}
	o.r.add(at, strings.TrimSuffix(o.path+key, "."), err.Error(), "")
}

// assume notes a default that was taken.
func (o object) assume(format string, args ...any) {
	o.r.assumptions = append(o.r.assumptions, Note{About: o.about, Text: fmt.Sprintf(format, args...)})
}

// warn notes what may make an answer wrong.
func (o object) warn(format string, args ...any) {
	o.r.warnings = append(o.r.warnings, Note{About: o.about, Text: fmt.Sprintf(format, args...)})
}

// has tells whether a key is there.
func (o object) has(key string) bool { return o.get(key) != nil }

func (o object) get(key string) *tree.Node {
	if o.node == nil {
		return nil
	}
	return o.node.Get(key)
}

// present lists those of the keys that are there.
func (o object) present(keys ...string) []string {
	var out []string
	for _, k := range keys {
		if o.has(k) {
			out = append(out, k)
		}
	}
	return out
}

// missing adds a fault for a key that must be there.
func (o object) missing(key, must string) {
	if o.node != nil && !o.meant[key] { // otherwise there is a fault already
		o.fault(o.node, key, "the key is missing", "give %s", must)
	}
}

// useless adds a fault for each key that has no effect here.
func (o object) useless(why string, keys ...string) {
	for _, k := range o.present(keys...) {
		o.fault(o.get(k), k, "the key has no effect %s", "remove it", why)
	}
}

// exclusive adds a fault where several of the alternatives are there, and tells
// which one is.
func (o object) exclusive(keys ...string) (string, bool) {
	have := o.present(keys...)
	if len(have) > 1 {
		o.fault(o.get(have[1]), have[1], "it stands beside %s, which says the same in another way", "keep one of %s", have[0], list(have))
	}
	if len(have) == 0 {
		return "", false
	}
	return have[0], true
}

// list joins words for a message.
func list(words []string) string { return strings.Join(words, ", ") }

// show describes a value for a message.
func show(n *tree.Node) string {
	switch n.Kind {
	case tree.Number, tree.Bool:
		return n.Text
	case tree.Text, tree.Loose:
		return quote(n.Text)
	}
	return n.Kind.String()
}
