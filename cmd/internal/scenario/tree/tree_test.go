package tree_test

import (
	"errors"
	"testing"

	"slantwise/cmd/internal/scenario/tree"
)

// TestLines reads one content in three notations and asks where each value stands.
func TestLines(t *testing.T) {
	for _, tt := range []struct {
		name   string
		format tree.Format
		text   string
		start  int // line of window.start
		second int // line of the second station's name
	}{
		{"YAML", tree.YAML, "\xef\xbb\xbf# mark at the front\nwindow:\n  start: 2026-01-01T00:00:00Z\r\nstations:\n- name: A\n- {size: 1.5e3, name: B}\n", 3, 6},
		{"TOML", tree.TOML, "[window]\nstart = 2026-01-01T00:00:00Z\n\n[[stations]]\nname = \"A\"\n[[stations]]\nsize = 1.5e3\nname = 'B'\n", 2, 8},
		{"TOML inline", tree.TOML, "window.start = \"2026-01-01T00:00:00Z\"\nstations = [{name = \"A\"}, {size = 1.5e3, name = \"B\"}]\n", 1, 2},
		{"JSON", tree.JSON, "{\n\t\"window\": {\n\t\t\"start\": \"2026-01-01T00:00:00Z\"},\n \"stations\": [{\"name\": \"A\"},\n  {\"size\": 1.5e3,\n   \"name\": \"B\"}]}", 3, 6},
	} {
		root, err := tree.Parse([]byte(tt.text), tt.format)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		start := root.Get("window").Get("start")
		if start.Kind != tree.Text || start.Text != "2026-01-01T00:00:00Z" || start.Line != tt.start {
			t.Errorf("%s: start %+v, want the text in line %d", tt.name, start, tt.start)
		}
		b := root.Get("stations").Items[1]
		if n := b.Get("name"); n.Kind != tree.Text || n.Text != "B" || n.Line != tt.second {
			t.Errorf("%s: name %+v, want B in line %d", tt.name, n, tt.second)
		}
		if n := b.Get("size"); n.Kind != tree.Number || n.Text != "1.5e3" {
			t.Errorf("%s: size %+v, want the number as it is written", tt.name, n)
		}
	}
}

func TestYAMLAliases(t *testing.T) {
	root, err := tree.Parse([]byte("a: &x {k: 1}\nb:\n  c: *x\n"), tree.YAML)
	if err != nil {
		t.Fatal(err)
	}
	if n := root.Get("b").Get("c"); n.Get("k").Text != "1" || n.Line != 3 {
		t.Errorf("the alias stands for %+v in line %d, want k: 1 in line 3", n.Get("k"), n.Line)
	}
}

func TestSyntaxErrorsTellTheLine(t *testing.T) {
	for _, tt := range []struct {
		format tree.Format
		text   string
		line   int
	}{
		{tree.YAML, "a: 1\nb: [1\nc: 2\n", 2}, // where the list begins
		{tree.YAML, "a: 1\n? [b]\n: 2\n", 2},
		{tree.TOML, "a = 1\nb = \n", 2},
		{tree.JSON, "{\"a\": 1,\n \"b\": tru}\n", 2},
		{tree.JSON, "{\"a\": 1,\n \"b\": [1,\n", 3},
	} {
		_, err := tree.Parse([]byte(tt.text), tt.format)
		var se *tree.SyntaxError
		if !errors.As(err, &se) {
			t.Errorf("%q: %v, want a syntax error", tt.text, err)
		} else if se.Line != tt.line {
			t.Errorf("%q: %v in line %d, want line %d", tt.text, se, se.Line, tt.line)
		}
	}
}
