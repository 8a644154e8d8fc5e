package station

import (
	"fmt"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// Coordinate tells latitude and longitude apart.
type Coordinate int

// Coordinates of a place.
const (
	OfLatitude  Coordinate = iota // N and S, 90° at most
	OfLongitude                   // E and W, 180° at most
)

// angleMarks may stand behind degrees, minutes and seconds, the longer ones first.
var angleMarks = [3][]string{
	{"°", "º", "deg", "d", ":"},
	{"min", "''", "'", "′", "’", "m", ":"}, // two strokes are seconds, and refused here
	{"sec", "''", "′′", `"`, "″", "”", "s"},
}

// ParseGeodetic reads a latitude or longitude as people write it: degrees with a letter
// for the hemisphere, alone or with minutes and seconds, the last number with decimals
// (58°24'00"N, N 58 24.5, 6:06:00 W, 58.4 N). The letter must be there: without it 58 24
// 00 would be a guess, and with a sign it would be said twice. The error says what is
// wrong.
func ParseGeodetic(text string, of Coordinate) (unit.Angle, error) {
	letters, most, example := "NS", 90.0, `58°24'00"N`
	if of == OfLongitude {
		letters, most, example = "EW", 180.0, `6°06'00"W`
	}
	v, letter, why := angleParts(text)
	switch {
	case why != "":
	case letter == 0:
		why = "it does not begin or end with " + letters[:1] + " or " + letters[1:]
	case strings.IndexByte(letters, letter) < 0:
		why = string(letter) + " is no hemisphere here, " + letters[:1] + " and " + letters[1:] + " are"
	case !(v <= most):
		why = fmt.Sprintf("it is more than %g degrees", most)
	}
	if why != "" {
		return 0, fmt.Errorf("%.60q is not allowed: %s; give degrees as a number, or degrees, minutes and seconds with the hemisphere, as %s", text, why, example)
	}
	if letter == letters[1] {
		v = -v
	}
	return unit.Angle(v) * unit.Degree, nil
}

// angleParts reads the degrees and the hemisphere's letter, 0 where there is none; why
// says what is wrong.
func angleParts(text string) (degrees float64, letter byte, why string) {
	rest := strings.TrimSpace(text)
	isLetter := func(c byte) bool { return strings.IndexByte("NSEW", c) >= 0 }
	if n := len(rest); n > 0 && isLetter(rest[n-1]) {
		letter, rest = rest[n-1], rest[:n-1]
	}
	if rest != "" && isLetter(rest[0]) {
		if letter != 0 {
			return 0, 0, "it has two letters for the hemisphere"
		}
		letter, rest = rest[0], rest[1:]
	}
	if strings.ContainsAny(rest, "+-−") {
		return 0, 0, "a sign is taken with a plain number alone, north and east being positive"
	}
	fraction := false
	for i, scale := range [3]float64{1, 60, 3600} {
		rest = strings.TrimSpace(rest)
		if rest == "" && i > 0 {
			break
		}
		end := 0
		for end < len(rest) && (rest[end] >= '0' && rest[end] <= '9' || rest[end] == '.') {
			end++
		}
		x, err := strconv.ParseFloat(rest[:end], 64)
		switch {
		case err != nil:
			return 0, 0, "it is not degrees, minutes and seconds"
		case fraction:
			return 0, 0, "only its last number may have decimals"
		case i > 0 && x >= 60:
			return 0, 0, "minutes and seconds are less than 60"
		}
		fraction = strings.Contains(rest[:end], ".")
		degrees += x / scale
		rest = strings.TrimSpace(rest[end:])
		for _, mark := range angleMarks[i] {
			if cut, ok := strings.CutPrefix(rest, mark); ok {
				if i == 1 && mark == "''" {
					return 0, 0, "it has seconds without minutes"
				}
				rest = cut
				break
			}
		}
	}
	if rest != "" {
		return 0, 0, "it is not degrees, minutes and seconds"
	}
	return degrees, letter, ""
}
