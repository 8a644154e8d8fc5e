package reports

import vector "slantwise/reports/drawing"

// mapKey says what the map without script shows.
const mapKey = "The station stands in the middle; direction and distance from it are true, and north is up. Thick: the track during the pass. Dashed: ten minutes before and after. " +
	"Dotted: where the spacecraft rises above the least elevation. Slanted strokes: night at the culmination."

// groundSketch is the map to be drawn without script; nil where nothing is known of it.
func groundSketch(p *Pass) *vector.Map {
	g := p.Ground
	if g == nil {
		return nil
	}
	m := newPlane(g.Station, mapReach(g), 1)
	m.x, m.y = 0, 0
	out := &vector.Map{Grid: graticuleLines(m, g.Station), Night: m.rings([][]Place{g.Night}, g.NightHere), Track: m.lines(mapTrack(p))}
	if land := m.near(coastOutlines()); land != nil {
		out.Land = m.rings(land, holds(land, g.Station))
	}
	if len(g.Circle) > 0 {
		out.Reached = m.lines(append(append([]Place{}, g.Circle...), g.Circle[0]))
	}
	out.Beside = append(m.lines(append(append([]Place{}, g.Before...), g.Track[0])), m.lines(append([]Place{g.Track[len(g.Track)-1]}, g.After...))...)
	all := events(p)
	for i, e := range all {
		x, y := m.point(g.Track[e.sample])
		one := vector.MapEvent{At: vector.Point{X: x, Y: y}, Symbol: eventSymbols[i]}
		if i != 1 || !together(e, all[0]) && !together(e, all[2]) {
			one.Lines = []string{e.short, clock(e.at)}
		}
		out.Events = append(out.Events, one)
	}
	return out
}

// eventSymbols are those of the beginning, the culmination and the end.
var eventSymbols = [...]vector.Symbol{vector.Triangle, vector.Circle, vector.Square}
