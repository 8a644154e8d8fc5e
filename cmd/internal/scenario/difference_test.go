package scenario

import (
	"reflect"
	"testing"

	"slantwise/cmd/internal/scenario/tree"
)

func differing(t *testing.T, before, after string, notation tree.Format) []Difference {
	t.Helper()
	a, err := tree.Parse([]byte(before), tree.YAML)
	if err != nil {
		t.Fatal(err)
	}
	b, err := tree.Parse([]byte(after), notation)
	if err != nil {
		t.Fatal(err)
	}
	return Differences(&Scenario{root: a}, &Scenario{root: b})
}

// Parts are paired by name wherever they stand, lists without names by their place, and
// what only one file has stands with an empty text.
func TestDifferences(t *testing.T) {
	got := differing(t, `
horizon: geometric
stations:
  - {name: Skerry Point, altitude_m: 42, horizon_mask: [[0, 5], [90, 3]], bands_mhz: [[1e3, 2000]]}
  - {name: High Plateau, altitude_m: 1650.0}
`, `
stations:
  - {name: High Plateau, altitude_m: 1650}
  - {name: Skerry Point, altitude_m: 45, horizon_mask: [[0, 5], [90, 4]], bands_mhz: [[1000, 2.0e3]]}
element_files: [new.tle]
`, tree.YAML)
	want := []Difference{
		{"horizon", "geometric", ""},
		{"stations[Skerry Point].altitude_m", "42", "45"},
		{"stations[Skerry Point].horizon_mask", "[[0, 5], [90, 3]]", "[[0, 5], [90, 4]]"},
		{"element_files", "", "[new.tle]"},
	}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("got  %q\nwant %q", got, want)
	}
}

func TestDifferencesOfNotation(t *testing.T) {
	if got := differing(t, "window: {length_h: 24}\nhorizon: apparent\n", "horizon = \"apparent\"\n[window]\nlength_h = 24.0\n", tree.TOML); len(got) > 0 {
		t.Errorf("the same in two notations differs in %q", got)
	}
}
