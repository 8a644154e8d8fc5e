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

// secant narrows down the zero of a smooth, nearly linear function between two points
// of different sign: by the secant through the last two points, or by halving where
// that leads out of the bracket.
type secant struct {
	lo, hi float64 // s, the bracket
	low    bool    // the function is negative at lo
	t0, t1 float64 // s, the last two points
	f0, f1 float64 // their values
}

func newSecant(a, fa, b, fb float64) secant {
	return secant{lo: a, hi: b, low: fa < 0, t0: a, f0: fa, t1: b, f1: fb}
}

// next returns the next point to try, inside the bracket.
func (k *secant) next() float64 {
	t := k.t1 - k.f1*(k.t1-k.t0)/(k.f1-k.f0)
	if !(t >= k.lo && t <= k.hi) {
		return (k.lo + k.hi) / 2
	}
	return t
}

// put tells the value at the point that was tried.
func (k *secant) put(t, f float64) {
	if (f < 0) == k.low {
		k.lo = t
	} else {
		k.hi = t
	}
	k.t0, k.f0, k.t1, k.f1 = k.t1, k.f1, t, f
}
