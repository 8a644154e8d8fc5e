package scenario

import (
	"fmt"

	"slantwise/cmd/internal/scenario/tree"
)

// items returns the items of a list. A list that is there must hold at least one.
func (o object) items(key, of string, most int) []*tree.Node {
	n := o.get(key)
	if n == nil {
		return nil
	}
	switch {
	case n.Kind != tree.List:
		o.fault(n, key, "%s is not allowed; it must be a list of %s", "", show(n), of)
	case len(n.Items) == 0:
		o.fault(n, key, "the list is empty", "give %s or remove the key", of)
	case len(n.Items) > most:
		o.fault(n, key, "the list has %d items; it may have at most %d", "", len(n.Items), most)
	default:
		return n.Items
	}
	return nil
}

// objects returns the items of a list of groups, each with its path.
func (o object) objects(key, of string, most int, known []string) []object {
	var out []object
	for i, n := range o.items(key, of, most) {
		if c := o.r.object(n, fmt.Sprintf("%s%s[%d]", o.path, key, i), known); c.node != nil {
			c.about = o.about
			out = append(out, c)
		}
	}
	return out
}

// child returns the group of keys below a key; its node is nil where there is none.
func (o object) child(key string, known []string) object {
	c := o.r.object(o.get(key), o.path+key, known)
	c.about = o.about
	return c
}

// pairs reads a list of [a, b], both numbers in their spans. ok is false where
// anything is wrong.
func (o object) pairs(key, of string, a, b span) (out [][2]float64, ok bool) {
	before := o.r.faults.count()
	for i, n := range o.items(key, of, maxRows) {
		name := fmt.Sprintf("%s[%d]", key, i)
		if n.Kind != tree.List || len(n.Items) != 2 {
			o.fault(n, name, "%s is not allowed; it must be %s", "", showRow(n), of)
			continue
		}
		x, okX := o.numberAt(n.Items[0], name+"[0]", a)
		y, okY := o.numberAt(n.Items[1], name+"[1]", b)
		if okX && okY {
			out = append(out, [2]float64{x, y})
		}
	}
	return out, len(out) > 0 && o.r.faults.count() == before
}

// showRow describes a row of a table for a message.
func showRow(n *tree.Node) string {
	if n.Kind == tree.List {
		return fmt.Sprintf("a list of %d", len(n.Items))
	}
	return show(n)
}

// names reads the name of each item and refuses those that stand twice. what is the
// kind of item, "station".
func names(what string, items []object) []string {
	out := make([]string, len(items))
	first := map[string]int{}
	for i, it := range items {
		if !it.has("name") {
			it.missing("name", "the name of the "+what)
			continue
		}
		s, ok := it.text("name")
		if !ok {
			continue
		}
		if line, twice := first[s]; twice {
			it.fault(it.get("name"), "name", "two items are named %s, the first in line %d", "give each %s a name of its own", quote(s), line, what)
		} else {
			first[s] = it.get("name").Line
		}
		out[i] = s
	}
	return out
}

// Limits of lists: more than anyone means, few enough to be checked in a moment.
const (
	maxRows       = 100_000
	maxSpacecraft = 100_000
	maxStations   = 10_000
	maxParts      = 1_000 // transmitters, antennas, modes, stages of one owner
)
