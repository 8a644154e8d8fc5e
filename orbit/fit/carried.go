package fit

import (
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
)

// carried refuses a fit that SGP4 does not carry, or that leaves elements open.
func (o *Options) carried(r *Result) error {
	most := o.MostRMS
	if most == 0 {
		most = mostRMS
	}
	switch {
	case !(r.RMS <= most):
		return &Refusal{Why: BeyondTheory,
			Found: fmt.Sprintf("the RMS distance is %s, worst %s along at %s; at most %s are taken", kilometres(r.RMS), kilometres(r.Along.Worst),
				r.Along.At.UTC().Format("2006-01-02T15:04:05Z"), kilometres(most)),
			Next: "check frame and time scale; split the span at a manoeuvre; take a shorter one; or allow more"}
	case !(r.Condition <= mostCondition):
		return &Refusal{Why: Undetermined,
			Found: fmt.Sprintf("the condition number of the partials is %s, over %s: some combination of elements is not in the data", short(r.Condition), short(mostCondition)),
			Next:  "give a longer span, velocities, or state B*"}
	}
	return nil
}

// leastDrag is a doubt in B* that always passes: on an orbit of 500 km height it is some
// 200 m along the track after a day (the drag that a set of B* 1e-4 shows there).
const leastDrag = 5e-5

// mostDoubt is a doubt in B* that never passes: the greatest B* there are, of foil and empty
// tanks about to fall, are some 0.1.
const mostDoubt = 0.05

// ownOrbit in m is an RMS under which the data are SGP4's own, or as good.
const ownOrbit = 10

// dragCarried refuses a B* that is smaller than its own standard deviation, since the set would be
// better off with 0, and one well below 0 on a real low orbit: air does not push, but what SGP4
// leaves out of the Earth's field looks like that over half a day.
func dragCarried(r *Result) error {
	if !r.DragFound {
		return nil
	}
	refuse := func(what, next string) error {
		return &Refusal{Why: SpanShortForDrag, Next: next,
			Found: fmt.Sprintf("it comes out as %s ± %s per Earth radius%s", short(r.Elements.BStar), short(r.sigma(atDrag)), what)}
	}
	if r.sigma(atDrag) > math.Max(leastDrag, math.Min(mostDoubt, math.Abs(r.Elements.BStar))) {
		return refuse("", "give a longer span, or state B*: that of an earlier set, or 0")
	}
	facts, err := r.Elements.Facts()
	if err == nil && facts.Kind == orbit.NearEarth && r.Elements.BStar < -leastDrag && r.RMS > ownOrbit {
		return refuse(", below 0, where air only brakes", "give a span of a day or more, look for a manoeuvre in it, or state B*: that of an earlier set, or 0")
	}
	return nil
}

// mostSpread in m is a standard deviation a revolution after the epoch with which a set
// points no antenna at the next pass: 13 s early or late on a low orbit.
const mostSpread = 100e3

// positionCarried refuses a set whose own position is open.
func positionCarried(r *Result) error {
	revolution := time.Duration(24 / r.Elements.MeanMotion * float64(time.Hour))
	s, err := r.Uncertainty.At(r.Elements.Epoch.Add(revolution))
	if err != nil {
		return &Refusal{Why: OutsideTheory, Found: "the orbit ends within a revolution after the epoch", Err: err,
			Next: "choose an earlier epoch; where the orbit is about to decay, no set lasts"}
	}
	if total := s.Total().Metres(); !(total <= mostSpread) {
		return &Refusal{Why: Undetermined, Found: "the position a revolution after the epoch is known to " + kilometres(total) + " only",
			Next: "give a longer span, velocities, or an epoch within the data"}
	}
	return nil
}
