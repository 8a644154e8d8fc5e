package pass

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// PlusMinus is how uncertain a pass is by the position's uncertainty: one standard
// deviation each, to first order in the displacement. Where the window cuts the pass
// there is no edge, and its number is NaN.
type PlusMinus struct {
	AOS, LOS     float64    // s
	MaxElevation unit.Angle // of the elevation at culmination
	Headroom     unit.Angle // of the culmination over the skyline below it, geometric
	// Clearance is Headroom over its standard deviation: the probability that the pass
	// takes place is that of a standard normal number below it (Existence). Infinite where
	// nothing is uncertain.
	Clearance                 float64
	AtAOS, Culminating, AtLOS station.LookSpread
}

// sureClearance is the clearance from which on a pass is taken to take place, and its
// edges to be known to first order: the second order is then under a twelfth of the
// first, and one pass in 700 does not happen.
const sureClearance = 3

// MayVanish tells whether the pass only grazes the skyline: by its uncertainty it may
// be much shorter or not take place at all, and AOS and LOS then are not known to
// first order.
func (m *PlusMinus) MayVanish() bool { return m.Clearance < sureClearance }

// Existence returns the probability that the pass takes place.
func (m *PlusMinus) Existence() float64 { return 0.5 * math.Erfc(-m.Clearance/math.Sqrt2) }

// Around returns AOS and LOS moved outward by so many standard deviations, rounded
// outward to the millisecond: from when to when an antenna has to be ready. An edge
// that the window cuts stays.
func (m *PlusMinus) Around(p *Pass, sigmas float64) (from, to time.Time) {
	return p.AOS.Add(-padding(m.AOS, sigmas)), p.LOS.Add(padding(m.LOS, sigmas))
}

// Within returns AOS and LOS moved inward by so many standard deviations: the time
// that can be counted on. Where nothing is left, ok is false.
func (m *PlusMinus) Within(p *Pass, sigmas float64) (from, to time.Time, ok bool) {
	from, to = p.AOS.Add(padding(m.AOS, sigmas)), p.LOS.Add(-padding(m.LOS, sigmas))
	return from, to, to.After(from)
}

// padding returns seconds times sigmas, up to the next millisecond, at most a day.
func padding(seconds, sigmas float64) time.Duration {
	if math.IsNaN(seconds) {
		return 0
	}
	return time.Duration(math.Ceil(min(seconds*sigmas, 86400)*1000)) * time.Millisecond
}

// Motion gives Earth-fixed states over a span of seconds; *orbit.Ephemeris is one.
type Motion interface {
	Seconds(t time.Time) float64
	Span() float64
	StateAt(s float64) orbit.State
}

// Gauge measures how uncertain the passes over one site are. It is immutable and safe
// for use by many goroutines.
type Gauge struct{ skyline *skyline }

// NewGauge prepares a site; decides as in Search. It fails where Search does.
func NewGauge(site *station.Site, decides station.ElevationKind) (*Gauge, error) {
	k, err := newSkyline(site, decides)
	if err != nil {
		return nil, err
	}
	return &Gauge{skyline: k}, nil
}

// PlusMinus returns how uncertain a pass is that Search found over the site. The error
// is that of the uncertainty, whose span may be shorter than the pass.
//
// The edges: a displacement δ moves the elevation over the skyline by g·δ and so the
// crossing by g·δ over the rate at which it is crossed; its standard deviation is
// sqrt(gᵀ C g) over that rate. Along a mask the skyline moves with the azimuth.
// Draws of neighbouring orbits agree within their sampling error
// (TestSpreadOfDrawnOrbits).
func (g *Gauge) PlusMinus(m Motion, p *Pass, u orbit.Uncertainty) (PlusMinus, error) {
	out := PlusMinus{AOS: math.NaN(), LOS: math.NaN()}
	at := func(t time.Time) (orbit.State, orbit.Spread, error) {
		s, err := u.At(t)
		return m.StateAt(min(max(m.Seconds(t), 0), m.Span())), s, err
	}
	state, spread, err := at(p.Culmination)
	if err != nil {
		return out, err
	}
	f := &g.skyline.frame
	over := g.over(state)
	out.Culminating = f.LookSpread(state, spread)
	out.MaxElevation = out.Culminating.Elevation
	out.Headroom = unit.Angle(over.height)
	out.Clearance = math.Inf(1)
	if sigma := over.sigma(state, spread); sigma > 0 {
		out.Clearance = over.height / sigma
	}
	for _, edge := range [2]struct {
		t       time.Time
		cut     Cut
		seconds *float64
		look    *station.LookSpread
	}{{p.AOS, CutAOS, &out.AOS, &out.AtAOS}, {p.LOS, CutLOS, &out.LOS, &out.AtLOS}} {
		state, spread, err := at(edge.t)
		if err != nil {
			return out, err
		}
		*edge.look = f.LookSpread(state, spread)
		if p.Cut&edge.cut == 0 {
			over := g.over(state)
			*edge.seconds = over.sigma(state, spread) / math.Abs(over.rate(state))
		}
	}
	return out, nil
}

// height over the skyline at a state, in rad, with its gradient in rad/m.
type heightOver struct {
	height   float64
	gradient orbit.Vec3
}

func (h *heightOver) rate(s orbit.State) float64 { return h.gradient.Dot(s.Velocity) }

func (h *heightOver) sigma(s orbit.State, spread orbit.Spread) float64 {
	a := s.Axes()
	return math.Sqrt(spread.Variance(h.gradient.Dot(a.Radial), h.gradient.Dot(a.Along), h.gradient.Dot(a.Across)))
}

// slopeStep is half the azimuth, in rad, over which the slope of a skyline is taken.
const slopeStep = 1e-5

// over returns the height over the skyline. In the zenith, where there is no azimuth,
// the gradient is that of a level skyline.
func (g *Gauge) over(s orbit.State) heightOver {
	f := &g.skyline.frame
	d := s.Position.Sub(f.Origin)
	e, n, u := d.Dot(f.East), d.Dot(f.North), d.Dot(f.Up)
	ground := math.Hypot(e, n)
	rho2 := ground*ground + u*u
	az := math.Atan2(e, n)
	h := heightOver{height: math.Atan2(u, ground) - g.skyline.at(az)}
	if ground < 1e-9*math.Sqrt(rho2) {
		h.gradient = f.North.Scale(1 / math.Sqrt(rho2))
		return h
	}
	outward := f.East.Scale(e / ground).Add(f.North.Scale(n / ground))
	h.gradient = f.Up.Scale(ground / rho2).Sub(outward.Scale(u / rho2))
	if !g.skyline.level() {
		slope := (g.skyline.at(az+slopeStep) - g.skyline.at(az-slopeStep)) / (2 * slopeStep)
		sideways := f.East.Scale(n / ground).Sub(f.North.Scale(e / ground)) // clockwise from above
		h.gradient = h.gradient.Sub(sideways.Scale(slope / ground))
	}
	return h
}
