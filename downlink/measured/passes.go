package measured

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// fewestPasses is from how many passes on their differences tell how well a parameter is known.
const fewestPasses = 3

// passesOf numbers rows by the pass that they are of, from 0 on: a pause parts them.
func passesOf(t []float64, keep []int) (of []int, count int) {
	of = make([]int, len(keep))
	for i := 1; i < len(keep); i++ {
		if t[keep[i]]-t[keep[i-1]] > pause.Seconds() {
			count++
		}
		of[i] = count
	}
	return of, count + 1
}

// judgeByPasses judges the parameters by how they differ from pass to pass: what stays the
// same through a pass and is another in the next (attitude, weather, the oscillator's
// warmth) is no noise of samples. It is the jackknife over passes, with Student's law of one
// less than their number (Efron and Stein, Ann. Stat. 9, 1981).
func (f *Fit) judgeByPasses(d *series, keep []int, w *white) {
	of, count := passesOf(d.t, keep)
	f.Passes = count
	if count < fewestPasses || d.independent {
		return
	}
	k := len(f.Parameters)
	sums := make([]float64, k)
	rest := make([]int, 0, len(keep))
	for g := range count {
		rest = rest[:0]
		for i, p := range of {
			if p != g {
				rest = append(rest, i)
			}
		}
		b, _, err := weighted(w.y, w.x, w.w, rest)
		if err != nil { // one pass alone tells a parameter
			return
		}
		for j := range b {
			sums[j] += (b[j] - f.Parameters[j].Value) * (b[j] - f.Parameters[j].Value)
		}
	}
	n := float64(count)
	quantile := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 1}.Quantile(0.975)
	for j := range f.Parameters {
		p := &f.Parameters[j]
		sigma := math.Sqrt(sums[j] * (n - 1) / n)
		p.Span, p.Sigma = quantile*sigma, sigma
	}
}

// advisePasses says where passes are too few to differ.
func (f *Fit) advisePasses() {
	if f.Passes > 1 && f.Passes < fewestPasses {
		f.Advice = append(f.Advice, "two passes do not tell how passes differ: the intervals hold for what was the same in both")
	}
}

// withinPasses takes the mean of each pass off residuals where there are passes enough, so that
// the correlation of samples is that within a pass.
func withinPasses(t, r []float64, keep []int) (out []float64, taken int) {
	of, count := passesOf(t, keep)
	if count < fewestPasses {
		return r, 0
	}
	mean, n := make([]float64, count), make([]float64, count)
	for i, at := range keep {
		mean[of[i]] += r[at]
		n[of[i]]++
	}
	out = append([]float64(nil), r...)
	for i, at := range keep {
		out[at] -= mean[of[i]] / n[of[i]]
	}
	return out, count - 1
}
