package pass

import (
	"math"

	"slantwise/orbit"
)

// motion is what the search needs of an ephemeris; the tests fly exact two-body
// orbits through it.
type motion interface {
	PositionAt(s float64) orbit.Vec3
	StateAt(s float64) orbit.State
	Span() float64
	Step() float64
}

// node is the state at one instant with its acceleration, in the Earth-fixed frame.
type node struct {
	t             float64 // s
	pos, vel, acc orbit.Vec3
	radius, speed float64 // |pos|, |vel|
}

// stretch bounds the motion between two neighbouring nodes.
type stretch struct {
	acc, jerk, speed float64 // greatest |d²r/dt²|, |d³r/dt³| and |dr/dt|
	bulge            float64 // how far a component can leave its chord: acc h²/8, m
	low              float64 // least radius, m
}

// track holds the nodes of one spacecraft over the window, for all sites, by
// component, since the first look at a site reads nothing but positions.
type track struct {
	motion    motion
	from, to  float64
	nodes     []node
	stretches []stretch
	x, y, z   []float64 // positions of the nodes
	bulge     []float64 // of the stretches
}

// Forces that bound the acceleration. The gravitational parameter is WGS-84's
// (TR8350.2), raised by half a percent for the oblateness (at most 0.34 % at the
// surface, 1.5 J2 (3 sin² φ - 1)) and all that is smaller; the rotation is WGS-84's.
const (
	gravity  = 3.986004418e14
	excess   = 1.005
	rotation = 7.292115e-5
	// minRadius is the least radius that a state can have: an ephemeris ends where the
	// orbit falls under the Earth's surface (polar radius 6356.75 km).
	minRadius = 6.33e6
)

// Seconds between nodes: the ephemeris's own step within these limits. Longer ones
// make fewer nodes to look at, shorter ones sharper bounds; in 300 s a low orbit
// leaves its chord by 105 km.
const (
	shortStep = 300.0
	longStep  = 1800.0
)

// reset prepares the track for a motion over [from, to], reusing its memory.
func (k *track) reset(m motion, from, to float64) {
	k.motion, k.from, k.to = m, from, to
	step := math.Min(math.Max(shortStep, m.Step()), longStep)
	n := max(1, int(math.Ceil((to-from)/step-1e-9)))
	k.nodes = k.nodes[:0]
	k.stretches = k.stretches[:0]
	k.x, k.y, k.z, k.bulge = k.x[:0], k.y[:0], k.z[:0], k.bulge[:0]
	for i := range n + 1 {
		t := from + float64(i)*step
		if i == n {
			t = to
		}
		p := newNode(t, m.StateAt(t))
		k.nodes = append(k.nodes, p)
		k.x, k.y, k.z = append(k.x, p.pos.X), append(k.y, p.pos.Y), append(k.z, p.pos.Z)
		if i > 0 {
			s := bound(&k.nodes[i-1], &p)
			k.stretches = append(k.stretches, s)
			k.bulge = append(k.bulge, s.bulge)
		}
	}
}

// newNode adds the acceleration of two-body gravity in the rotating frame; bound
// allows for what that leaves out.
func newNode(t float64, s orbit.State) node {
	p, v := s.Position, s.Velocity
	r := p.Norm()
	k := -gravity / (r * r * r)
	const w = rotation
	return node{
		t: t, pos: p, vel: v, radius: r, speed: v.Norm(),
		acc: orbit.Vec3{
			X: k*p.X + w*(2*v.Y+w*p.X),
			Y: k*p.Y + w*(-2*v.X+w*p.Y),
			Z: k * p.Z,
		},
	}
}

// bound derives the bounds of a stretch from its ends. Each uses the one before it,
// from what always holds: no gravity is stronger than that at minRadius, and speed
// changes by no more than acceleration times half the stretch, counted from the
// nearer end.
func bound(a, b *node) stretch {
	h := b.t - a.t
	low := math.Max(minRadius, math.Min(a.radius, b.radius)-pull(minRadius)*h*h/8)
	low = math.Max(low, math.Min(a.radius, b.radius)-pull(low)*h*h/8)
	g := pull(low)
	fast := math.Max(a.speed, b.speed)
	high := math.Max(a.radius, b.radius) + fast*h/2 + g*h*h/8
	const w = rotation
	// The speed grows by acc h/2, acc by 2 w times that: solved for acc.
	acc := (g + 2*w*fast + w*w*high) / (1 - w*h)
	speed := fast + acc*h/2
	return stretch{
		acc: acc, speed: speed, low: low,
		jerk:  2*g/low*speed + 2*w*acc + w*w*speed,
		bulge: acc * h * h / 8,
	}
}

// pull is the bound of gravity at a radius in m, in m/s².
func pull(r float64) float64 { return excess * gravity / (r * r) }
