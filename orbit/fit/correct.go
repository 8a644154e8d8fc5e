package fit

import (
	"context"
	"math"
	"time"

	"slantwise/orbit"
)

// problem is a differential correction: data, what is known, which unknowns are sought.
type problem struct {
	ctx    context.Context
	data   []Datum
	base   orbit.Elements // the epoch and what is no unknown
	active []int

	progress func(data int) // may be nil
}

func newProblem(ctx context.Context, data []Datum, base orbit.Elements, drag bool) *problem {
	pr := &problem{ctx: ctx, data: data, base: base}
	for j := range unknowns {
		if j != atDrag || drag {
			pr.active = append(pr.active, j)
		}
	}
	return pr
}

// point is the problem seen from a point of the unknowns.
type point struct {
	at     parameters
	linear *linear
	cost   float64 // weighted sum of squares

	stalled bool // no better point was found, though one should be near
}

// look propagates to every datum. The error is the propagation's, of the point itself: where
// only a step to its side leaves the theory, as it does hours before a decay, steps get
// shorter first.
func (pr *problem) look(p parameters) (*point, error) {
	var err error
	for _, share := range [...]float64{1, 0.1, 0.01} {
		var out *point
		if out, err = pr.lookBy(p, share); err == nil || pr.ctx.Err() != nil {
			return out, err
		}
	}
	return nil, err
}

func (pr *problem) lookBy(p parameters, share float64) (*point, error) {
	b, err := newProbe(p, pr.active, pr.base, farthest(pr.data, pr.base.Epoch), share)
	if err != nil {
		return nil, err
	}
	motion := p.v[atMotion] * 2 * math.Pi / 86400
	m := len(pr.active)
	gathered, row := newReduction(m), make([]float64, m+1)
	var partials [6][unknowns]float64
	out := &point{at: p}
	for i := range pr.data {
		if err := pr.ctx.Err(); err != nil {
			return nil, err
		}
		if pr.progress != nil && i%progressEvery == progressEvery-1 {
			pr.progress(progressEvery)
		}
		d := &pr.data[i]
		state, err := b.at(d.Time, &partials)
		if err != nil {
			return nil, err
		}
		seen := [6]float64{d.Position.X, d.Position.Y, d.Position.Z, d.Velocity.X, d.Velocity.Y, d.Velocity.Z}
		sigmaP, sigmaV := d.sigmas(motion)
		for c := range d.rows() {
			sigma := sigmaP
			if c >= 3 {
				sigma = sigmaV
			}
			for j := range m {
				row[j] = partials[c][j] / sigma
			}
			row[m] = (seen[c] - state[c]) / sigma
			out.cost += row[m] * row[m]
			gathered.add(row)
		}
	}
	out.linear = gathered.solve()
	return out, nil
}

// progressEvery is how many data pass between two words of progress.
const progressEvery = 1000

const (
	mostRounds   = 60
	firstDamping = 1e-9
	mostDamping  = 1e6
	mostDrag     = 1 // B* beyond it is none: a sheet of foil has some 0.1
)

// correct lowers the sum of squares from a first guess until steps are worth nothing. The
// refusal is NotConverged, SpanShortForDrag, Undetermined or OutsideTheory; with the first two comes the
// best point so far.
func (pr *problem) correct(p parameters) (*point, int, error) {
	now, err := pr.look(p)
	if err != nil {
		return nil, 0, pr.outside(err)
	}
	damping := firstDamping
	for round := 1; round <= mostRounds; round++ {
		if !now.linear.ok {
			return nil, round, &Refusal{Why: Undetermined, Found: "an element has no effect on any datum",
				Next: "give data of more instants, with velocities, or state B*"}
		}
		d, gain := now.linear.step(damping)
		if pr.worthless(gain, now.cost) {
			return now, round, nil
		}
		next, err := pr.look(now.at.moved(pr.active, d))
		switch {
		case pr.ctx.Err() != nil:
			return nil, round, pr.ctx.Err()
		case err == nil && next.cost < now.cost && math.Abs(next.at.v[atDrag]) > mostDrag:
			return now, round, runaway(next.at.v[atDrag])
		case err == nil && next.cost < now.cost:
			if now.cost-next.cost < 1e-9*now.cost {
				return next, round, nil
			}
			now, damping = next, damping/10
		case err == nil && gain < 1e-6*now.cost: // the noise of the propagation
			return now, round, nil
		case damping > mostDamping:
			return pr.stall(now, round)
		default:
			damping = math.Max(damping*30, 1e-7)
		}
	}
	return pr.stall(now, mostRounds)
}

const (
	// stalledGain is the share of the sum of squares, and stalledRMS the RMS in m, under which it
	// does not matter that a correction stalls: SGP4 is not smooth everywhere (near the
	// equator its lunar and solar terms turn with the node, under 0.0001 of
	// eccentricity terms of drag are switched off), and its own error is above a hundred metres.
	stalledGain = 0.1
	stalledRMS  = 100
)

// stall ends a correction that finds no better point: for good where little is left to
// gain, else by a refusal.
func (pr *problem) stall(now *point, round int) (*point, int, error) {
	_, gain := now.linear.step(0)
	now.stalled = true
	if gain < stalledGain*now.cost || pr.rms(now) < stalledRMS {
		return now, round, nil
	}
	return now, round, &Refusal{Why: NotConverged,
		Found: plural(round, "round") + " of correction end at an RMS of " + kilometres(pr.rms(now)),
		Next:  "check times, frame and units; take a shorter span, which one orbit without manoeuvre covers"}
}

// rms returns the root of the mean square of a residual as if each sigma stood for its
// length in m.
func (pr *problem) rms(p *point) float64 {
	motion, sum := p.at.v[atMotion]*2*math.Pi/86400, 0.0
	for i := range pr.data {
		sigma, _ := pr.data[i].sigmas(motion)
		sum += sigma * sigma
	}
	return math.Sqrt(3 * p.cost / float64(countRows(pr.data)) * sum / float64(len(pr.data)))
}

func runaway(bStar float64) error {
	return &Refusal{Why: SpanShortForDrag, Found: "it runs away to " + short(bStar) + " per Earth radius",
		Next: "give a longer span, or state B*: that of an earlier set, or 0"}
}

// worthless tells whether a gain in the sum of squares is below what the propagation
// resolves: a hundredth of a millimetre where a sigma is 1 m, or a billionth of the sum.
func (pr *problem) worthless(gain, cost float64) bool {
	return gain <= 1e-10*float64(countRows(pr.data)) || gain <= 1e-10*cost
}

func (pr *problem) outside(err error) error {
	if pr.ctx.Err() != nil {
		return pr.ctx.Err()
	}
	return &Refusal{Why: OutsideTheory, Found: "the propagation fails within the data", Err: err,
		Next: "check times, frame and units; take a shorter span"}
}

// moved returns the point a step away.
func (p parameters) moved(active []int, d []float64) parameters {
	for k, j := range active {
		p.v[j] += d[k]
	}
	return p
}

// farthest returns the seconds from the epoch to the datum farthest from it.
func farthest(data []Datum, epoch time.Time) (s float64) {
	for i := range data {
		s = math.Max(s, math.Abs(data[i].Time.Sub(epoch).Seconds()))
	}
	return s
}
