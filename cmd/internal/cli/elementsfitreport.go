package cli

import (
	"bytes"
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/fit"
)

// fitReport is a fit with all that is told of it.
type fitReport struct {
	in       *positions
	r        *fit.Result
	sigmas   fit.Sigmas
	first    time.Time
	last     time.Time
	states   int // data with a velocity
	rejected int
	ahead    []fitSpread
	rule     orbit.AgeRule // that follows ahead; zero where there is none
	twoLine  twoLineLoss
	notes    []string
}

// fitSpread is the standard deviation of the position at an instant.
type fitSpread struct {
	at     time.Time
	days   float64 // after the epoch
	spread orbit.Spread
	whole  orbit.Covariance
}

// twoLineLoss is what the digits of a two-line set cost.
type twoLineLoss struct {
	lines    string // empty where the set cannot be one
	why      string // then
	lost     []string
	farthest float64 // m, over the data
}

// aheadDays are the ages that the spread is told for.
var aheadDays = []float64{0, 1, 2, 3, 5, 7}

func newFitReport(o *fitOptions, in *positions, r *fit.Result) (*fitReport, error) {
	f := &fitReport{in: in, r: r, sigmas: r.Sigmas(), first: r.Residuals[0].Time, last: r.Residuals[len(r.Residuals)-1].Time}
	f.notes = append(f.notes, in.notes...)
	for i := range r.Residuals {
		if !math.IsNaN(r.Residuals[i].RadialRate) {
			f.states++
		}
		if r.Residuals[i].Rejected {
			f.rejected++
		}
	}
	if r.Uncertainty == nil {
		f.notes = append(f.notes, "one state alone has no redundancy: the set passes through it, and nothing tells how good it is")
	} else {
		f.notes = append(f.notes, "spread "+r.Uncertainty.Basis())
		rule, err := r.Uncertainty.AgeRule()
		if err != nil {
			f.notes = append(f.notes, "no rule by age: "+err.Error())
		}
		f.rule = rule
		for _, d := range aheadDays {
			at := r.Elements.Epoch.Add(time.Duration(d * 24 * float64(time.Hour)))
			whole, err := r.Uncertainty.Whole(at)
			if err != nil {
				f.notes = append(f.notes, fmt.Sprintf("the spread is told up to %g days: %v", d, err))
				break
			}
			f.ahead = append(f.ahead, fitSpread{at, d, whole.Spread(), whole})
		}
	}
	if r.DataPerIndependent > 1.5 {
		f.notes = append(f.notes, fmt.Sprintf("the residuals go together from datum to datum: %.3g data count as one in the standard deviations", r.DataPerIndependent))
	}
	if r.Stalled {
		f.notes = append(f.notes, "the correction ended where SGP4 is not smooth; other elements may follow the data as well")
	}
	f.outlierNotes(o)
	return f, f.inTwoLines()
}

// ruleKeys are the figures of the rule by age, under the keys of position_uncertainty in a
// scenario.
func (f *fitReport) ruleKeys() (keys []string, km []float64) {
	for _, a := range []struct {
		name string
		g    orbit.Growth
	}{{"along", f.rule.Along}, {"across", f.rule.Across}, {"radial", f.rule.Radial}} {
		keys = append(keys, a.name+"_km", a.name+"_km_per_day", a.name+"_km_per_day2")
		km = append(km, a.g.AtEpoch.Kilometres(), a.g.PerDay.Kilometres(), a.g.PerDay2.Kilometres())
	}
	return keys, km
}

func (f *fitReport) outlierNotes(o *fitOptions) {
	suspects := 0
	for i := range f.r.Residuals {
		if x := &f.r.Residuals[i]; x.Suspect && !x.Rejected {
			suspects++
		}
	}
	if suspects > 0 {
		f.notes = append(f.notes, fmt.Sprintf("%d data lie more than four times the median distance from the fit and were kept; --format csv marks them, --reject-beyond leaves them out", suspects))
	}
	if o.rejectBeyond != nil {
		f.notes = append(f.notes, fmt.Sprintf("%d data lie beyond %g standard deviations and were left out; --format csv marks them", f.rejected, *o.rejectBeyond))
	}
}

// inTwoLines writes the set as two lines and flies what they hold.
func (f *fitReport) inTwoLines() error {
	var text bytes.Buffer
	warnings, err := elements.WriteTLE(&text, []orbit.Elements{f.r.Elements})
	if err != nil {
		f.twoLine.why = err.Error()
		return nil
	}
	f.twoLine.lines = text.String()
	for _, w := range warnings {
		f.twoLine.lost = append(f.twoLine.lost, w.String())
	}
	back, _, err := elements.Read(&text, "fitted set")
	if err != nil {
		return fmt.Errorf("the set as written cannot be read back: %w", err)
	}
	whole, err := orbit.NewPropagation(f.r.Elements)
	if err != nil {
		return err
	}
	rounded, err := orbit.NewPropagation(back[0])
	if err != nil {
		return err
	}
	for i := range f.r.Residuals {
		a, _, err := whole.At(f.r.Residuals[i].Time)
		if err != nil {
			return err
		}
		b, _, err := rounded.At(f.r.Residuals[i].Time)
		if err != nil {
			return err
		}
		f.twoLine.farthest = math.Max(f.twoLine.farthest, a.Sub(b).Norm())
	}
	return nil
}

// summary says in a sentence what was fitted.
func (f *fitReport) summary() string {
	what := "positions"
	switch f.states {
	case len(f.r.Residuals):
		what = "positions and velocities"
	case 0:
	default:
		what = fmt.Sprintf("positions, %d with velocity,", f.states)
	}
	s := fmt.Sprintf("%s: SGP4 elements fitted to %d %s of %s to %s", f.in.from, f.r.Used, what, utc(f.first), utc(f.last))
	if f.rejected > 0 {
		s += fmt.Sprintf(", %d left out", f.rejected)
	}
	return s + fmt.Sprintf("; RMS distance %s m", digits(f.r.RMS, 3))
}

// digits returns a number with so many digits that count, whole where it is greater, without an
// exponent down to a billionth; empty where it does not exist.
func digits(v float64, n int) string {
	if a := math.Abs(v); a == 0 || a < 1e-9 || math.IsNaN(v) || math.IsInf(v, 0) {
		return fixed(v, 0)
	}
	return fixed(v, max(0, n-1-int(math.Floor(math.Log10(math.Abs(v))))))
}
