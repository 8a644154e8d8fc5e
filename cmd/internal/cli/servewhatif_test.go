package cli

import (
	"errors"
	"testing"
	"time"

	"slantwise/cmd/internal/web"
)

// TestAffordable bounds what a question may cost.
func TestAffordable(t *testing.T) {
	for _, row := range []struct {
		name   string
		length time.Duration
		modes  int
		mode   string
		taken  bool
	}{
		{"a usual pass", 12 * time.Minute, 3, "", true},
		{"the longest", longestAsked, 20, "", true},
		{"longer", longestAsked + time.Second, 1, "fast", false},
		{"many modes", longestAsked, 21, "", false},
		{"one of many modes", longestAsked, 1000, "fast", true},
	} {
		err := affordable(row.length, row.modes, &web.Question{Mode: row.mode})
		if row.taken != (err == nil) || err != nil && !errors.As(err, new(*web.RefusedError)) {
			t.Errorf("%s: %v", row.name, err)
		}
	}
}
