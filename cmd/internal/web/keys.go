package web

import (
	"encoding/json"
	"fmt"
	"maps"
	"reflect"
	"slices"
	"strings"
)

// exactKeys refuses keys of an object that are none of a struct's, letter by letter: the package for
// JSON takes DISH_M for dish_m, and of both the last. What is no object is left to the decoder, which
// says it better.
func exactKeys(body []byte, into any) error {
	var given map[string]json.RawMessage
	if json.Unmarshal(body, &given) != nil {
		return nil
	}
	var known []string
	for _, f := range reflect.VisibleFields(reflect.TypeOf(into).Elem()) {
		if name, _, _ := strings.Cut(f.Tag.Get("json"), ","); name != "" && name != "-" {
			known = append(known, name)
		}
	}
	for _, key := range slices.Sorted(maps.Keys(given)) {
		if !slices.Contains(known, key) {
			return fmt.Errorf("unknown field %q; allowed are %s", key, strings.Join(known, ", "))
		}
	}
	return nil
}
