package solve

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/verify"
)

// Options steer a search. The zero value runs until the optimum is proven or the context
// ends.
type Options struct {
	Rounds  int // most rounds; 0: no end but the proof's or the context's
	Workers int // goroutines; 0: two
	Seed    uint64
	// Start is a plan to begin with, as far as it keeps the rules: the plan in force. The
	// greedy plan fills what it leaves. Nil: none.
	Start *contacts.Plan
	// GapGoal ends the search when the bound is at most this share above the value; 0: only
	// a proof ends it.
	GapGoal  float64
	Progress func(Progress) // called after the first plan and after each round; may be nil
}

// Progress is how far a search has come.
type Progress struct {
	Round      int     `json:"round"`
	Value      float64 `json:"value"`
	Bound      float64 `json:"bound"`
	GapPercent float64 `json:"gap_percent"`
}

// Stop says what ended a search.
type Stop string

// Ends of a search.
const (
	Proven    Stop = "proven optimal"
	Goal      Stop = "gap small enough"
	Deadline  Stop = "time limit"
	Cancelled Stop = "stopped"
	Rounds    Stop = "number of rounds"
)

// Result is the best plan and what is proven about it.
type Result struct {
	Plan       contacts.Plan  `json:"-"`
	Worth      contacts.Worth `json:"worth"`
	Value      float64        `json:"value"`
	Bound      float64        `json:"bound"`       // no plan is worth more
	GapPercent float64        `json:"gap_percent"` // of the value, between it and the bound
	Proven     bool           `json:"proven_optimal"`
	Stop       Stop           `json:"stop"`
	Rounds     int            `json:"rounds"`
	First      float64        `json:"first_value"` // of the greedy plan
	Left       []string       `json:"left_out"`    // rules that the bound does not know; plans keep them
}

// tolerance is the share of the value to which bounds are computed and within which a
// plan counts as optimal.
const tolerance = 1e-6

// Solve finds a plan. It fails where the problem does not pass its check or where its
// fixed contacts alone break a rule. When the context ends it returns the best plan so
// far, whole, and says so in Stop; that is no error.
func Solve(ctx context.Context, p *contacts.Problem, o Options) (Result, error) {
	if err := p.Check(); err != nil {
		return Result{}, err
	}
	m := newModel(p)
	if faults := breaches(p, m.held); faults != nil {
		return Result{}, fmt.Errorf("what is fixed breaks rules by itself; free some of it: %w", faults)
	}
	r := newRun(ctx, m, o)
	r.rounds()
	r.search.best = restored(p, r.search.best)
	return r.result()
}

// breaches returns what contacts break, the absence of others aside.
func breaches(p *contacts.Problem, list []contacts.Contact) error {
	var faults []error
	for _, b := range verify.Plan(p, contacts.Plan{Contacts: list}) {
		faults = append(faults, b)
	}
	return errors.Join(faults...)
}

// run is one search.
type run struct {
	ctx    context.Context
	o      Options
	m      *model
	d      *dual
	search *search
	ascent *ascent
	grids  []*grid // from coarse to fine
	level  int
	tree   *tree // once the problem is being divided; nil before, and where it is too large
	done   int   // rounds
	first  float64
	stop   Stop
}

func newRun(ctx context.Context, m *model, o Options) *run {
	r := &run{ctx: ctx, o: o, m: m, d: newDual(m)}
	if r.o.Workers <= 0 {
		r.o.Workers = 2
	}
	r.grids = r.d.grids()
	r.search = newSearch(m, r.d, o.Seed, o.Start)
	r.first = r.search.bestValue
	r.ascent = newAscent(r.grids[0])
	return r
}

// Numbers of cells with which a chain is worked off at first, and at most.
const (
	fewCells  = 400_000
	manyCells = 12_000_000
)

// grids lays grids over the problem: a coarse one on which prices are found fast, and the
// finest that is not too large, exact where it can be.
func (d *dual) grids() []*grid {
	unit := d.unit()
	total, shortest := ms(0), contacts.Day
	for _, w := range d.m.windows {
		total += w.to - w.from
		shortest = min(shortest, w.least)
	}
	cell := func(cells ms) ms { // the shortest multiple of the unit with at most so many cells
		k := (total/unit + cells - 1) / cells
		return unit * max(1, k)
	}
	fine, coarse := cell(manyCells), cell(fewCells)
	coarse = min(coarse, max(fine, shortest/4/unit*unit))
	var out []*grid
	for ; coarse > fine; coarse = coarse / 5 / unit * unit {
		out = append(out, newGrid(d, coarse, false))
	}
	return append(out, newGrid(d, fine, fine == unit))
}

