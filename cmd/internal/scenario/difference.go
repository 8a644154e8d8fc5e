package scenario

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
)

// Difference is a key that is not the same in two scenarios, as it is written; an empty
// text where one does not have it.
type Difference struct{ Key, Before, After string }

// longestValue is how many letters of a value a Difference holds.
const longestValue = 120

// Differences lists the keys that are not the same in two scenarios, in the order of the
// first and then of the second. Parts of a list that have a name are paired by it, as
// stations[Skerry Point].latitude_deg, all others by their place. Notation counts for
// nothing: YAML against TOML differs in no key, and 1.0 equals 1.
func Differences(before, after *Scenario) []Difference {
	was, wasOrder := flatten(before.root)
	is, isOrder := flatten(after.root)
	var out []Difference
	for _, key := range wasOrder {
		if !sameValue(was[key], is[key]) {
			out = append(out, Difference{key, shortened(was[key]), shortened(is[key])})
		}
	}
	for _, key := range isOrder {
		if _, had := was[key]; !had {
			out = append(out, Difference{key, "", shortened(is[key])})
		}
	}
	return out
}

func sameValue(a, b string) bool {
	if a == b {
		return true
	}
	if strings.HasPrefix(a, "[") && strings.HasPrefix(b, "[") {
		return slices.EqualFunc(strings.Split(a, ", "), strings.Split(b, ", "), func(x, y string) bool {
			return strings.Replace(x, bare(x), "", 1) == strings.Replace(y, bare(y), "", 1) && sameValue(bare(x), bare(y))
		})
	}
	x, err := strconv.ParseFloat(a, 64)
	if err != nil {
		return false
	}
	y, err := strconv.ParseFloat(b, 64)
	return err == nil && x == y
}

// bare is a part of a list in a line without its brackets.
func bare(part string) string { return strings.Trim(part, "[]") }

func shortened(s string) string {
	letters := []rune(s)
	if len(letters) <= longestValue {
		return s
	}
	return string(letters[:longestValue]) + " …"
}

// flatten returns the scalars of a tree by their keys, and the keys in order.
func flatten(root *tree.Node) (map[string]string, []string) {
	all, order := map[string]string{}, []string{}
	var walk func(key string, n *tree.Node)
	put := func(key, text string) {
		if _, had := all[key]; !had {
			order = append(order, key)
		}
		all[key] = text
	}
	walk = func(key string, n *tree.Node) {
		switch {
		case n == nil:
		case n.Kind == tree.Map:
			for _, e := range n.Entries {
				walk(strings.TrimPrefix(key+"."+e.Key, "."), e.Value)
			}
		case n.Kind == tree.List && holdsMaps(n):
			for i, item := range n.Items {
				walk(fmt.Sprintf("%s[%s]", key, nameOf(item, i)), item)
			}
		default:
			put(key, inLine(n))
		}
	}
	walk("", root)
	return all, order
}

func holdsMaps(n *tree.Node) bool {
	for _, item := range n.Items {
		if item.Kind == tree.Map {
			return true
		}
	}
	return false
}

// nameOf is what a part of a list is called: its name, else its place.
func nameOf(n *tree.Node, place int) string {
	if n.Kind == tree.Map {
		if name := n.Get("name"); name != nil && name.Text != "" {
			return name.Text
		}
	}
	return strconv.Itoa(place)
}

// inLine writes a scalar, or a list of such, in a line.
func inLine(n *tree.Node) string {
	if n.Kind != tree.List {
		return n.Text
	}
	parts := make([]string, len(n.Items))
	for i, item := range n.Items {
		parts[i] = inLine(item)
	}
	return "[" + strings.Join(parts, ", ") + "]"
}
