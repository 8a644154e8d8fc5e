package orbit

import "time"

// failure returns the error of the set k seconds after the epoch.
func (p *propagator) failure(k int) *PropagationError {
	pos, vel := p.raw(k)
	el := &p.elements
	return &PropagationError{
		Name: el.Name, CatalogNumber: el.CatalogNumber,
		Time: el.Epoch.Add(time.Duration(k) * time.Second), Epoch: el.Epoch,
		Reason: p.check(k, pos, vel),
	}
}

// firstBad returns the first second without a state between a good one and a bad
// one, seen from the good one.
func (p *propagator) firstBad(good, bad int) int {
	for bad-good > 1 || good-bad > 1 {
		mid := good + (bad-good)/2
		if p.reasonAt(mid) != 0 {
			bad = mid
		} else {
			good = mid
		}
	}
	return bad
}

// watch follows an orbit knot by knot and finds the second in which it ends.
type watch struct {
	p       *propagator
	end     float64 // seconds after the epoch that are of interest
	low     float64 // radius in m of a knot under which a perigee between knots may lie in the ground
	good    int     // the last second known to be sound
	sinking bool    // towards the perigee, there
	bad     int     // the first second without a state, once found
	found   bool
}

// ends takes the state at k and tells, once, whether the orbit ended since the last
// one, at w.bad, inside the time of interest.
func (w *watch) ends(k int, position, velocity Vec3) bool {
	if w.found {
		return false
	}
	rising := position.Dot(velocity) >= 0
	switch {
	case w.p.check(k, position, velocity) != 0:
		w.bad, w.found = w.p.firstBad(w.good, k), true
	case w.sinking && rising && position.Norm() < w.low:
		w.bad, w.found = w.p.firstBadBetween(w.good, k)
	}
	w.good, w.sinking = k, !rising
	return w.found && float64(w.bad) <= w.end
}

// firstBad returns the second found, or otherwise k.
func (w *watch) firstBad(k int) int {
	if w.found {
		return w.bad
	}
	return k
}

// lowPerigee returns the radius for watch.low: between two knots an orbit sags by
// less than the acceleration on the ground times an eighth of the step squared.
func lowPerigee(step float64) float64 {
	const gravity = 9.82 // m/s²
	return wgs72RadiusKm*1000 + gravity/8*step*step
}

// firstBadBetween looks at each second between two sound ones.
func (p *propagator) firstBadBetween(a, b int) (int, bool) {
	for k := a + 1; k < b; k++ {
		if p.reasonAt(k) != 0 {
			return k, true
		}
	}
	return 0, false
}

// reasonAt computes the state at k and checks it.
func (p *propagator) reasonAt(k int) Reason {
	pos, vel := p.raw(k)
	return p.check(k, pos, vel)
}
