package measured

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"gonum.org/v1/gonum/mat"
)

// Below tooAlike a singular value of a design with columns of unit length says that some
// parameters are hardly told apart (of two parameters it is a correlation of 0.95); below
// apartAtAll one of them is left out (0.9995).
const tooAlike, apartAtAll = 0.2236, 0.0224

// ofWeight is the share in a direction from which on a parameter is named.
const ofWeight = 0.3

// unitColumns returns the rows with each column of unit length.
func unitColumns(x [][]float64) *mat.Dense {
	k := len(x[0])
	out := mat.NewDense(len(x), k, nil)
	for j := range k {
		sum := 0.0
		for i := range x {
			sum += x[i][j] * x[i][j]
		}
		size := max(math.Sqrt(sum), 1e-300)
		for i := range x {
			out.Set(i, j, x[i][j]/size)
		}
	}
	return out
}

// singular works out the singular values of a design and their directions.
func (f *Fit) singular(x [][]float64) {
	var svd mat.SVD
	if !svd.Factorize(unitColumns(x), mat.SVDThinV) {
		return
	}
	f.Singular, f.directions = svd.Values(nil), &mat.Dense{}
	svd.VTo(f.directions)
}

// advise says which parameters the data hardly tell apart.
func (f *Fit) advise() {
	f.singular(f.design)
	f.design = nil
	f.advisePasses()
	for c, value := range f.Singular {
		if value >= tooAlike {
			continue
		}
		var together []int
		for j := range f.Parameters {
			if math.Abs(f.directions.At(j, c)) > ofWeight {
				together = append(together, j)
			}
		}
		var names []string
		for _, j := range together {
			names = append(names, f.Parameters[j].Name)
		}
		how := fmt.Sprintf("singular value %.3f", value)
		switch n := len(names); {
		case n < 2:
			continue
		case n == 2:
			how = fmt.Sprintf("correlation %.2f", f.Correlation[together[1]][together[0]])
		}
		last := len(names) - 1
		f.Advice = append(f.Advice, fmt.Sprintf("the data hardly tell %s and %s apart (%s): only together are they known well", strings.Join(names[:last], ", "), names[last], how))
	}
}

// leaveOut takes columns out of a design, the last first, until the rest can be told apart
// at all. Column 0 stays. told says what was left out and where it hides.
func leaveOut(x [][]float64, names []Parameter) (stay []int, told []string) {
	for j := range names {
		stay = append(stay, j)
	}
	for len(stay) > 1 {
		direction, value := weakest(columnsOf(x, stay))
		if value >= apartAtAll {
			break
		}
		out := len(stay) - 1
		for out > 1 && math.Abs(direction[out]) <= ofWeight {
			out--
		}
		var with []string
		for at, j := range stay {
			if at != out && math.Abs(direction[at]) > ofWeight {
				with = append(with, names[j].Name)
			}
		}
		if len(with) == 0 { // the column is zero
			told = append(told, fmt.Sprintf("%s has no effect on these samples and is left out", names[stay[out]].Name))
		} else {
			told = append(told, fmt.Sprintf("these samples cannot tell %s from %s: it is left out, and what there is of it is in there", names[stay[out]].Name, strings.Join(with, " and ")))
		}
		stay = slices.Delete(stay, out, out+1)
	}
	return stay, told
}

// weakest returns the least singular value of a design with columns of unit length, and its direction.
func weakest(x [][]float64) (direction []float64, value float64) {
	f := &Fit{}
	f.singular(x)
	last := len(f.Singular) - 1
	if last < 0 {
		return make([]float64, len(x[0])), 0
	}
	return mat.Col(nil, last, f.directions), f.Singular[last]
}

func columnsOf(x [][]float64, which []int) [][]float64 {
	out := make([][]float64, len(x))
	for i := range x {
		out[i] = make([]float64, len(which))
		for at, j := range which {
			out[i][at] = x[i][j]
		}
	}
	return out
}
