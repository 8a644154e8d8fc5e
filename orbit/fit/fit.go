package fit

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
)

// Options say what is sought. The zero value fits all data, B* too, with the epoch of
// DefaultEpoch, rejects nothing and refuses residuals above 5 km.
type Options struct {
	From, To time.Time // data outside are left out; zero: no bound
	Epoch    time.Time // of the set; zero: DefaultEpoch
	// BStar is the drag term where it is stated (1/Earth radii); nil: it is fitted.
	BStar *float64
	// RejectBeyond leaves out data that lie farther from the fit than so many standard
	// deviations, found from the median distance; 0: none. Each is named in the residuals.
	RejectBeyond float64
	// MostRMS is the RMS distance in m above which the fit is refused; 0: 5 km. SGP4 carries a
	// real orbit to about a kilometre over days (AIAA 2006-6753; the factor is common practice).
	MostRMS float64
	// Progress, where there is one, is told how many data more were looked at in the last
	// correction, which looks at all of them some three times.
	Progress func(data int)
}

// Result is a fit.
type Result struct {
	Elements  orbit.Elements // names and numbers are the caller's to fill in
	DragFound bool           // B* was fitted

	Used      int        // data that count
	Residuals []Residual // of all data, in the order of time
	RMS       float64    // of the distances that count, m
	// Of the residuals that count: m, and m/s of the velocities (NaN without any).
	Radial, Along, Across             Statistics
	RadialRate, AlongRate, AcrossRate Statistics

	// Covariance of the unknowns, in the units of Parameters: inverse normal matrix, scaled by
	// the variance of the residuals and DataPerIndependent. Rows of what was not sought are 0.
	// NaN where there is no redundancy.
	Covariance         [unknowns][unknowns]float64
	DataPerIndependent float64      // 1 or more
	Redundancy         int          // numbers given less unknowns
	Condition          float64      // of the scaled partials
	Rounds             int          // of correction, the last problem's
	Stalled            bool         // the correction ended where SGP4 is not smooth, within a few per cent of the least
	Uncertainty        *Uncertainty // nil where there is no redundancy
}

const (
	mostRMS       = 5000 // m, see Options.MostRMS
	mostCondition = 1e9  // of the scaled partials: beyond it nine digits of the data are used up
	mostEpochFar  = 30 * 24 * time.Hour
)

// DefaultEpoch returns the epoch that a fit takes where none is given: the last datum, so that the
// age of the set counts from the data's end and the set is flown forward from it; moved
// back, by less than 27 s, to a multiple of 27 s of the day, which both a whole second and
// the eight decimals of a day in a two-line set hold exactly.
func DefaultEpoch(last time.Time) time.Time { return last.UTC().Truncate(27 * time.Second) }

// Fit finds the elements. The error is a *Refusal, or that of ctx.
func Fit(ctx context.Context, data []Datum, o Options) (*Result, error) {
	all, err := inOrder(data, o.From, o.To)
	if err != nil {
		return nil, err
	}
	if err := o.enough(all); err != nil {
		return nil, err
	}
	epoch := o.Epoch.UTC()
	if o.Epoch.IsZero() {
		epoch = DefaultEpoch(all[len(all)-1].Time)
	}
	if far := max(epoch.Sub(all[len(all)-1].Time), all[0].Time.Sub(epoch)); far > mostEpochFar {
		return nil, &Refusal{Why: OutsideTheory, Found: fmt.Sprintf("the epoch lies %.0f days from the nearest datum, and 30 are allowed", far.Hours()/24),
			Next: "choose an epoch near the data"}
	}
	return o.fromStarts(ctx, all, epoch)
}

// drags are the B* that a fit starts from, in turn, until one leads to a fit: common drag
// first, then those of orbits about to decay, whose data an orbit without drag does not reach.
var drags = [...]float64{0, 1e-3, 1e-2, 1e-1}

// fromStarts fits from one start after the other. The refusal is that of the first.
func (o *Options) fromStarts(ctx context.Context, data []Datum, epoch time.Time) (*Result, error) {
	starts := drags[:]
	if o.BStar != nil {
		starts = []float64{*o.BStar}
	}
	var refused error
	for _, bStar := range starts {
		el, err := o.start(ctx, data, epoch, bStar)
		var r *Result
		if err == nil {
			r, err = o.settle(ctx, data, el)
		}
		var why *Refusal
		if err == nil || !errors.As(err, &why) {
			return r, err
		}
		if refused == nil {
			refused = err
		}
		if why.Why != OutsideTheory && why.Why != NotConverged && why.Why != BeyondTheory {
			break
		}
	}
	return nil, refused
}

