package cli

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
)

// How far the track on a map leads on before AOS and after LOS, and its steps.
const groundLead, groundStep = 10 * time.Minute, 30 * time.Second

// ground works out the map of a pass and where Sun and Moon stand.
func (p *reportPlan) ground(out *reports.Pass, craft *reportCraft, site *reportSite, page *reportPage) *reports.Ground {
	e, f := craft.ephemeris, out.Profile
	under := func(s float64) station.Place {
		return station.PlaceBelow(e.PositionAt(max(0, min(s, e.Span()))))
	}
	g := &reports.Ground{Station: reports.Place{LatitudeDeg: site.Site.Latitude.Degrees(), LongitudeDeg: site.Site.Longitude.Degrees()}}
	first := e.Seconds(f.Start)
	for _, s := range f.Seconds {
		q := under(first + s)
		g.Track, g.HeightKm = append(g.Track, groundPlace(q)), append(g.HeightKm, q.Height.Kilometres())
		g.Lit = append(g.Lit, e.LightAt(max(0, min(first+s, e.Span()))) != orbit.Umbra)
	}
	last := first + f.Seconds[len(f.Seconds)-1]
	for k := groundLead; k > 0; k -= groundStep {
		if s := first - k.Seconds(); s >= 0 && e.Covers(s) {
			g.Before = append(g.Before, groundPlace(under(s)))
		}
	}
	for k := groundStep; k <= groundLead; k += groundStep {
		s := last + k.Seconds()
		if s > e.Span() || !e.Covers(s) {
			break
		}
		g.After = append(g.After, groundPlace(under(s)))
	}
	culmination := max(0, min(e.Seconds(page.Culmination), e.Span()))
	height := under(culmination).Height
	for _, d := range out.Horizon {
		g.Circle = append(g.Circle, groundPlace(site.frame.Above(station.Direction{
			Azimuth: unit.Angle(d.AzimuthDeg) * unit.Degree, Elevation: unit.Angle(max(d.ElevationDeg, 0)) * unit.Degree}, height)))
	}
	sun := e.SunAt(culmination)
	_, elevation, _ := site.frame.Direction(sun)
	g.NightHere = elevation < 0
	g.SubSolar, g.Night = nightEdge(sun)
	for _, b := range []struct {
		name string
		at   orbit.Vec3
	}{{"Sun", sun}, {"Moon", orbit.MoonPosition(page.Culmination, p.scenario.Earth)}} {
		az, el, _ := site.frame.Direction(b.at)
		g.Sky = append(g.Sky, reports.SkyBody{Name: b.name, AzimuthDeg: az.Degrees(), ElevationDeg: el.Degrees()})
	}
	return g
}

func groundPlace(q station.Place) reports.Place {
	return reports.Place{LatitudeDeg: q.Latitude.Degrees(), LongitudeDeg: q.Longitude.Degrees()}
}

// nightEdge returns the point under the Sun and the edge of the night, where the
// vertical is at right angles to the Sun: the Sun is far enough for one direction
// everywhere (its parallax is 9 seconds of arc), and the ellipsoid's vertical points to
// the geodetic latitude.
func nightEdge(sun orbit.Vec3) (under reports.Place, edge []reports.Place) {
	s := sun.Unit()
	across := orbit.Vec3{Z: 1}.Cross(s).Unit()
	up := s.Cross(across)
	for k := range 120 {
		sin, cos := math.Sincos(2 * math.Pi * float64(k) / 120)
		edge = append(edge, directionPlace(across.Scale(cos).Add(up.Scale(sin))))
	}
	return directionPlace(s), edge
}

// directionPlace is where a unit vector stands in the zenith, geodetic.
func directionPlace(v orbit.Vec3) reports.Place {
	return reports.Place{LatitudeDeg: math.Asin(max(-1, min(v.Z, 1))) * 180 / math.Pi, LongitudeDeg: math.Atan2(v.Y, v.X) * 180 / math.Pi}
}
