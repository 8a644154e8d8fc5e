package station

import (
	"fmt"
	"strings"

	"slantwise/orbit/unit"
)

// Locator is a rectangle of the Maidenhead system, by which radio amateurs tell where
// a station is.
type Locator struct {
	Text      string     // as the system writes it, "JN58td"
	South     unit.Angle // its southern edge
	West      unit.Angle // its western edge
	Height    unit.Angle // north to south
	Width     unit.Angle // west to east
	Latitude  unit.Angle // of the middle
	Longitude unit.Angle // of the middle, east positive
}

// ParseLocator reads a locator of 4, 6, 8 or 10 characters, in capitals or not: fields
// of 20° by 10° counted from 180° west and 90° south in letters A to R, each cut into
// ten by ten in digits, these into 24 by 24 in letters A to X, then ten by ten and 24 by
// 24 again.
//
// Source: the locator system of the IARU, Region 1, 1980, as described by Tyson,
// Conversion between geodetic and grid locator systems, QST, January 1989; the last two
// pairs by common practice (TestLocator).
func ParseLocator(text string) (Locator, error) {
	if n := len(text); n < 4 || n > 10 || n%2 != 0 {
		return Locator{}, fmt.Errorf("%.40q is no locator; give 4, 6, 8 or 10 characters, as JN58td", text)
	}
	steps := [...]struct {
		first, last byte
		kind        string
	}{{'A', 'R', "a letter A to R"}, {'0', '9', "a digit"}, {'A', 'X', "a letter A to X"}, {'0', '9', "a digit"}, {'A', 'X', "a letter A to X"}}
	l := Locator{West: -180 * unit.Degree, South: -90 * unit.Degree, Width: 360 * unit.Degree, Height: 180 * unit.Degree}
	upper := strings.ToUpper(text)
	var out strings.Builder
	for pair, s := range steps[:len(text)/2] {
		for k := range 2 {
			if c := upper[2*pair+k]; c < s.first || c > s.last {
				return Locator{}, fmt.Errorf("%.40q is no locator: character %d must be %s", text, 2*pair+k+1, s.kind)
			}
		}
		parts := unit.Angle(s.last - s.first + 1)
		l.Width, l.Height = l.Width/parts, l.Height/parts
		l.West += unit.Angle(upper[2*pair]-s.first) * l.Width
		l.South += unit.Angle(upper[2*pair+1]-s.first) * l.Height
		written := upper[2*pair : 2*pair+2]
		if pair == 2 || pair == 4 {
			written = strings.ToLower(written)
		}
		out.WriteString(written)
	}
	l.Text = out.String()
	l.Longitude, l.Latitude = l.West+l.Width/2, l.South+l.Height/2
	return l, nil
}
