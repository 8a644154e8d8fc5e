package measured

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Parameter is a fitted value with its standard deviation.
type Parameter struct {
	Name, Unit   string
	Value, Sigma float64
	// Span is half the width of the interval that holds the truth in 95 % of logs like this.
	Span float64
}

// Fit is what a robust fit found.
type Fit struct {
	Parameters  []Parameter
	Correlation [][]float64 // between parameters
	// Singular are the singular values of the design, its columns of unit length, greatest first; a small one
	// says that the parameters of its direction are known only together.
	Singular   []float64
	directions *mat.Dense
	design     [][]float64 // of the rows used, freed of their correlation
	Scale      float64     // standard deviation of a sample, in its unit
	PerSecond  float64     // correlation of the noise over one second
	Used       int
	Passes     int       // that the samples are of
	Middle     time.Time // of a fit of the frequency: when the offset holds
	Outliers   []int     // rows, not used
	Advice     []string  // what the data cannot tell apart
}

// errTooFew says that there are not enough samples.
var errTooFew = errors.New("too few samples")

// huber is the constant of Huber's weights, 95 % efficient for Gaussian noise
// (Huber 1981), and rejectAt is from where on a sample is an outlier.
const huber, rejectAt = 1.345, 4.5

// series is what a fit is made of. Rows are by time.
type series struct {
	t, y []float64
	x    [][]float64
	// independent says that neighbours in time have nothing in common.
	independent bool
}

// least is how many samples a fit of k parameters needs.
func least(k int) int { return 3*k + 4 }

// solve fits y = X b + noise, whose correlation falls exponentially with time. First come
// Huber's weights on a scale by the median deviation, and rows beyond rejectAt are listed
// as outliers; then the rows left are freed of their correlation, row by row over the gap
// in time, and fitted again.
func (d *series) solve(names []Parameter) (*Fit, error) {
	out, err := d.search(names)
	if err != nil {
		return nil, err
	}
	out.advise()
	return out, nil
}

// search is solve without the advice.
func (d *series) search(names []Parameter) (*Fit, error) {
	n, k := len(d.y), len(names)
	if n < least(k) {
		return nil, fmt.Errorf("%w: %d of %d that %d parameters need", errTooFew, n, least(k), k)
	}
	keep := make([]int, n)
	for i := range keep {
		keep[i] = i
	}
	var b []float64
	out := &Fit{}
	for range 20 {
		var err error
		if b, err = irls(d.y, d.x, keep); err != nil {
			return nil, err
		}
		r := residuals(d.y, d.x, b)
		scale := spread(r, keep, k)
		next := make([]int, 0, n)
		for i := range r {
			if math.Abs(r[i]) <= rejectAt*scale {
				next = append(next, i)
			}
		}
		if len(next) < least(k) || slices.Equal(next, keep) {
			break
		}
		keep = next
	}
	for i, j := 0, 0; i < n; i++ {
		if j < len(keep) && keep[j] == i {
			j++
			continue
		}
		out.Outliers = append(out.Outliers, i)
	}
	out.Parameters = slices.Clone(names)
	white := newWhite(n, k)
	for turn := range 4 {
		before := out.PerSecond
		if !d.independent {
			within, taken := withinPasses(d.t, residuals(d.y, d.x, b), keep)
			out.PerSecond = memory(d.t, within, keep, k+taken)
		}
		if turn > 0 && math.Abs(out.PerSecond-before) < 1e-4 {
			break
		}
		if err := out.whitened(d, keep, white); err != nil {
			return nil, err
		}
		for j := range b {
			b[j] = out.Parameters[j].Value
		}
	}
	out.Used = len(keep)
	quantile := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: out.effective(d.t, keep, k)}.Quantile(0.975)
	for j := range out.Parameters {
		out.Parameters[j].Span = quantile * out.Parameters[j].Sigma
	}
	out.judgeByPasses(d, keep, white)
	return out, nil
}

func residuals(y []float64, x [][]float64, b []float64) []float64 {
	r := make([]float64, len(y))
	for i := range y {
		r[i] = y[i]
		for j, v := range b {
			r[i] -= x[i][j] * v
		}
	}
	return r
}

// spread is the standard deviation by the median of absolute deviations from 0, raised by
// what the fit of k parameters took.
func spread(r []float64, keep []int, k int) float64 {
	a := make([]float64, len(keep))
	for i, k := range keep {
		a[i] = math.Abs(r[k])
	}
	slices.Sort(a)
	n := float64(len(keep))
	return max(1.4826*a[len(a)/2]*math.Sqrt(n/(n-float64(k))), 1e-9)
}

func irls(y []float64, x [][]float64, keep []int) ([]float64, error) {
	w := make([]float64, len(y))
	for i := range w {
		w[i] = 1
	}
	var b []float64
	for range 15 {
		next, inv, err := weighted(y, x, w, keep)
		if err != nil {
			return nil, err
		}
		r := residuals(y, x, next)
		s := spread(r, keep, len(next))
		moved := b == nil
		for j := range b {
			moved = moved || math.Abs(next[j]-b[j]) > 1e-3*s*math.Sqrt(inv.At(j, j))
		}
		b = next
		if !moved {
			break
		}
		for _, i := range keep {
			w[i] = min(1, huber*s/max(math.Abs(r[i]), 1e-300))
		}
	}
	return b, nil
}

// weighted solves the normal equations and returns their inverse too. Columns are scaled
// to unit length first.
func weighted(y []float64, x [][]float64, w []float64, keep []int) ([]float64, *mat.SymDense, error) {
	k := len(x[0])
	size := make([]float64, k)
	for j := range k {
		for _, i := range keep {
			size[j] += w[i] * x[i][j] * x[i][j]
		}
		if size[j] = math.Sqrt(size[j]); !(size[j] > 0) {
			return nil, nil, errors.New("a parameter has no effect on the samples")
		}
	}
	sums, right := make([]float64, k*k), mat.NewVecDense(k, nil)
	for _, i := range keep {
		for a, xa := range x[i] {
			xa *= w[i]
			right.SetVec(a, right.AtVec(a)+xa*y[i])
			for c := a; c < k; c++ {
				sums[a*k+c] += xa * x[i][c]
			}
		}
	}
	normal := mat.NewSymDense(k, sums)
	for a := range k {
		right.SetVec(a, right.AtVec(a)/size[a])
		for c := a; c < k; c++ {
			normal.SetSym(a, c, normal.At(a, c)/size[a]/size[c])
		}
	}
	var chol mat.Cholesky
	if !chol.Factorize(normal) || chol.Cond() > 1e12 {
		return nil, nil, errors.New("the samples cannot tell the parameters apart at all")
	}
	var b mat.VecDense
	var inv mat.SymDense
	if err := errors.Join(chol.SolveVecTo(&b, right), chol.InverseTo(&inv)); err != nil {
		return nil, nil, err
	}
	out := make([]float64, k)
	for a := range k {
		out[a] = b.AtVec(a) / size[a]
		for c := a; c < k; c++ {
			inv.SetSym(a, c, inv.At(a, c)/size[a]/size[c])
		}
	}
	return out, &inv, nil
}
