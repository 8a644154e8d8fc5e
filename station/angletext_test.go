package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func TestParseGeodetic(t *testing.T) {
	for _, c := range []struct {
		text string
		of   Coordinate
		want float64
	}{
		{`58°24'00"N`, OfLatitude, 58.4},
		{"58 24 00 N", OfLatitude, 58.4},
		{"N58 24 00", OfLatitude, 58.4},
		{"58.4N", OfLatitude, 58.4},
		{"58:24:00 S", OfLatitude, -58.4},
		{"58°24.5′ N", OfLatitude, 58 + 24.5/60},
		{"58 deg 24 min 18.25 sec N", OfLatitude, 58 + 24.0/60 + 18.25/3600},
		{"58d24m18.25sN", OfLatitude, 58 + 24.0/60 + 18.25/3600},
		{"6°06″W", OfLongitude, math.NaN()}, // seconds without minutes
		{"6°06''W", OfLongitude, math.NaN()},
		{"006°06’00″W", OfLongitude, -6.1},
		{"180 E", OfLongitude, 180},
		{"90°N", OfLatitude, 90},
		{"0°00'00\"W", OfLongitude, 0},
	} {
		got, err := ParseGeodetic(c.text, c.of)
		if math.IsNaN(c.want) {
			if err == nil {
				t.Errorf("%q was taken as %v deg", c.text, got.Degrees())
			}
			continue
		}
		if err != nil || math.Abs(got.Degrees()-c.want) > 1e-12 {
			t.Errorf("%q: got %v deg, %v, want %v", c.text, got.Degrees(), err, c.want)
		}
	}
	for text, want := range map[string]string{
		"58 24 00":     "does not begin or end with N or S",
		"-58 24 00 N":  "a sign is taken",
		"58 24 00 E":   "E is no hemisphere here",
		"N 58 24 00 N": "two letters",
		"91 N":         "more than 90",
		"90 00 01 N":   "more than 90",
		"58 60 00 N":   "less than 60",
		"58.5 24 N":    "only its last number",
		"58 24 00 5 N": "not degrees, minutes and seconds",
		"north":        "not degrees",
		"N":            "not degrees",
		"":             "not degrees",
		"58,4 N":       "not degrees",
		"58..4 N":      "not degrees",
	} {
		if v, err := ParseGeodetic(text, OfLatitude); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, %v, want %q", text, v, err, want)
		}
	}
}

// What is accepted lies in the range of its coordinate.
func FuzzParseGeodetic(f *testing.F) {
	for _, s := range []string{`58°24'00"N`, "58 24.5 N", "E 6:06:00", "6''W", "N", "1e5 N", "58 24 00 N S", "9999 N", "0x1 N"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for of, most := range map[Coordinate]unit.Angle{OfLatitude: 90 * unit.Degree, OfLongitude: 180 * unit.Degree} {
			if v, err := ParseGeodetic(text, of); err == nil && !(v >= -most && v <= most) {
				t.Errorf("%q is %v deg", text, v.Degrees())
			}
		}
	})
}
