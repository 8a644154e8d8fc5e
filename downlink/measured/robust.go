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
	Scale       float64     // standard deviation of a sample, in its unit
	PerSecond   float64     // correlation of the noise over one second
	Used        int
	Middle      time.Time // of a fit of the frequency: when the offset holds
	Outliers    []int     // rows, not used
	Advice      []string  // what the data cannot tell apart
}

// tooAlike is the correlation above which two parameters are said to be one.
const tooAlike = 0.95

// errTooFew says that there are not enough samples.
var errTooFew = errors.New("too few samples")

// huber is the constant of Huber's weights, 95 % efficient for Gaussian noise
// (Huber 1981), and rejectAt is from where on a sample is an outlier.
const huber, rejectAt = 1.345, 4.5

// solve fits y = X b + noise, whose correlation falls exponentially with time. Rows are by
// time. First come Huber's weights on a scale by the median deviation, and rows beyond
// rejectAt are listed as outliers; then the rows left are freed of their correlation, row
// by row over the gap in time, and fitted again.
func solve(t, y []float64, x [][]float64, names []Parameter) (*Fit, error) {
	n, k := len(y), len(names)
	if n < 3*k+4 {
		return nil, fmt.Errorf("%w: %d of %d that %d parameters need", errTooFew, n, 3*k+4, k)
	}
	keep := make([]int, n)
	for i := range keep {
		keep[i] = i
	}
	var b []float64
	out := &Fit{}
	for range 20 {
		var err error
		if b, err = irls(y, x, keep); err != nil {
			return nil, err
		}
		r := residuals(y, x, b)
		scale := spread(r, keep)
		var next []int
		for i := range r {
			if math.Abs(r[i]) <= rejectAt*scale {
				next = append(next, i)
			}
		}
		if len(next) < 3*k+4 || slices.Equal(next, keep) {
			break
		}
		keep = next
	}
	for i := range n {
		if !slices.Contains(keep, i) {
			out.Outliers = append(out.Outliers, i)
		}
	}
	for range 4 {
		out.PerSecond = memory(t, residuals(y, x, b), keep, k)
		if err := out.whitened(t, y, x, keep, names); err != nil {
			return nil, err
		}
		for j := range b {
			b[j] = out.Parameters[j].Value
		}
	}
	out.Used = len(keep)
	out.advise()
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

// spread is the standard deviation by the median of absolute deviations from 0.
func spread(r []float64, keep []int) float64 {
	a := make([]float64, len(keep))
	for i, k := range keep {
		a[i] = math.Abs(r[k])
	}
	slices.Sort(a)
	return max(1.4826*a[len(a)/2], 1e-9)
}

func irls(y []float64, x [][]float64, keep []int) ([]float64, error) {
	w := make([]float64, len(y))
	for i := range w {
		w[i] = 1
	}
	var b []float64
	for range 15 {
		var err error
		if b, _, err = weighted(y, x, w, keep); err != nil {
			return nil, err
		}
		r := residuals(y, x, b)
		s := spread(r, keep)
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
	normal, right := mat.NewSymDense(k, nil), mat.NewVecDense(k, nil)
	for _, i := range keep {
		for a := range k {
			right.SetVec(a, right.AtVec(a)+w[i]*x[i][a]/size[a]*y[i])
			for c := a; c < k; c++ {
				normal.SetSym(a, c, normal.At(a, c)+w[i]*x[i][a]/size[a]*x[i][c]/size[c])
			}
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

// memory estimates the correlation over a second from neighbouring residuals, raised by
// what the fit of k parameters took from it (to first order in 1/n, as for a fitted mean:
// Marriott and Pope, Biometrika 41, 1954).
func memory(t, r []float64, keep []int, k int) float64 {
	var both, own float64
	gaps := make([]float64, 0, len(keep))
	for i := 1; i < len(keep); i++ {
		gaps = append(gaps, t[keep[i]]-t[keep[i-1]])
	}
	slices.Sort(gaps)
	usual := gaps[len(gaps)/2]
	pairs := 0
	for i := 1; i < len(keep); i++ {
		a, b := keep[i-1], keep[i]
		if t[b]-t[a] > 1.5*usual {
			continue
		}
		both += r[a] * r[b]
		own += (r[a]*r[a] + r[b]*r[b]) / 2
		pairs++
	}
	if pairs < 4 || !(own > 0) {
		return 0
	}
	rho := both / own
	rho += (float64(k) + float64(2*k+1)*rho) / float64(pairs)
	rho = min(max(rho, 0), 0.98)
	return math.Pow(rho, 1/max(usual, 1e-3))
}

// whitened fits rows freed of their correlation.
func (f *Fit) whitened(t, y []float64, x [][]float64, keep []int, names []Parameter) error {
	n, k := len(keep), len(names)
	yw, xw, all, w := make([]float64, n), make([][]float64, n), make([]int, n), make([]float64, n)
	for i, at := range keep {
		all[i], w[i] = i, 1
		xw[i] = slices.Clone(x[at])
		yw[i] = y[at]
		if i == 0 {
			continue
		}
		last := keep[i-1]
		rho := math.Pow(f.PerSecond, t[at]-t[last])
		s := 1 / math.Sqrt(1-min(rho*rho, 0.9999))
		yw[i] = (y[at] - rho*y[last]) * s
		for j := range k {
			xw[i][j] = (x[at][j] - rho*x[last][j]) * s
		}
	}
	b, inv, err := weighted(yw, xw, w, all)
	if err != nil {
		return err
	}
	sum := 0.0
	for _, r := range residuals(yw, xw, b) {
		sum += r * r
	}
	f.Scale = math.Sqrt(sum / float64(n-k))
	quantile := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: f.effective(t, keep, k)}.Quantile(0.975)
	f.Parameters, f.Correlation = slices.Clone(names), make([][]float64, k)
	for j := range k {
		p := &f.Parameters[j]
		p.Value, p.Sigma = b[j], f.Scale*math.Sqrt(inv.At(j, j))
		p.Span = quantile * p.Sigma
		f.Correlation[j] = make([]float64, k)
		for c := range k {
			f.Correlation[j][c] = inv.At(j, c) / math.Sqrt(inv.At(j, j)*inv.At(c, c))
		}
	}
	return nil
}

// effective is how many independent samples the log is worth, less the parameters.
func (f *Fit) effective(t []float64, keep []int, k int) float64 {
	n := float64(len(keep))
	rho := math.Pow(f.PerSecond, (t[keep[len(keep)-1]]-t[keep[0]])/max(n-1, 1))
	return max(n*(1-rho)/(1+rho)-float64(k), 2)
}

func (f *Fit) advise() {
	for a := range f.Parameters {
		for c := range a {
			if r := f.Correlation[a][c]; math.Abs(r) > tooAlike {
				f.Advice = append(f.Advice, fmt.Sprintf("the data hardly tell %s and %s apart (correlation %.2f): only together are they known well", f.Parameters[c].Name, f.Parameters[a].Name, r))
			}
		}
	}
}
