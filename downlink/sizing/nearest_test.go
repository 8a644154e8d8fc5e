package sizing

import "testing"

// TestNearer: the worst miss decides, the next where those are alike, and what is met by more does not
// count.
func TestNearer(t *testing.T) {
	for _, row := range []struct {
		a, b []float64
		want bool
	}{
		{[]float64{-0.5, 0}, []float64{-0.6, 0}, true},
		{[]float64{-0.6, 0}, []float64{-0.5, -0.4}, false},
		{[]float64{-18.2, -0.4}, []float64{-18.2, -0.5}, true},
		{[]float64{-18.2 - 1e-9, -0.4}, []float64{-18.2, -0.5}, true},
		{[]float64{-18.2, -0.5}, []float64{-18.2, -0.5}, false},
		{nil, nil, false},
	} {
		if got := nearer(row.a, row.b); got != row.want {
			t.Errorf("%v is nearer than %v: %t", row.a, row.b, got)
		}
	}
}
