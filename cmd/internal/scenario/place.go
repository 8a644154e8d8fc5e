package scenario

import (
	"math"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// place reads latitude and longitude, or the locator in their place.
func (o object) place(s *station.Site) {
	if o.has("locator") {
		o.useless("beside locator, which says where the station is", "latitude_deg", "longitude_deg")
		o.locator(s)
		return
	}
	s.Latitude = o.geodetic("latitude_deg", station.OfLatitude, span{low: -90, high: 90, unit: "deg", next: "north is positive, south negative"}, "the latitude")
	s.Longitude = o.geodetic("longitude_deg", station.OfLongitude, o.longitudeSpan(), "the longitude")
}

// geodetic reads degrees as a number, or as people write them.
func (o object) geodetic(key string, of station.Coordinate, in span, what string) unit.Angle {
	n := o.get(key)
	written := n != nil && n.Kind == tree.Text && strings.ContainsAny(n.Text, "NSEW°º'′\"") && strings.ContainsAny(n.Text, "0123456789")
	if !written {
		return unit.Angle(o.required(key, in, what)) * unit.Degree
	}
	v, err := station.ParseGeodetic(n.Text, of)
	if err != nil {
		o.fault(n, key, "%s", "", err)
		return 0
	}
	o.assume("%s %s understood as %s deg", key, quote(n.Text), figure(roundTo(v.Degrees(), 1e7)))
	return v
}

// longitudeSpan is -180 to 180 alone; for a value up to 360 it says what to write.
func (o object) longitudeSpan() span {
	in := span{low: -180, high: 180, unit: "deg", next: "east is positive, west negative"}
	n := o.get("longitude_deg")
	if n != nil && n.Kind == tree.Number && plainNumber.MatchString(n.Text) {
		if v := parsePlain(n.Text); v > 180 && v <= 360 {
			in.next = "longitudes of 0 to 360 deg are not taken: write " + figure(roundTo(v-360, 1e9)) + " for " + n.Text
		}
	}
	return in
}

// locator reads a Maidenhead locator: the station stands in the middle of its rectangle.
func (o object) locator(s *station.Site) {
	text, ok := o.text("locator")
	if !ok {
		return
	}
	l, err := station.ParseLocator(text)
	if err != nil {
		o.fault(o.get("locator"), "locator", "%s", "", err)
		return
	}
	s.Latitude, s.Longitude = l.Latitude, l.Longitude
	// Half a diagonal, with 111.2 km a degree of the mean sphere.
	const kmADegree = 6371.0088 * math.Pi / 180
	height := l.Height.Degrees() * kmADegree
	width := l.Width.Degrees() * kmADegree * math.Cos(l.Latitude.Radians())
	o.assume("locator %s understood as %.5f deg north, %.5f deg east, the middle of a rectangle of %s by %s km: the station may be up to %s km away", l.Text,
		l.Latitude.Degrees(), l.Longitude.Degrees(), kilometres(width), kilometres(height), kilometres(math.Hypot(width, height)/2))
}

// kilometres keeps three digits.
func kilometres(v float64) string {
	digits := math.Pow(10, 2-math.Floor(math.Log10(v)))
	return figure(math.Round(v*digits) / digits)
}
