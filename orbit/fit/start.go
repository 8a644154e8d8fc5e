package fit

import (
	"cmp"
	"context"
	"math"
	"slices"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// mostAnchors is how many data are tried as the first guess's.
const mostAnchors = 8

// first returns elements near the data with the time of one of them, the nearest to t that
// gives any, as their epoch. Near means some kilometres over the next revolution.
func first(data []Datum, t time.Time, bStar float64) (orbit.Elements, error) {
	var refused error
	for _, anchor := range anchors(data, t) {
		el, err := from(data, anchor, bStar)
		if err == nil {
			return el, nil
		}
		if refused == nil {
			refused = err
		}
	}
	return orbit.Elements{}, refused
}

// anchors returns data by their distance in time from t, those with a velocity first.
func anchors(data []Datum, t time.Time) []int {
	order := make([]int, len(data))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int {
		a, b := &data[i], &data[j]
		if a.HasVelocity != b.HasVelocity {
			return b.rows() - a.rows()
		}
		return cmp.Compare(a.Time.Sub(t).Abs(), b.Time.Sub(t).Abs())
	})
	return order[:min(len(order), mostAnchors)]
}

// from makes a first guess from a state, or from a position and another by Lambert's problem.
func from(data []Datum, anchor int, bStar float64) (orbit.Elements, error) {
	d := &data[anchor]
	velocity := d.Velocity
	if !d.HasVelocity {
		var err error
		if velocity, err = velocityAt(data, anchor); err != nil {
			return orbit.Elements{}, err
		}
	}
	el, err := elementsNear(d.Position, velocity, d.Time, bStar, nil)
	if err != nil {
		return orbit.Elements{}, &Refusal{Why: OutsideTheory, Time: d.Time, Line: d.Line, Found: "no elements belong to the first guess",
			Err: err, Next: "check frame and units"}
	}
	return el, nil
}

const (
	bestTurn  = 60 * math.Pi / 180  // between the two positions of the first guess
	mostTurn  = 150 * math.Pi / 180 // nearly opposite positions do not tell the plane
	mostShare = 0.4                 // of a revolution between neighbours: more could be a whole one more
)

// velocityAt finds the velocity of a datum from a position some sixth of a revolution away.
func velocityAt(data []Datum, anchor int) (orbit.Vec3, error) {
	best, other := math.Inf(1), -1
	for _, direction := range []int{1, -1} {
		turn := 0.0
		for i := anchor; ; i += direction {
			j := i + direction
			if j < 0 || j >= len(data) || gapShare(&data[i], &data[j]) > mostShare {
				break
			}
			turn += angleBetween(data[i].Position, data[j].Position)
			if turn > mostTurn {
				break
			}
			if off := math.Abs(turn - bestTurn); off < best {
				best, other = off, j
			}
		}
	}
	refuse := func(found string) error {
		return &Refusal{Why: NoFirstGuess, Time: data[anchor].Time, Line: data[anchor].Line, Found: found,
			Next: "give velocities, or positions that follow each other within a quarter of a revolution"}
	}
	if other < 0 {
		return orbit.Vec3{}, refuse("no other position lies within 0.4 of a revolution and 150 degrees, so that the count of revolutions stays open")
	}
	a, b := &data[anchor], &data[other]
	seconds := b.Time.Sub(a.Time).Seconds()
	v, ok := between(a.Position, b.Position, math.Abs(seconds))
	if seconds < 0 { // the same orbit the other way round
		v = v.Scale(-1)
	}
	if !ok {
		return orbit.Vec3{}, refuse("no orbit of two bodies joins it and the position at " + b.Time.UTC().Format("2006-01-02T15:04:05.000Z"))
	}
	return v, nil
}

// gapShare returns the time between two data as a share of the revolution on a circle
// through the lower of them.
func gapShare(a, b *Datum) float64 {
	r := math.Min(a.Position.Norm(), b.Position.Norm())
	return math.Abs(b.Time.Sub(a.Time).Seconds()) / (2 * math.Pi * math.Sqrt(r*r*r/mu))
}

func angleBetween(a, b orbit.Vec3) float64 { return math.Atan2(a.Cross(b).Norm(), a.Dot(b)) }

const (
	arcGrowth  = 2   // each arc is so many times the one before, or less where that fails
	leastArc   = 1.1 // the least growth
	arcData    = 200 // of an arc that grows, so many are looked at
	dragFrom   = 2   // revolutions from which a growing arc frees B*
	firstReach = 1   // revolutions to either side of the first arc
)

// grow fits arcs about the epoch of the elements, a revolution to either side first, then ever longer
// ones, so that each starts within the reach of the next, and returns elements that follow
// all data roughly. The epoch stays.
func grow(ctx context.Context, data []Datum, el orbit.Elements, drag bool) (orbit.Elements, error) {
	whole, growth := farthest(data, el.Epoch), float64(arcGrowth)
	last, reach := 0.0, float64(firstReach)
	for {
		seconds := reach * 86400 / el.MeanMotion
		arc := within(data, el.Epoch, seconds)
		free := drag && reach >= dragFrom
		found, err := arcFit(ctx, arc, el, free)
		switch {
		case ctx.Err() != nil:
			return el, ctx.Err()
		case err != nil && (growth < leastArc || last == 0):
			return el, err
		case err != nil:
			growth = math.Sqrt(growth)
			reach = last * growth
			continue
		case seconds >= whole:
			return found, nil
		}
		el, last = found, reach
		reach *= growth
	}
}

// arcFit corrects elements by the data of an arc; where those are too few, they stay. An arc
// that does not converge gives the best it came to: the next one may.
func arcFit(ctx context.Context, arc []Datum, el orbit.Elements, drag bool) (orbit.Elements, error) {
	pr := newProblem(ctx, arc, el, drag)
	if countRows(arc) < len(pr.active) {
		return el, nil
	}
	found, _, err := pr.correct(fromElements(&el))
	if found == nil {
		return el, err
	}
	found.at.into(&el)
	return el, nil
}

// within returns the data within so many seconds of an instant, thinned evenly.
func within(data []Datum, epoch time.Time, seconds float64) []Datum {
	var near []Datum
	for _, d := range data {
		if math.Abs(d.Time.Sub(epoch).Seconds()) <= seconds {
			near = append(near, d)
		}
	}
	if len(near) <= arcData {
		return near
	}
	thin := make([]Datum, arcData)
	for i := range thin {
		thin[i] = near[i*(len(near)-1)/(arcData-1)]
	}
	return thin
}

// moveEpoch returns the elements of the same orbit at another epoch: those whose state there
// is that of the old ones.
func moveEpoch(el orbit.Elements, epoch time.Time) (orbit.Elements, error) {
	if epoch.Equal(el.Epoch) {
		return el, nil
	}
	p, err := orbit.NewPropagation(el)
	if err != nil {
		return el, err
	}
	position, velocity, err := p.At(epoch)
	if err != nil {
		return el, err
	}
	guess := el
	guess.MeanAnomaly = (el.MeanAnomaly + unit.Angle(2*math.Pi*el.MeanMotion*epoch.Sub(el.Epoch).Hours()/24)).Wrapped()
	return elementsNear(position, velocity, epoch, el.BStar, &guess)
}
