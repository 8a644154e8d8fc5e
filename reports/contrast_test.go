package reports

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"
)

// relativeLuminance of #rrggbb. Source: WCAG 2.1, W3C Recommendation, June 2018,
// definition of relative luminance.
func relativeLuminance(t *testing.T, colour string) float64 {
	t.Helper()
	v, err := strconv.ParseUint(strings.TrimPrefix(colour, "#"), 16, 24)
	if err != nil || len(colour) != 7 {
		t.Fatalf("%q is not #rrggbb", colour)
	}
	linear := func(shift uint) float64 {
		c := float64(v>>shift&255) / 255
		if c <= 0.03928 {
			return c / 12.92
		}
		return math.Pow((c+0.055)/1.055, 2.4)
	}
	return 0.2126*linear(16) + 0.7152*linear(8) + 0.0722*linear(0)
}

// contrast of two colours, by WCAG 2.1, definition of contrast ratio.
func contrast(t *testing.T, a, b string) float64 {
	x, y := relativeLuminance(t, a), relativeLuminance(t, b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

// The two ends of the scale: black on white is 21, and #777777 just misses 4.5.
func TestContrastScale(t *testing.T) {
	if got := contrast(t, "#000000", "#ffffff"); math.Abs(got-21) > 1e-9 {
		t.Errorf("black on white is %v, want 21", got)
	}
	if got := contrast(t, "#777777", "#ffffff"); math.Abs(got-4.48) > 0.005 {
		t.Errorf("#777777 on white is %v, want 4.48", got)
	}
}

// Text has 4.5 to 1 on whatever it stands on, lines and symbols 3 to 1 (WCAG 2.1, AA,
// success criteria 1.4.3 and 1.4.11), on the light page, the dark page and paper, which
// is printed from the light one; and all of it in greyscale too, since the ratio knows
// luminance alone.
func TestColoursHaveContrast(t *testing.T) {
	palettes := regexp.MustCompile(`(?s)(?::root, \.printing|:root:not\(\.printing\)) \{(.*?)\}`).FindAllStringSubmatch(styleSheet, -1)
	if len(palettes) != 2 {
		t.Fatalf("%d palettes, want the light and the dark one", len(palettes))
	}
	for i, name := range []string{"light", "dark"} {
		colour := map[string]string{}
		for _, m := range regexp.MustCompile(`--([a-z0-9-]+): (#[0-9a-f]{6});`).FindAllStringSubmatch(palettes[i][1], -1) {
			colour[m[1]] = m[2]
		}
		for _, row := range []struct {
			of, on []string
			least  float64
		}{
			{[]string{"ink", "soft", "link", "warn"}, []string{"paper", "wash"}, 4.5},
			{[]string{"ink"}, []string{"bar"}, 4.5},
			{[]string{"ink", "line-1"}, []string{"land"}, 4.5},
			{[]string{"line-1", "line-2", "hatch", "soft"}, []string{"paper"}, 3},
		} {
			for _, of := range row.of {
				for _, on := range row.on {
					if colour[of] == "" || colour[on] == "" {
						t.Fatalf("%s: no colour %s or %s", name, of, on)
					}
					if got := contrast(t, colour[of], colour[on]); got < row.least {
						t.Errorf("%s: %s on %s has a contrast of %.2f, want %v", name, of, on, got, row.least)
					}
				}
			}
		}
	}
}
