package measured

import (
	"math"
	"time"

	"gonum.org/v1/gonum/stat/distuv"
)

// PassFigure is a bias or slope of one pass.
type PassFigure struct {
	At    time.Time // in the middle of the pass
	Value float64
	Sigma float64 // standard deviation by the pass alone, > 0
	Span  float64 // half its interval of 95 %, which stands where it is the only one
}

// Across is what the figures of several passes say together.
type Across struct {
	Passes int
	// Mean is weighted by how sure each pass is and by how much passes differ; its interval of 95 % is
	// Mean ± MeanSpan.
	Mean, MeanSpan float64
	Between        float64 // standard deviation from pass to pass, beside that of each pass
	// PerDay is the slope over the passes, with its interval of 95 %; NaN of fewer than three passes or
	// of passes at one instant.
	PerDay, PerDaySpan float64
}

// AcrossPasses puts the figures of passes together, as a random-effects mean: passes differ by more
// than their own noise explains. The variance between passes is that of DerSimonian and Laird
// (Control. Clin. Trials 7, 1986), the interval that of Hartung and Knapp (Stat. Med. 20, 2001),
// which holds also for few passes. Figures without a positive, finite Sigma are left out.
func AcrossPasses(list []PassFigure) Across {
	var kept []PassFigure
	for _, f := range list {
		if f.Sigma > 0 && !math.IsInf(f.Sigma, 0) && !math.IsNaN(f.Value) && !math.IsInf(f.Value, 0) {
			kept = append(kept, f)
		}
	}
	none := math.NaN()
	a := Across{Passes: len(kept), Mean: none, MeanSpan: none, Between: none, PerDay: none, PerDaySpan: none}
	switch len(kept) {
	case 0:
		return a
	case 1:
		a.Mean, a.MeanSpan = kept[0].Value, kept[0].Span
		return a
	}
	a.Between = between(kept)
	weights, sum := make([]float64, len(kept)), 0.0
	mean := 0.0
	for i, f := range kept {
		weights[i] = 1 / (f.Sigma*f.Sigma + a.Between*a.Between)
		sum += weights[i]
		mean += weights[i] * f.Value
	}
	a.Mean = mean / sum
	spread := 0.0
	for i, f := range kept {
		spread += weights[i] * (f.Value - a.Mean) * (f.Value - a.Mean)
	}
	n := float64(len(kept))
	a.MeanSpan = student(n-1) * math.Sqrt(spread/((n-1)*sum))
	a.PerDay, a.PerDaySpan = perDay(kept, weights)
	return a
}

// between returns the standard deviation between passes.
func between(list []PassFigure) float64 {
	var w, ww, wy float64
	for _, f := range list {
		x := 1 / (f.Sigma * f.Sigma)
		w, ww, wy = w+x, ww+x*x, wy+x*f.Value
	}
	q := 0.0
	for _, f := range list {
		q += (f.Value - wy/w) * (f.Value - wy/w) / (f.Sigma * f.Sigma)
	}
	return math.Sqrt(max(0, (q-float64(len(list)-1))/(w-ww/w)))
}

// perDay fits a line over the passes, its scatter taken from the passes themselves.
func perDay(list []PassFigure, weights []float64) (slope, half float64) {
	if len(list) < 3 {
		return math.NaN(), math.NaN()
	}
	var w, wx, wy float64
	x := make([]float64, len(list))
	for i, f := range list {
		x[i] = f.At.Sub(list[0].At).Hours() / 24
		w, wx, wy = w+weights[i], wx+weights[i]*x[i], wy+weights[i]*f.Value
	}
	var xx, xy float64
	for i, f := range list {
		xx += weights[i] * (x[i] - wx/w) * (x[i] - wx/w)
		xy += weights[i] * (x[i] - wx/w) * (f.Value - wy/w)
	}
	if !(xx > 0) {
		return math.NaN(), math.NaN()
	}
	slope = xy / xx
	rest := 0.0
	for i, f := range list {
		r := f.Value - wy/w - slope*(x[i]-wx/w)
		rest += weights[i] * r * r
	}
	n := float64(len(list))
	return slope, student(n-2) * math.Sqrt(rest/((n-2)*xx))
}

// student returns the 97.5th percentile of Student's law.
func student(freedom float64) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: freedom}.Quantile(0.975)
}