// Work of a round.
const (
	movesARound = 150
	stepsARound = 8
	nodesARound = 30

	roundsBefore = 8   // before a problem is divided
	treeWindows  = 400 // most windows of a problem that is
)

func (r *run) rounds() {
	r.tell()
	for {
		if r.ended() {
			return
		}
		r.round()
		r.done++
		r.tell()
	}
}

// ended tells whether the search is over, and why.
func (r *run) ended() bool {
	value, bound := r.search.bestValue, r.bound()
	switch {
	case bound-value <= tolerance*math.Abs(value):
		r.stop = Proven
	case r.o.GapGoal > 0 && bound-value <= r.o.GapGoal*math.Abs(value):
		r.stop = Goal
	case errors.Is(r.ctx.Err(), context.DeadlineExceeded):
		r.stop = Deadline
	case r.ctx.Err() != nil:
		r.stop = Cancelled
	case r.o.Rounds > 0 && r.done >= r.o.Rounds:
		r.stop = Rounds
	}
	return r.stop != ""
}

// round lets both sides work, each with what the other knew when the round began, so that
// the outcome does not depend on how many goroutines there are.
func (r *run) round() {
	value := r.search.bestValue
	stop := func() bool { return r.ctx.Err() != nil }
	// A few hundredths of a contact may be lost by a move: measured, more and less help less.
	r.search.heat = 0.03 * math.Abs(value) / float64(1+len(r.search.best.Contacts)) * 2 / float64(1+r.done%8)
	bound := make(chan struct{})
	steps, moves := r.steps(), r.moves()
	work := func() {
		defer close(bound)
		for range steps {
			if stop() || r.tree != nil && !r.tree.full {
				return
			}
			if last := r.level+1 == len(r.grids); r.ascent.step(value, max(1, r.o.Workers-1)) && !last || !last && r.ascent.length < 0.05 {
				r.level++
				r.ascent.moved(r.grids[r.level])
			}
		}
	}
	if r.o.Workers > 1 {
		go work()
	} else {
		work()
	}
	r.search.run(moves, stop)
	<-bound
	if r.tree != nil {
		r.tree.run(r.search, nodesARound, stop)
		return
	}
	if r.done+1 >= roundsBefore && len(r.m.windows) <= treeWindows {
		r.tree = newTree(r.d, r.ascent.best, r.ascent.bound)
	}
	r.search.price(slices.Clone(r.ascent.best))
	if k := r.done; k&(k-1) == 0 || k%16 == 0 {
		r.search.adopt(r.ascent.last.chosen)
	}
}

// cost returns how much longer a step takes than on the coarsest grid.
func (r *run) cost() int {
	return max(1, r.grids[r.level].size()/max(1, r.grids[0].size()))
}

// steps returns the steps of the bound in a round.
func (r *run) steps() int { return max(1, stepsARound/r.cost()) }

// moves returns the moves of the search in a round, so many that they take about as long.
func (r *run) moves() int {
	moves := max(movesARound, len(r.m.windows)/70) * max(1, r.cost()/stepsARound)
	return min(moves, 10*len(r.m.windows))
}

// bound returns the least that is proven.
func (r *run) bound() float64 {
	if r.tree == nil {
		return r.ascent.bound
	}
	return min(r.ascent.bound, max(r.tree.bound(), r.search.bestValue))
}

func (r *run) tell() {
	if r.o.Progress != nil {
		r.o.Progress(Progress{r.done, r.search.bestValue, r.bound(), gapPercent(r.search.bestValue, r.bound())})
	}
}

// gapPercent returns the share by which a bound lies above a value; NaN without a bound.
func gapPercent(value, bound float64) float64 {
	switch {
	case math.IsInf(bound, 1):
		return math.NaN()
	case bound <= value:
		return 0
	case value == 0:
		return 100
	}
	return 100 * (bound - value) / math.Abs(value)
}
