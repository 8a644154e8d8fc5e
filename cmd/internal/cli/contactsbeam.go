package cli

import (
	"math"

	"slantwise/downlink/contacts"
	"slantwise/downlink/fluxdensity"
	"slantwise/orbit/unit"
)

// clashStep is how far apart the instants are at which two directions are compared.
const clashStep = 10 * contacts.Second

// clashes finds the candidates of two spacecraft that stand in one beam of a station on
// one frequency: closer together than same_beam_deg, their bands overlapping.
func (p *planProblem) clashes() {
	if p.plan.SameBeam == 0 {
		return
	}
	for b := range p.Candidates {
		for a := range p.Candidates[:b] {
			x, y := &p.Candidates[a], &p.Candidates[b]
			if x.Spacecraft == y.Spacecraft || p.Antennas[x.Antenna].Station != p.Antennas[y.Antenna].Station || x.Window.Overlap(y.Window) == 0 || !p.oneFrequency(x, y) {
				continue
			}
			if spans := p.together(x, y); len(spans) > 0 {
				p.Clashes = append(p.Clashes, contacts.Clash{A: a, B: b, Spans: spans})
			}
		}
	}
}

// oneFrequency tells whether links of two candidates overlap in frequency.
func (p *planProblem) oneFrequency(x, y *contacts.Candidate) bool {
	for _, l := range x.Links {
		for _, m := range y.Links {
			f, g := p.bandOf(x.Spacecraft, l.Transmitter), p.bandOf(y.Spacecraft, m.Transmitter)
			if f[0] <= g[1] && g[0] <= f[1] {
				return true
			}
		}
	}
	return false
}

// bandOf returns the ends of the band of a transmitter: its allotted band, else that of
// its widest mode.
func (p *planProblem) bandOf(craft int, name string) [2]float64 {
	c := &p.scenario.Spacecraft[craft]
	for i := range c.Transmitters {
		t := &c.Transmitters[i]
		if t.Name != name {
			continue
		}
		width := t.AllottedBandwidth
		if width == 0 {
			for k := range t.Modes {
				if r, err := t.Modes[k].Resolve(); err == nil {
					width = max(width, fluxdensity.FromTransmitter(t, &r).Width)
				}
			}
		}
		return [2]float64{t.Frequency.Hertz() - width.Hertz()/2, t.Frequency.Hertz() + width.Hertz()/2}
	}
	return [2]float64{math.Inf(1), math.Inf(-1)}
}

// together returns the times in which two candidates are seen in one beam.
func (p *planProblem) together(x, y *contacts.Candidate) []contacts.Span {
	var out []contacts.Span
	both := contacts.Span{From: max(x.Window.From, y.Window.From), To: min(x.Window.To, y.Window.To)}
	for at := both.From; at < both.To; at += clashStep {
		if apartDeg(aimAt(x.Course, at), aimAt(y.Course, at)) < p.plan.SameBeam.Degrees() {
			out = append(out, contacts.Span{From: max(both.From, at-clashStep), To: min(both.To, at+clashStep)})
		}
	}
	return contacts.Union(out)
}

// aimAt returns the direction of a course, straight between its samples.
func aimAt(course []contacts.Aim, at contacts.Ms) contacts.Aim {
	for i := 1; i < len(course); i++ {
		if a, b := course[i-1], course[i]; at <= b.At && b.At > a.At {
			share := float64(at-a.At) / float64(b.At-a.At)
			return contacts.Aim{At: at, AzimuthDeg: a.AzimuthDeg + share*(b.AzimuthDeg-a.AzimuthDeg), ElevationDeg: a.ElevationDeg + share*(b.ElevationDeg-a.ElevationDeg)}
		}
	}
	return course[len(course)-1]
}

// apartDeg is the angle between two directions, by the haversine.
func apartDeg(a, b contacts.Aim) float64 {
	rad := func(deg float64) float64 { return (unit.Angle(deg) * unit.Degree).Radians() }
	h := func(v float64) float64 { s := math.Sin(v / 2); return s * s }
	e1, e2 := rad(a.ElevationDeg), rad(b.ElevationDeg)
	s := h(e2-e1) + math.Cos(e1)*math.Cos(e2)*h(rad(b.AzimuthDeg-a.AzimuthDeg))
	return unit.Angle(2 * math.Asin(math.Sqrt(min(1, s)))).Degrees()
}
