package reports

import (
	"math"
	"strconv"
	"strings"
)

// LandPath returns the land as the path of an SVG drawing whose x is the longitude in
// degrees and whose y is minus the latitude, to be cut off at 180 degrees on both sides;
// empty where go generate has not brought the coastline (Natural Earth, public domain).
func LandPath() string {
	var rings [][]Place
	for _, ring := range coast() {
		rings = append(rings, places(ring))
	}
	return landPath(rings)
}

func landPath(rings [][]Place) string {
	var b strings.Builder
	for _, list := range rings {
		x, left, right := list[0].LongitudeDeg, list[0].LongitudeDeg, list[0].LongitudeDeg
		along := make([]float64, len(list)+1)
		for i := range along { // without a jump at 180 degrees
			x += math.Remainder(list[i%len(list)].LongitudeDeg-x, 360)
			along[i], left, right = x, min(left, x), max(right, x)
		}
		for _, shift := range []float64{-360, 0, 360} {
			if left+shift < 180 && right+shift > -180 {
				landRing(&b, list, along, shift)
			}
		}
	}
	return b.String()
}

// landRing draws a ring; one that goes around the south pole is closed along it.
func landRing(b *strings.Builder, list []Place, along []float64, shift float64) {
	number := func(letter byte, v float64) {
		b.WriteByte(letter)
		b.WriteString(strconv.FormatFloat(v, 'f', 1, 64))
	}
	letter := byte('M')
	for i, q := range list {
		number(letter, along[i]+shift)
		number(' ', 0-q.LatitudeDeg) // no -0
		letter = 'L'
	}
	if last := along[len(list)]; math.Abs(last-along[0]) > 180 {
		for _, corner := range [][2]float64{{last, 0 - list[0].LatitudeDeg}, {last, 90}, {along[0], 90}} {
			number('L', corner[0]+shift)
			number(' ', corner[1])
		}
	}
	b.WriteByte('z')
}
