package nearest_test

import (
	"slices"
	"testing"

	"slantwise/cmd/internal/nearest"
)

func TestNames(t *testing.T) {
	known := []string{"frequency_mhz", "power_w", "power_dbm", "name", "modes"}
	for _, tt := range []struct {
		give string
		want []string
	}{
		{"frequncy_mhz", []string{"frequency_mhz"}},
		{"POWER_W", []string{"power_w", "power_dbm"}},
		{"freq", []string{"frequency_mhz"}},
		{"nmae", []string{"name"}},
		{"temperature", nil},
		{"", nil},
	} {
		if got := nearest.Names(tt.give, known, 3); !slices.Equal(got, tt.want) {
			t.Errorf("Names(%q) = %q, want %q", tt.give, got, tt.want)
		}
	}
	if got := nearest.Names("power", known, 1); !slices.Equal(got, []string{"power_w"}) {
		t.Errorf("Names with limit 1 = %q, want power_w alone", got)
	}
}
