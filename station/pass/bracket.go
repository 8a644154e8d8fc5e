package pass

// bracket narrows down the only zero of a function between two points of different
// sign by the regula falsi with Illinois weights: without slopes, and never out of
// the bracket.
type bracket struct {
	a, b   float64 // s
	fa, fb float64 // values, of different sign; the one that stays twice is halved
	kept   int     // the end that stayed last: 1 is a, 2 is b
}

// guess returns the next point to try, inside the bracket.
func (k *bracket) guess() float64 {
	h := k.b - k.a
	t := k.a + h*k.fa/(k.fa-k.fb)
	if !(t > k.a && t < k.b) {
		t = k.a + h/2
	}
	return t
}

// put tells the value at a point inside the bracket.
func (k *bracket) put(t, f float64) {
	if (f >= 0) == (k.fa >= 0) {
		k.a, k.fa = t, f
		if k.kept == 2 {
			k.fb /= 2
		}
		k.kept = 2
		return
	}
	k.b, k.fb = t, f
	if k.kept == 1 {
		k.fa /= 2
	}
	k.kept = 1
}
