package pass

import (
	"math"
	"slices"

	"slantwise/orbit"
)

// motion is what the search needs of an ephemeris; the tests fly exact two-body
// orbits through it.
type motion interface {
	TrackAt(s float64) (position, derivative orbit.Vec3)
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
	rate      float64 // nodes a second
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
	step := min(max(shortStep, m.Step()), longStep)
	k.rate = 1 / step
	n := max(1, int(math.Ceil((to-from)/step-1e-9)))
	k.nodes = slices.Grow(k.nodes[:0], n+1)[:n+1]
	k.stretches = slices.Grow(k.stretches[:0], n)[:n]
	k.x, k.y, k.z = k.x[:0], k.y[:0], k.z[:0]
	k.bulge = k.bulge[:0]
	for i := range k.nodes {
		p := &k.nodes[i]
		p.t = from + float64(i)*step
		if i == n {
			p.t = to
		}
		p.pos, p.vel = m.TrackAt(p.t)
		p.derive()
		k.x, k.y, k.z = append(k.x, p.pos.X), append(k.y, p.pos.Y), append(k.z, p.pos.Z)
		if i > 0 {
			k.stretches[i-1].bound(&k.nodes[i-1], p)
			k.bulge = append(k.bulge, k.stretches[i-1].bulge)
		}
	}
}

// derive adds the radius, the speed and the acceleration of two-body gravity in the
// rotating frame; bound allows for what that leaves out.
func (n *node) derive() {
	p, v := &n.pos, &n.vel
	r2 := p.X*p.X + p.Y*p.Y + p.Z*p.Z
	n.radius = math.Sqrt(r2)
	n.speed = math.Sqrt(v.X*v.X + v.Y*v.Y + v.Z*v.Z)
	k := -gravity / (r2 * n.radius)
	const w = rotation
	n.acc = orbit.Vec3{
		X: k*p.X + w*(2*v.Y+w*p.X),
		Y: k*p.Y + w*(-2*v.X+w*p.Y),
		Z: k * p.Z,
	}
}

// bound derives the bounds of a stretch from its ends. Each uses the one before it,
// from what always holds: no gravity is stronger than that at minRadius, and speed
// changes by no more than acceleration times half the stretch, counted from the
// nearer end.
func (st *stretch) bound(a, b *node) {
	h := b.t - a.t
	low := max(minRadius, min(a.radius, b.radius)-pull(minRadius)*h*h/8)
	low = max(low, min(a.radius, b.radius)-pull(low)*h*h/8)
	g := pull(low)
	fast := max(a.speed, b.speed)
	high := max(a.radius, b.radius) + fast*h/2 + g*h*h/8
	const w = rotation
	// The speed grows by acc h/2, acc by 2 w times that: solved for acc.
	acc := (g + 2*w*fast + w*w*high) / (1 - w*h)
	speed := fast + acc*h/2
	st.acc, st.speed, st.low = acc, speed, low
	st.jerk = 2*g/low*speed + 2*w*acc + w*w*speed
	st.bulge = acc * h * h / 8
}

// pull is the bound of gravity at a radius in m, in m/s².
func pull(r float64) float64 { return excess * gravity / (r * r) }
