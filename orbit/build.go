package orbit

import (
	"math"
	"slices"
	"time"

	"slantwise/orbit/unit"
)

// farthestFromEpoch bounds the time from the epoch to either end of a span.
const farthestFromEpoch = 10 * 365.25 * 24 * time.Hour

// Rebuild makes e the ephemeris of another element set or span and uses its memory
// again, for runs over many satellites. Nobody else may use e meanwhile; after an
// error it holds nothing until it is rebuilt. Errors are those of NewEphemeris.
func (e *Ephemeris) Rebuild(el Elements, from, to time.Time, earth EarthOrientation) error {
	*e = Ephemeris{elements: el, reference: from.UTC(), knots: e.knots[:0], sun: SunTrack{knots: e.sun.knots}}
	if err := earth.Validate(); err != nil {
		return err
	}
	p, err := newPropagator(&el)
	if err != nil {
		return err
	}
	if err := checkSpan(&el, from, to); err != nil {
		return err
	}
	sinceEpoch := from.Sub(el.Epoch).Seconds()
	length := to.Sub(from).Seconds()
	_, axis := el.recovered()
	jump := axis * wgs72RadiusKm * 1000 / 60 * p.mean.kink(sinceEpoch/60, (sinceEpoch+length)/60)
	b := builder{
		e: e, p: p, rot: newRotation(from, earth),
		sinceEpoch: sinceEpoch, start: int(math.Floor(sinceEpoch)),
		step: int(min(knotStep(&el, p.eccentricityOver(sinceEpoch, sinceEpoch+length)), kinkStep(jump))),
	}
	if err := b.approach(); err != nil {
		return err
	}
	e.sun.prepare(from, to, b.rot)
	for range finestHalvings + 1 {
		if err := b.fill(length); err != nil {
			return err
		}
		if b.close() {
			break
		}
		b.step = max(1, b.step/2)
	}
	return nil
}

func checkOrder(from, to time.Time) error {
	if to.Before(from) {
		return &unit.RangeError{Quantity: "length of the span", Value: to.Sub(from).Seconds(), Unit: "s",
			Allowed: "0 or more", Next: "give the earlier instant first"}
	}
	return nil
}

func checkSpan(el *Elements, from, to time.Time) error {
	if err := checkOrder(from, to); err != nil {
		return err
	}
	for _, t := range [2]time.Time{from, to} {
		if d := t.Sub(el.Epoch); d > farthestFromEpoch || d < -farthestFromEpoch {
			return &unit.RangeError{Quantity: "time from the epoch of " + objectName(el.Name, el.CatalogNumber),
				Value: math.Round(d.Hours() / 24), Unit: "days", Allowed: "within ±3652 days",
				Next: "take an element set of the time asked for"}
		}
	}
	return nil
}

// builder fills the knots of an ephemeris.
type builder struct {
	e          *Ephemeris
	p          *propagator
	rot        rotation
	sinceEpoch float64 // s, of the reference
	start      int     // whole seconds after the epoch of the first knot
	step       int
}

// approach makes sure that the orbit still exists at the first knot: equations that
// have passed through a decay can give states again that look sound.
func (b *builder) approach() error {
	const samples = 64
	good := 0
	for i := range samples + 1 {
		k := b.start * i / samples
		p, v := b.p.raw(k)
		if b.p.check(k, p, v) != 0 {
			return b.p.failure(b.p.firstBad(good, k))
		}
		good = k
	}
	return nil
}

// fill computes the knots and their differences for a span of so many seconds. Where the orbit ends inside the
// span, the knots go on past its end as long as the equations give numbers, since
// the differences need them.
func (b *builder) fill(end float64) error {
	e := b.e
	e.truncated = nil
	e.layOut(float64(b.start)-b.sinceEpoch, end, float64(b.step))
	w := watch{p: b.p, good: b.start, end: b.sinceEpoch + e.end, low: lowPerigee(e.step)}
	for i := 0; i < len(e.knots); i++ {
		k := b.start + (i-reach)*b.step
		p, v := b.p.raw(k)
		if i >= reach && w.ends(k, p, v) {
			if err := b.shorten(w.bad, float64(w.bad-1)); err != nil {
				return err
			}
		}
		if !b.p.smooth(k, p, v) {
			if err := b.shorten(w.firstBad(k), float64(b.start+(i-1-2*reach)*b.step)); err != nil {
				return err
			}
			break
		}
		st := b.rot.earthFixed(float64(k)-b.sinceEpoch, p, v)
		e.knots[i].p, e.knots[i].v = st.Position, st.Velocity
	}
	for i := reach; i <= e.last+1+reach; i++ {
		differentiate(e.knots, i)
	}
	return nil
}

// shorten ends the span at a time in seconds after the epoch because of a failure
// at bad, the first reason given being kept.
func (b *builder) shorten(bad int, end float64) error {
	e := b.e
	if e.truncated == nil {
		e.truncated = b.p.failure(bad)
	}
	e.end = end - b.sinceEpoch
	if e.end < 0 {
		e.knots = e.knots[:0]
		return e.truncated
	}
	e.last = e.intervalOf(e.end)
	e.knots = e.knots[:e.last+2+2*reach]
	return nil
}

// layOut makes room for the knots of a span that ends at end, the first knot at first,
// at most 0; all in seconds after the reference.
func (e *Ephemeris) layOut(first, end, step float64) {
	e.end, e.first, e.step, e.rate = end, first, step, 1/step
	e.last = e.intervalOf(end)
	count := e.last + 2 + 2*reach
	e.knots = slices.Grow(e.knots, count)[:count]
}

// intervalOf returns the number of the interval between knots that ends at s or
// holds it.
func (e *Ephemeris) intervalOf(s float64) int {
	return max(0, int(math.Ceil((s-e.first)/e.step))-1)
}

const (
	// closeEnough is the difference in m from SGP4, midway between knots, above which
	// the step is halved.
	closeEnough = 0.1
	// finestHalvings bounds that. An orbit that needs more is within hours of its end,
	// where SGP4 itself has kinks (it holds a vanishing eccentricity at 1e-6).
	finestHalvings = 3
)

// close compares the interpolation with SGP4 midway between some knots of the first
// and the last revolution. The step suits orbits that drag does not tear at; where
// it does, it is worst at that end of the span that is farther from the epoch.
func (b *builder) close() bool {
	const samples = 8
	e := b.e
	motion, _ := e.elements.recovered()
	stride := max(1, int(2*math.Pi/motion*60/e.step)/samples)
	for i := range samples {
		if !b.closeIn(i*stride) || !b.closeIn(e.last-i*stride) {
			return false
		}
	}
	return true
}

// closeIn compares in the middle of an interval, if the span has such an interval
// and reaches to its middle.
func (b *builder) closeIn(interval int) bool {
	e := b.e
	k := b.start + interval*b.step + b.step/2
	s := float64(k) - b.sinceEpoch
	if interval < 0 || interval > e.last || s < 0 || s > e.end {
		return true
	}
	p, v := b.p.raw(k)
	st := b.rot.earthFixed(s, p, v)
	return e.PositionAt(s).Sub(st.Position).Norm() <= closeEnough
}
