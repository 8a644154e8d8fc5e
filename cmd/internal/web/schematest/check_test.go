package schematest_test

import (
	"strings"
	"testing"

	"slantwise/cmd/internal/web/schematest"
)

const schema = `{"$defs": {
 "part": {"type": "object", "properties": {"name": {"type": "string", "pattern": "^[a-z]+$"}}, "required": ["name"]},
 "whole": {"type": "object", "additionalProperties": false, "required": ["at", "parts"], "properties": {
  "at": {"type": "string", "format": "date-time"},
  "parts": {"type": "array", "items": {"$ref": "#/$defs/part"}},
  "share": {"type": ["number", "null"], "minimum": 0, "maximum": 1},
  "count": {"type": "integer"}}},
 "odd": {"oneOf": []}, "lost": {"$ref": "#/$defs/nobody"}, "loose": {"additionalProperties": {}}, "clock": {"format": "time"}}}`

// TestCheck has a case for each keyword, by the meaning that JSON Schema (draft 2020-12,
// Validation, section 6, and Core, sections 8.2.3 and 10) gives it.
func TestCheck(t *testing.T) {
	s, err := schematest.New([]byte(schema))
	if err != nil {
		t.Fatal(err)
	}
	const good = `{"at": "2026-09-15T00:00:00Z", "parts": [{"name": "a"}], "share": 0.5, "count": 2.0}`
	for _, row := range []struct{ name, definition, text, want string }{
		{"good", "whole", good, ""},
		{"an integer is a number", "whole", strings.Replace(good, "0.5", "1", 1), ""},
		{"one of the types", "whole", strings.Replace(good, "0.5", "null", 1), ""},
		{"none of the types", "whole", strings.Replace(good, "0.5", `"x"`, 1), "share: it is string"},
		{"no integer", "whole", strings.Replace(good, "2.0", "2.5", 1), "count: it is number and should be integer"},
		{"below", "whole", strings.Replace(good, "0.5", "-0.1", 1), "beyond the minimum"},
		{"above", "whole", strings.Replace(good, "0.5", "1.1", 1), "beyond the maximum"},
		{"missing", "whole", `{"at": "2026-09-15T00:00:00Z"}`, "parts is missing"},
		{"not described", "whole", strings.Replace(good, "count", "counts", 1), `"counts" is not described`},
		{"no time", "whole", strings.Replace(good, "T00", " 00", 1), "no date-time"},
		{"behind a reference", "whole", strings.Replace(good, `"a"`, `"A"`, 1), `whole.parts[0].name: "A" does not match`},
		{"missing behind a reference", "whole", strings.Replace(good, `{"name": "a"}`, `{}`, 1), "parts[0]: name is missing"},
		{"no list", "whole", strings.Replace(good, `[{"name": "a"}]`, `{}`, 1), "parts: it is object"},
		{"true", "part", `true`, "it is boolean"},
		{"two values", "part", `{"name": "a"} {}`, "something follows"},
		{"no JSON", "part", `{`, "unexpected EOF"},
		{"unknown keyword", "odd", `1`, `"oneOf" is not known`},
		{"reference to nothing", "lost", `1`, "leads nowhere"},
		{"a schema of others", "loose", `{}`, "not known here"},
		{"unknown format", "clock", `"12:00"`, "format time is not known"},
		{"unknown definition", "nothing", `1`, "does not define"},
	} {
		t.Run(row.name, func(t *testing.T) {
			err := s.Check(row.definition, []byte(row.text))
			if row.want == "" && err != nil || row.want != "" && (err == nil || !strings.Contains(err.Error(), row.want)) {
				t.Errorf("got %v, want %q", err, row.want)
			}
		})
	}
	for _, bad := range []string{"", "{}", `{"$defs": 1}`} {
		if _, err := schematest.New([]byte(bad)); err == nil {
			t.Errorf("%q is taken for a schema", bad)
		}
	}
}
