package cli

import (
	"fmt"
	"strings"
)

// pick returns the item that name names. An empty name picks the only item there
// is. The error is an *InputError: it lists the names, the nearest first where name
// is unknown. what is the kind of item and its flag's name, "station".
func pick[T any](what, name string, items []T, nameOf func(*T) string) (*T, error) {
	names := make([]string, len(items))
	for i := range items {
		names[i] = nameOf(&items[i])
		if name != "" && names[i] == name {
			return &items[i], nil
		}
	}
	switch {
	case len(items) == 0:
		return nil, inputErrorf("%s: the scenario holds none; add one to it", what)
	case name != "":
		return nil, inputErrorf("--%s: %q is not in the scenario%s; it holds %s", what, name, meant(name, names), quotedList(names))
	case len(items) > 1:
		return nil, inputErrorf("--%s: left out, and the scenario holds %d; name one of %s", what, len(items), quotedList(names))
	}
	return &items[0], nil
}

// pickMany returns the items that the names name, in the order of items; no names
// pick all. Errors are as those of pick.
func pickMany[T any](what string, names []string, items []T, nameOf func(*T) string) ([]T, error) {
	if len(names) == 0 {
		return items, nil
	}
	wanted := map[string]bool{}
	for _, n := range names {
		if strings.TrimSpace(n) == "" {
			return nil, inputErrorf("--%s: the name is empty; give one, or leave the flag out for all", what)
		}
		it, err := pick(what, strings.TrimSpace(n), items, nameOf)
		if err != nil {
			return nil, err
		}
		wanted[nameOf(it)] = true
	}
	var out []T
	for i := range items {
		if wanted[nameOf(&items[i])] {
			out = append(out, items[i])
		}
	}
	return out, nil
}

// listLimit is how many names an error lists.
const listLimit = 20

func quotedList(names []string) string {
	var b strings.Builder
	for i, n := range names {
		if i == listLimit {
			fmt.Fprintf(&b, " and %d more", len(names)-i)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%q", n)
	}
	return b.String()
}
