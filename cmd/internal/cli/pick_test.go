package cli

import (
	"errors"
	"slices"
	"testing"
)

func TestPick(t *testing.T) {
	self := func(s *string) string { return *s }
	three := []string{"Skerry Point", "Hoarfjord", "Reedmere"}
	for _, tt := range []struct {
		name  string
		items []string
		want  string // or the error's text
		fails bool
	}{
		{"Hoarfjord", three, "Hoarfjord", false},
		{"", three[:1], "Skerry Point", false},
		{"", three, `--station: left out, and the scenario holds 3; name one of "Skerry Point", "Hoarfjord", "Reedmere"`, true},
		{"Horfjord", three, `--station: "Horfjord" is not in the scenario; did you mean "Hoarfjord"; it holds "Skerry Point", "Hoarfjord", "Reedmere"`, true},
		{"hoarfjord", three, `--station: "hoarfjord" is not in the scenario; did you mean "Hoarfjord"; it holds "Skerry Point", "Hoarfjord", "Reedmere"`, true},
		{"x", nil, "station: the scenario holds none; add one to it", true},
	} {
		got, err := pick("station", tt.name, tt.items, self)
		var ie *InputError
		switch {
		case tt.fails && (err == nil || err.Error() != tt.want || !errors.As(err, &ie)):
			t.Errorf("pick %q: got %v, want the input error %s", tt.name, err, tt.want)
		case !tt.fails && (err != nil || *got != tt.want):
			t.Errorf("pick %q: got %v, %v, want %q", tt.name, got, err, tt.want)
		}
	}
	many, err := pickMany("station", []string{"Reedmere", " Skerry Point", "Reedmere"}, three, self)
	if err != nil || !slices.Equal(many, []string{"Skerry Point", "Reedmere"}) {
		t.Errorf("pickMany: %q, %v; want two in the scenario's order", many, err)
	}
	if many, err = pickMany("station", nil, three, self); err != nil || len(many) != 3 {
		t.Errorf("pickMany without names: %q, %v; want all", many, err)
	}
}
