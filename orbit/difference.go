package orbit

// reach is how many knots on either side the differences at a knot take in.
const reach = 6

// taylor holds the weights of central differences on uniform knots that give the
// Taylor coefficients h f', h² f”/2 and h³ f”'/6 at the middle one. For the pair
// of knots k+1 steps away on either side: first and third go with the difference of
// the pair, second with their sum less twice the middle.
//
// They are exact for polynomials of degree 2*reach; source: the interpolating
// polynomial of Lagrange, any text on numerical analysis.
var taylor = taylorWeights()

type taylorWeight struct{ first, second, third float64 }

func taylorWeights() (w [reach]taylorWeight) {
	squares := 0.0
	for j := 1; j <= reach; j++ {
		squares += 1 / float64(j*j)
	}
	for k := 1; k <= reach; k++ {
		a := 1 / float64(2*k)
		for j := 1; j <= reach; j++ {
			if j != k {
				a *= float64(j*j) / float64(j*j-k*k)
			}
		}
		// Of the pair: (x/2k) Π (x²-j²)/(k²-j²) goes with the difference, x/k times that with the sum.
		w[k-1] = taylorWeight{first: a, second: a / float64(k), third: -a * (squares - 1/float64(k*k))}
	}
	return w
}

// differentiate fills the Taylor coefficients of knot i from the positions of its
// neighbours.
func differentiate(knots []knot, i int) {
	mid := &knots[i]
	c1, c2, c3 := Vec3{}, Vec3{}, Vec3{}
	twice := mid.p.Add(mid.p)
	for k := range taylor {
		w := &taylor[k]
		a, b := &knots[i+k+1].p, &knots[i-k-1].p
		d, s := a.Sub(*b), a.Add(*b).Sub(twice)
		c1 = c1.Add(d.Scale(w.first))
		c2 = c2.Add(s.Scale(w.second))
		c3 = c3.Add(d.Scale(w.third))
	}
	mid.c1, mid.c2, mid.c3 = c1, c2, c3
}