// enough refuses data that are fewer than the unknowns. One state alone gives a set
// that passes through it, without any redundancy.
func (o *Options) enough(data []Datum) error {
	sought := unknowns
	if o.BStar != nil {
		sought--
	}
	rows := countRows(data)
	single := len(data) == 1 && rows == 6 && sought == 6
	switch {
	case len(data) == 0:
		return &Refusal{Why: TooFew, Found: "there are none in the span", Next: "give positions, or a wider span"}
	case single || rows > sought && len(data) > 1:
		return nil
	case len(data) == 1 && rows == 6:
		return &Refusal{Why: SpanShortForDrag, Found: "one state says nothing of drag", Next: "state B*, 0 where nothing is known"}
	}
	return &Refusal{Why: TooFew, Found: fmt.Sprintf("%d numbers are given for %d unknowns", rows, sought),
		Next: "give at least three positions, or two states, and state B* where they are few"}
}

// start returns elements at the epoch that follow the data roughly.
func (o *Options) start(ctx context.Context, data []Datum, epoch time.Time, bStar float64) (orbit.Elements, error) {
	el, err := first(data, epoch, bStar)
	if err != nil {
		return el, err
	}
	if el, err = grow(ctx, data, el, o.BStar == nil); err != nil {
		return el, err
	}
	if el, err = moveEpoch(el, epoch); err != nil {
		return el, &Refusal{Why: OutsideTheory, Found: "the orbit cannot be carried to the epoch " + epoch.Format(time.RFC3339), Err: err,
			Next: "choose an epoch within the data"}
	}
	return el, nil
}

const mostRejections = 10 // rounds of them

// settle corrects with all data, and again without the outliers, until they stay the same.
func (o *Options) settle(ctx context.Context, all []Datum, el orbit.Elements) (*Result, error) {
	used, rejected := all, make([]bool, len(all))
	for range mostRejections {
		pr := newProblem(ctx, used, el, o.BStar == nil)
		pr.progress = o.Progress
		p, rounds, err := pr.correct(fromElements(&el))
		if err != nil {
			return nil, err
		}
		p.at.into(&el)
		rs, err := residuals(all, el)
		if err != nil {
			return nil, pr.outside(err)
		}
		for i := range rs {
			rs[i].Rejected = rejected[i]
		}
		again, changed := o.reject(rs)
		if !changed {
			r := &Result{Elements: el, DragFound: o.BStar == nil, Used: len(used), Residuals: rs, Rounds: rounds, Stalled: p.stalled}
			return r, o.finish(r, p, pr)
		}
		rejected, used = again, used[:0:0]
		for i, out := range rejected {
			if !out {
				used = append(used, all[i])
			}
		}
		if len(all)-len(used) > len(all)/5 || o.enough(used) != nil {
			return nil, &Refusal{Why: TooManyRefused, Found: fmt.Sprintf("%d of %d data lie beyond %g standard deviations", len(all)-len(used), len(all), o.RejectBeyond),
				Next: "look at them: a manoeuvre, or two objects in one table, is no outlier; or reject at a greater multiple"}
		}
	}
	return nil, &Refusal{Why: NotConverged, Found: "the outliers change from round to round", Next: "reject at a greater multiple, or take the outliers out of the data"}
}

// reject returns which data lie beyond the limit, and whether that is news.
func (o *Options) reject(rs []Residual) (rejected []bool, changed bool) {
	rejected = make([]bool, len(rs))
	if !(o.RejectBeyond > 0) {
		return rejected, false
	}
	limit := o.RejectBeyond * math.Max(medianDistance(rs), numericalNoise) / medianPerSigma
	for i := range rs {
		rejected[i] = rs[i].Distance() > limit
		changed = changed || rejected[i] != rs[i].Rejected
	}
	return rejected, changed
}

// finish computes statistics and covariance, and refuses what the data do not carry.
func (o *Options) finish(r *Result, p *point, pr *problem) error {
	markSuspects(r.Residuals)
	r.Radial = statistics(r.Residuals, func(r *Residual) float64 { return r.Radial })
	r.Along = statistics(r.Residuals, func(r *Residual) float64 { return r.Along })
	r.Across = statistics(r.Residuals, func(r *Residual) float64 { return r.Across })
	r.RadialRate = statistics(r.Residuals, func(r *Residual) float64 { return r.RadialRate })
	r.AlongRate = statistics(r.Residuals, func(r *Residual) float64 { return r.AlongRate })
	r.AcrossRate = statistics(r.Residuals, func(r *Residual) float64 { return r.AcrossRate })
	r.RMS = statistics(r.Residuals, (*Residual).Distance).RMS
	r.Condition = p.linear.condition()
	r.Redundancy = countRows(pr.data) - len(pr.active)
	r.DataPerIndependent = dataPerIndependent(r.Residuals, len(pr.active))
	if err := o.carried(r); err != nil {
		return err
	}
	scale := math.NaN()
	if r.Redundancy > 0 {
		scale = p.cost / float64(r.Redundancy) * r.DataPerIndependent
	}
	cofactors := p.linear.cofactors()
	for i, a := range pr.active {
		for j, b := range pr.active {
			r.Covariance[a][b] = scale * cofactors[i][j]
		}
	}
	if r.Redundancy == 0 {
		return nil
	}
	if err := dragCarried(r); err != nil {
		return err
	}
	u, err := newUncertainty(p, pr, r)
	if err != nil {
		return pr.outside(err)
	}
	r.Uncertainty = u
	return positionCarried(r)
}
