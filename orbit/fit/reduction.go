package fit

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// reduction gathers the rows of a least squares problem and keeps their triangle only
// (Householder reductions, chunk by chunk), so that the memory does not grow with the data
// and the condition number is not squared as in normal equations.
type reduction struct {
	columns int       // unknowns; one more column holds the right side
	rows    []float64 // the triangle so far, and the rows since
	count   int       // of rows in rows
}

const chunkRows = 600

func newReduction(columns int) *reduction {
	return &reduction{columns: columns, rows: make([]float64, 0, (chunkRows+columns+1)*(columns+1))}
}

// add takes a row, right side last.
func (r *reduction) add(row []float64) {
	r.rows = append(r.rows, row...)
	if r.count++; r.count == chunkRows+r.columns+1 {
		r.reduce()
	}
}

func (r *reduction) reduce() {
	width := r.columns + 1
	for r.count < width { // the factorisation wants no fewer rows than columns
		r.rows = append(r.rows, make([]float64, width)...)
		r.count++
	}
	var qr mat.QR
	qr.Factorize(mat.NewDense(r.count, width, r.rows))
	var triangle mat.Dense
	qr.RTo(&triangle)
	r.rows, r.count = r.rows[:width*width], width
	for i := range width {
		for j := range width {
			r.rows[i*width+j] = triangle.At(i, j)
		}
	}
}

// linear is a least squares problem by its singular values, with the columns scaled to
// length one.
type linear struct {
	scale    []float64 // length of each column
	u, v     mat.Dense
	singular []float64
	right    []float64 // in the base of u
	ok       bool      // every column has a length, and the values were found
}

func (r *reduction) solve() *linear {
	r.reduce()
	m := r.columns
	l := &linear{scale: make([]float64, m), right: make([]float64, m), ok: true}
	triangle, c := mat.NewDense(m, m, nil), mat.NewVecDense(m, nil)
	for j := range m {
		for i := range m {
			l.scale[j] = math.Hypot(l.scale[j], r.rows[i*(m+1)+j])
		}
		if !(l.scale[j] > 0) || math.IsInf(l.scale[j], 0) {
			l.ok = false
			return l
		}
		for i := range m {
			triangle.Set(i, j, r.rows[i*(m+1)+j]/l.scale[j])
		}
		c.SetVec(j, r.rows[j*(m+1)+m])
	}
	var svd mat.SVD
	if !svd.Factorize(triangle, mat.SVDFull) {
		l.ok = false
		return l
	}
	svd.UTo(&l.u)
	svd.VTo(&l.v)
	l.singular = svd.Values(nil)
	for k := range m {
		l.right[k] = mat.Dot(l.u.ColView(k), c)
	}
	return l
}

// condition returns the ratio of the greatest to the least singular value; +Inf where a
// column is zero.
func (l *linear) condition() float64 {
	if !l.ok {
		return math.Inf(1)
	}
	return l.singular[0] / l.singular[len(l.singular)-1]
}

// step returns the damped solution, in the units of the unknowns, and by how much it
// would lower the sum of squares if the problem were linear.
func (l *linear) step(damping float64) (d []float64, gain float64) {
	m := len(l.scale)
	d = make([]float64, m)
	for k, s := range l.singular {
		if s < 1e-13*l.singular[0] {
			continue
		}
		w := s / (s*s + damping) * l.right[k]
		gain += 2*w*s*l.right[k] - w*w*s*s
		for j := range m {
			d[j] += l.v.At(j, k) * w
		}
	}
	for j := range m {
		d[j] /= l.scale[j]
	}
	return d, gain
}

// cofactors returns the inverse of the normal matrix in the units of the unknowns.
func (l *linear) cofactors() [][]float64 {
	m := len(l.scale)
	out := make([][]float64, m)
	for i := range out {
		out[i] = make([]float64, m)
		for j := range out[i] {
			for k, s := range l.singular {
				out[i][j] += l.v.At(i, k) * l.v.At(j, k) / (s * s)
			}
			out[i][j] /= l.scale[i] * l.scale[j]
		}
	}
	return out
}
