package reports

import (
	"fmt"
	"html/template"
	"time"
)

// Ground is what the map of a pass shows, all of it in geodetic coordinates.
type Ground struct {
	Station Place

	// Track is the point under the spacecraft at each sample of the profile; Before and
	// After lead on from it as far as the map goes and the orbit is known.
	Track         []Place
	HeightKm      []float64 // of the spacecraft over the ellipsoid, by sample
	Before, After []Place

	// Circle is where the spacecraft stands, at its height of the culmination, when the
	// station sees it at the least elevation, all around.
	Circle []Place

	// Night is the edge of the night at the culmination, where the Sun's centre stands in
	// the geometric horizon, as a ring. NightHere tells whether the station lies in it.
	Night     []Place
	NightHere bool
	SubSolar  Place
	Sky       []SkyBody

	// Lit tells, by sample, whether any part of the Sun shines on the spacecraft.
	Lit []bool
}

// Place is a point on the ground, north and east positive.
type Place struct{ LatitudeDeg, LongitudeDeg float64 }

// SkyBody is where the Sun or the Moon stands at the culmination, geometric.
type SkyBody struct {
	Name                     string
	AzimuthDeg, ElevationDeg float64
}

// groundView is the map and its words.
type groundView struct {
	Drawing, Table template.HTML
	Text           string
	NoCoast        bool
}

func newGroundView(p *Pass) *groundView {
	g := p.Ground
	if g == nil {
		return nil
	}
	rows := thinned(p, tableRows)
	lat, lon := make([]float64, len(g.Track)), make([]float64, len(g.Track))
	for i, q := range g.Track {
		lat[i], lon[i] = q.LatitudeDeg, q.LongitudeDeg
	}
	return &groundView{
		Drawing: groundDrawing(p), Text: groundText(p), NoCoast: coast() == nil,
		Table: numberTable(p, "Ground track", []string{"latitude, deg", "longitude, deg", "height, km"},
			[]column{{decimals: 2, values: lat}, {decimals: 2, values: lon}, {decimals: 1, values: g.HeightKm}}, rows),
	}
}

// groundText says in words what the map shows.
func groundText(p *Pass) string {
	g := p.Ground
	first, last := g.Track[0], g.Track[len(g.Track)-1]
	text := fmt.Sprintf("The point under the spacecraft goes from %s to %s.", first, last)
	text += " " + lightText(p)
	if g.NightHere {
		text += " At the culmination it is night at the station."
	} else {
		text += " At the culmination it is day at the station."
	}
	return text
}

// String says where the body stands.
func (b SkyBody) String() string {
	if b.ElevationDeg < 0 {
		return fmt.Sprintf("The %s stands %s deg under the horizon.", b.Name, fixed(-b.ElevationDeg, 0))
	}
	return fmt.Sprintf("The %s stands at azimuth %s deg, elevation %s deg at the culmination.", b.Name, fixed(b.AzimuthDeg, 0), fixed(b.ElevationDeg, 0))
}

// lightText says when the Sun shines on the spacecraft.
func lightText(p *Pass) string {
	lit, f := p.Ground.Lit, p.Profile
	changes := ""
	for i := 1; i < len(lit); i++ {
		if lit[i] == lit[i-1] {
			continue
		}
		word := "enters the Earth’s shadow"
		if lit[i] {
			word = "comes out of the Earth’s shadow"
		}
		if changes != "" {
			changes += ", "
		}
		changes += word + " at " + utcClock(sampleTime(f.Start, f.Seconds[i]).Round(time.Second), layoutOf(p)) + " UTC"
	}
	switch {
	case changes != "":
		return "The spacecraft " + changes + "."
	case len(lit) > 0 && lit[0]:
		return "The spacecraft is in sunlight throughout."
	}
	return "The spacecraft is in the Earth’s shadow throughout."
}

// String writes a place as latitude and longitude in tenths of a degree.
func (p Place) String() string {
	ns, lat := "N", p.LatitudeDeg
	if lat < 0 {
		ns, lat = "S", -lat
	}
	ew, lon := "E", p.LongitudeDeg
	if lon < 0 {
		ew, lon = "W", -lon
	}
	return fixed(lat, 1) + "° " + ns + ", " + fixed(lon, 1) + "° " + ew
}

// groundColumns are the columns of the ground track and of the light.
func groundColumns(p *Pass) []column {
	g := p.Ground
	if g == nil {
		return nil
	}
	lat, lon, lit := make([]float64, len(g.Track)), make([]float64, len(g.Track)), make([]float64, len(g.Lit))
	for i, q := range g.Track {
		lat[i], lon[i] = q.LatitudeDeg, q.LongitudeDeg
	}
	for i, l := range g.Lit {
		if l {
			lit[i] = 1
		}
	}
	return []column{{"ground_latitude_deg", 4, lat}, {"ground_longitude_deg", 4, lon}, {"height_km", 3, g.HeightKm}, {"sunlit", 0, lit}}
}

type placeJSON [2]number // latitude, longitude, deg

type groundJSON struct {
	Circle    []placeJSON   `json:"visibility_lat_lon_deg"`
	Night     []placeJSON   `json:"night_edge_lat_lon_deg"`
	NightHere bool          `json:"night_at_station"`
	SubSolar  placeJSON     `json:"sub_solar_lat_lon_deg"`
	Before    []placeJSON   `json:"track_before_lat_lon_deg"`
	After     []placeJSON   `json:"track_after_lat_lon_deg"`
	Sky       []skyBodyJSON `json:"sky"`
}

type skyBodyJSON struct {
	Name         string `json:"name"`
	AzimuthDeg   number `json:"azimuth_deg"`
	ElevationDeg number `json:"elevation_deg"`
}

func groundHead(g *Ground) *groundJSON {
	if g == nil {
		return nil
	}
	h := &groundJSON{Circle: placesJSON(g.Circle), Night: placesJSON(g.Night), NightHere: g.NightHere, Sky: []skyBodyJSON{}, Before: placesJSON(g.Before), After: placesJSON(g.After)}
	h.SubSolar = placesJSON([]Place{g.SubSolar})[0]
	for _, b := range g.Sky {
		h.Sky = append(h.Sky, skyBodyJSON{b.Name, number{b.AzimuthDeg, 2}, number{b.ElevationDeg, 2}})
	}
	return h
}

func placesJSON(list []Place) []placeJSON {
	out := make([]placeJSON, len(list))
	for i, p := range list {
		out[i] = placeJSON{{p.LatitudeDeg, 2}, {p.LongitudeDeg, 2}}
	}
	return out
}
