package measured

import (
	"math"
	"slices"
)

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

// white is room for rows freed of their correlation.
type white struct {
	y, w []float64
	x    [][]float64
	all  []int
}

func newWhite(n, k int) *white {
	out := &white{y: make([]float64, n), w: make([]float64, n), x: make([][]float64, n), all: make([]int, n)}
	room := make([]float64, n*k)
	for i := range n {
		out.all[i], out.w[i], out.x[i] = i, 1, room[i*k:(i+1)*k]
	}
	return out
}

// whitened fits rows freed of their correlation.
func (f *Fit) whitened(d *series, keep []int, to *white) error {
	n, k := len(keep), len(f.Parameters)
	t, y, x := d.t, d.y, d.x
	for i, at := range keep {
		copy(to.x[i], x[at])
		to.y[i] = y[at]
		if i == 0 {
			continue
		}
		last := keep[i-1]
		rho := math.Pow(f.PerSecond, t[at]-t[last])
		s := 1 / math.Sqrt(1-min(rho*rho, 0.9999))
		to.y[i] = (y[at] - rho*y[last]) * s
		for j := range k {
			to.x[i][j] = (x[at][j] - rho*x[last][j]) * s
		}
	}
	b, inv, err := weighted(to.y, to.x, to.w, to.all[:n])
	if err != nil {
		return err
	}
	sum := 0.0
	for _, r := range residuals(to.y[:n], to.x, b) {
		sum += r * r
	}
	f.Scale = math.Sqrt(sum / float64(n-k))
	f.design = to.x[:n]
	f.Correlation = make([][]float64, k)
	for j := range k {
		p := &f.Parameters[j]
		p.Value, p.Sigma = b[j], f.Scale*math.Sqrt(inv.At(j, j))
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
