// Package schematest checks JSON against a schema, for tests alone.
//
// It knows the keywords of JSON Schema (draft 2020-12, core and validation vocabularies)
// that the project's schemas use: $ref into $defs, type, properties, required,
// additionalProperties as true or false, items, minimum, maximum, pattern, format
// date-time. Any other keyword is an error, so that none is passed over. Beyond the
// standard it refuses properties that a schema does not name: what is answered must be
// described.
package schematest

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"math"
	"regexp"
	"slices"
	"strings"
	"time"
)

// Schema is a read schema.
type Schema struct{ defs map[string]any }

// New reads a schema whose definitions stand in $defs.
func New(text []byte) (*Schema, error) {
	top, err := parse(text)
	if err != nil {
		return nil, err
	}
	o, _ := top.(map[string]any)
	defs, ok := o["$defs"].(map[string]any)
	if !ok {
		return nil, errors.New("the schema has no $defs")
	}
	return &Schema{defs: defs}, nil
}

func parse(text []byte) (any, error) {
	d := json.NewDecoder(bytes.NewReader(text))
	d.UseNumber()
	var v any
	if err := d.Decode(&v); err != nil {
		return nil, err
	}
	if d.More() {
		return nil, errors.New("something follows the value")
	}
	return v, nil
}

// Check holds a text against a definition and returns all that is wrong, joined.
func (s *Schema) Check(definition string, text []byte) error {
	v, err := parse(text)
	if err != nil {
		return err
	}
	rule, ok := s.defs[definition].(map[string]any)
	if !ok {
		return fmt.Errorf("the schema does not define %q", definition)
	}
	c := checker{schema: s}
	c.value(definition, rule, v)
	return errors.Join(c.faults...)
}

type checker struct {
	schema *Schema
	faults []error
}

func (c *checker) fault(at, format string, args ...any) {
	c.faults = append(c.faults, fmt.Errorf("%s: %s", at, fmt.Sprintf(format, args...)))
}

// value checks a value against every keyword of a rule, in alphabetic order.
func (c *checker) value(at string, rule map[string]any, v any) {
	for _, keyword := range slices.Sorted(maps.Keys(rule)) {
		want := rule[keyword]
		switch keyword {
		case "description", "title", "properties": // properties: below
		case "$ref":
			name, _ := want.(string)
			def, ok := c.schema.defs[strings.TrimPrefix(name, "#/$defs/")].(map[string]any)
			if !ok {
				c.fault(at, "$ref %q leads nowhere", name)
				continue
			}
			c.value(at, def, v)
		case "type":
			c.kind(at, want, v)
		case "required":
			o, is := v.(map[string]any)
			names, _ := want.([]any)
			for _, n := range names {
				if _, has := o[fmt.Sprint(n)]; is && !has {
					c.fault(at, "%v is missing", n)
				}
			}
		case "additionalProperties":
			if _, is := want.(bool); !is {
				c.fault(at, "additionalProperties as a schema is not known here")
			}
		case "items":
			each, _ := want.(map[string]any)
			list, _ := v.([]any)
			for i, item := range list {
				c.value(fmt.Sprintf("%s[%d]", at, i), each, item)
			}
		case "minimum", "maximum", "pattern", "format":
			c.limit(at, keyword, want, v)
		default:
			c.fault(at, "the keyword %q is not known here", keyword)
		}
	}
	if names, has := rule["properties"].(map[string]any); has {
		c.properties(at, names, v)
	}
}

func (c *checker) properties(at string, names map[string]any, v any) {
	o, _ := v.(map[string]any)
	for _, key := range slices.Sorted(maps.Keys(o)) {
		rule, described := names[key].(map[string]any)
		if !described {
			c.fault(at, "%q is not described", key)
			continue
		}
		c.value(at+"."+key, rule, o[key])
	}
}

// kind checks the type, one or a list of them.
func (c *checker) kind(at string, want, v any) {
	kinds, many := want.([]any)
	if !many {
		kinds = []any{want}
	}
	if got := kindOf(v); !slices.Contains(kinds, any(got)) && !(got == "integer" && slices.Contains(kinds, any("number"))) {
		c.fault(at, "it is %s and should be %v", got, want)
	}
}

func kindOf(v any) string {
	switch v := v.(type) {
	case nil:
		return "null"
	case bool:
		return "boolean"
	case string:
		return "string"
	case []any:
		return "array"
	case map[string]any:
		return "object"
	case json.Number:
		if f, err := v.Float64(); err == nil && f == math.Trunc(f) {
			return "integer"
		}
	}
	return "number"
}

// limit checks what holds for numbers, or for strings, alone.
func (c *checker) limit(at, keyword string, want, v any) {
	text, isText := v.(string)
	number, isNumber := v.(json.Number)
	switch {
	case keyword == "pattern" && isText:
		if ok, err := regexp.MatchString(fmt.Sprint(want), text); err != nil || !ok {
			c.fault(at, "%q does not match %v", text, want)
		}
	case keyword == "format" && isText:
		if want != "date-time" {
			c.fault(at, "the format %v is not known here", want)
		} else if _, err := time.Parse(time.RFC3339, text); err != nil {
			c.fault(at, "%q is no date-time", text)
		}
	case (keyword == "minimum" || keyword == "maximum") && isNumber:
		bound, ok := want.(json.Number)
		end, err := bound.Float64()
		if got, bad := number.Float64(); !ok || err != nil || bad != nil || keyword == "minimum" && got < end || keyword == "maximum" && got > end {
			c.fault(at, "%v is beyond the %s, %v", number, keyword, want)
		}
	}
}
