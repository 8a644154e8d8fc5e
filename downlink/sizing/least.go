package sizing

import (
	"errors"
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// Range is where a diameter is sought, and at how many diameters, evenly in their
// logarithm, all is evaluated first.
type Range struct {
	Low, High unit.Length
	Steps     int // 2 or more; 0: DefaultSteps
}

// DefaultSteps is the number of diameters of a trade curve.
const DefaultSteps = 24

// Grid returns the diameters, both ends included.
func (r Range) Grid() []unit.Length {
	n := r.Steps
	if n == 0 {
		n = DefaultSteps
	}
	out := make([]unit.Length, n)
	for i := range out {
		out[i] = unit.Length(r.Low.Metres() * math.Pow(r.High.Metres()/r.Low.Metres(), float64(i)/float64(n-1)))
	}
	out[n-1] = r.High
	return out
}

// Check returns a *unit.RangeError for a range that is none.
func (r Range) Check() error {
	if !(r.Low > 0 && r.High > r.Low && r.High <= 1000) {
		return &unit.RangeError{Quantity: "diameters to look among", Value: r.Low.Metres(), Unit: "m", Allowed: "above 0 m, up to a greater diameter of at most 1000 m"}
	}
	if r.Steps != 0 && (r.Steps < 2 || r.Steps > 1000) {
		return &unit.RangeError{Quantity: "steps of the diameter", Value: float64(r.Steps), Allowed: "2 to 1000"}
	}
	return nil
}

// resolution is how closely a diameter is found, as a share of it.
const resolution = 5e-4

// Found is the answer of a search for a diameter.
type Found struct {
	Diameter unit.Length // the least that meets all; 0: none does
	Most     unit.Length // the greatest of the stretch that begins there, at most the range's end
	Nearest  *Outcome    // where none does, what comes nearest: the worst requirement missed by the least share, then the next
}

// Least returns the least diameter of a range that meets some requirements together.
//
// Margins are not monotone in the diameter: beyond some size pointing and surface
// errors take more than the aperture gives. But over a stretch of diameters from a to b
// the gain rises by no more than 20 log(b/a), and scintillation falls by no more than
// it does between the ends; what does not meet with that much more power does not meet
// anywhere in the stretch; what a mount does not follow grows over it, or is left out of that
// where the mount's rates rise. Stretches that this does not exclude are halved down to the
// resolution. It holds for requirements that more power never makes worse, which margin,
// availability and gaps are exactly; bytes and latency are but for the plans being made
// for one weather and counted in all.
func (s *Study) Least(needs []Need, r Range) (Found, error) {
	return s.LeastOf(needs, r, Variant{})
}

// LeastOf is Least with everything but the diameter changed as in a variant.
func (s *Study) LeastOf(needs []Need, r Range, base Variant) (Found, error) {
	if len(needs) == 0 {
		return Found{}, errors.New("nothing is required; give a requirement")
	}
	if err := r.Check(); err != nil {
		return Found{}, err
	}
	q := search{study: s, needs: needs, grid: s.grid(r), base: base}
	for _, n := range needs {
		q.parts |= n.part
	}
	return q.run()
}

// grid is that of a range with the diameters at which the rates of a mount change
// otherwise: between two of its diameters bytes have one summit, like margins.
func (s *Study) grid(r Range) []unit.Length {
	out := r.Grid()
	for _, i := range s.spec.Sites {
		if m := s.spec.Places[i].Clear.Antenna.Mount; m != nil {
			out = append(out, rowsWithin(m, r.Low, r.High)...)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

type search struct {
	study *Study
	needs []Need
	parts part
	grid  []unit.Length
	base  Variant
}

// at is the variant of a diameter.
func (q *search) at(d unit.Length) Variant {
	v := q.base
	v.Diameter = d
	return v
}

// met tells whether a variant meets all.
func (q *search) met(v Variant) (bool, error) {
	o, err := q.study.outcome(v, q.parts)
	if err != nil {
		return false, err
	}
	for i := range q.needs {
		if !q.needs[i].Met(o) {
			return false, nil
		}
	}
	return true, nil
}

func (q *search) run() (Found, error) {
	var f Found
	ok, err := q.met(q.at(q.grid[0]))
	if err != nil {
		return f, err
	}
	if ok {
		f.Diameter = q.grid[0]
	}
	for i := 1; i < len(q.grid) && f.Diameter == 0; i++ {
		if f.Diameter, err = q.between(q.grid[i-1], q.grid[i]); err != nil {
			return f, err
		}
	}
	if f.Diameter > 0 {
		f.Most, err = q.last(f.Diameter)
		return f, err
	}
	f.Nearest, err = q.nearest()
	return f, err
}

// between returns the least diameter in (a, b] that meets all, where a does not; 0 where
// none does.
func (q *search) between(a, b unit.Length) (unit.Length, error) {
	end, err := q.met(q.at(b))
	if err != nil {
		return 0, err
	}
	fine := b.Metres()-a.Metres() <= resolution*b.Metres()
	if end && fine {
		return b, nil
	}
	if fine {
		return 0, nil
	}
	if !end {
		possible, err := q.possible(a, b)
		if err != nil || !possible {
			return 0, err
		}
	}
	mid := unit.Length(math.Sqrt(a.Metres() * b.Metres()))
	middle, err := q.met(q.at(mid))
	if err != nil {
		return 0, err
	}
	d, err := q.betweenKnown(a, mid, middle)
	if err != nil || d > 0 {
		return d, err
	}
	return q.between(mid, b)
}

// betweenKnown is between where the outcome at the end is known. Where the end meets
// all, an earlier stretch that does and ends before it is not looked for: margins have
// one summit.
func (q *search) betweenKnown(a, b unit.Length, end bool) (unit.Length, error) {
	if !end {
		return q.between(a, b)
	}
	for b.Metres()-a.Metres() > resolution*b.Metres() {
		mid := unit.Length(math.Sqrt(a.Metres() * b.Metres()))
		ok, err := q.met(q.at(mid))
		if err != nil {
			return 0, err
		}
		if ok {
			b = mid
		} else {
			a = mid
		}
	}
	return b, nil
}

// last returns the end of the stretch of diameters that meet all from d on.
func (q *search) last(d unit.Length) (unit.Length, error) {
	for _, next := range q.grid {
		if next <= d {
			continue
		}
		ok, err := q.met(q.at(next))
		if err != nil {
			return 0, err
		}
		if ok {
			d = next
			continue
		}
		for next.Metres()-d.Metres() > resolution*d.Metres() {
			mid := unit.Length(math.Sqrt(next.Metres() * d.Metres()))
			if ok, err = q.met(q.at(mid)); err != nil {
				return 0, err
			}
			if ok {
				d = mid
			} else {
				next = mid
			}
		}
		return d, nil
	}
	return d, nil
}
