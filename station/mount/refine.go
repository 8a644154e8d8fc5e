package mount

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// refineMost is how many ends of a slew are tried at most.
const refineMost = 60

// refine shifts the ends of the slew between two legs to where it costs least. The search
// knows the samples alone, and counts all of a slew as lost; here the ends lie anywhere, and
// with a tolerance what errs no more than that is followed.
func (s *search) refine(a, b *leg, tolerance unit.Angle) {
	firstEnd, lastEnd := s.run1(b.way, b.first, -1), b.last
	firstEnd = max(firstEnd, a.first)
	lastStart := min(s.run1(a.way, a.last, 1), b.last)
	bestA, bestB := *a, *b
	best := s.cost(&bestA, &bestB, tolerance)
	try := func(from, to float64) {
		if !(from >= a.from && to <= b.to && from < to) {
			return
		}
		na, nb := *a, *b
		na.to, nb.from = from, to
		if c := s.cost(&na, &nb, tolerance); c < best {
			best, bestA, bestB = c, na, nb
		}
	}
	for _, i := range spread(firstEnd, lastEnd, b.first) {
		if k := s.latestStart(a, b.way, i, lastStart); k >= 0 {
			try(s.startBetween(a.way, k, b.way, s.at[i]), s.at[i])
		}
	}
	for _, k := range spread(a.first, lastStart, a.last) {
		if i := s.earliestEnd(a.way, k, b, firstEnd); i >= 0 {
			try(s.at[k], s.endBetween(a.way, s.at[k], b.way, i))
		}
	}
	*a, *b = bestA, bestB
}

// spread lists some indices from first to last, close together around the middle one.
func spread(first, last, middle int) []int {
	var out []int
	step, n := 1, 0
	for d := 0; n < refineMost && (middle-d >= first || middle+d <= last); d += step {
		if middle-d >= first {
			out = append(out, middle-d)
		}
		if d > 0 && middle+d <= last {
			out = append(out, middle+d)
		}
		if n++; n%8 == 0 {
			step *= 2
		}
	}
	return out
}

// run1 returns how far one way is followed from a sample, forward for 1, backward for -1.
func (s *search) run1(w, i, dir int) int {
	for {
		j := i + dir
		a, b := min(i, j), max(i, j)
		if a < 0 || b >= len(s.at) || !s.holds[w][a] || !s.holds[w][b] ||
			s.lowerBroken[a] != s.lowerBroken[b] || s.upperBroken[a] != s.upperBroken[b] {
			return i
		}
		i = j
	}
}

// latestStart returns the last sample of a leg from which a sample is reached; -1: none.
func (s *search) latestStart(a *leg, w, i, last int) int {
	for k := min(last, i-1); k >= a.first; k-- {
		if s.slews(a.way, k, w, i) {
			return k
		}
	}
	return -1
}

// earliestEnd returns the first sample of a leg that is reached from a sample; -1: none.
func (s *search) earliestEnd(v, k int, b *leg, first int) int {
	for i := max(first, k+1); i <= b.last; i++ {
		if s.slews(v, k, b.way, i) {
			return i
		}
	}
	return -1
}

// startBetween halves the time from a sample, from which the slew can be made, to the
// next one that is followed.
func (s *search) startBetween(v, k, w int, to float64) float64 {
	low := s.at[k]
	if s.run1(v, k, 1) == k || s.at[k+1] >= to {
		return low
	}
	for high := s.at[k+1]; high-low > 1e-4; {
		if m := (low + high) / 2; s.slewsAt(v, m, w, to) {
			low = m
		} else {
			high = m
		}
	}
	return low
}

// endBetween halves the time from the sample before one at which the slew can end.
func (s *search) endBetween(v int, from float64, w, i int) float64 {
	high := s.at[i]
	if s.run1(w, i, -1) == i || s.at[i-1] <= from {
		return high
	}
	for low := s.at[i-1]; high-low > 1e-4; {
		if m := (low + high) / 2; s.slewsAt(v, from, w, m) {
			high = m
		} else {
			low = m
		}
	}
	return high
}

// slewsAt is slews between any two instants.
func (s *search) slewsAt(v int, from float64, w int, to float64) bool {
	lowerFrom, upperFrom := s.motionsAt(v, from)
	lowerTo, upperTo := s.motionsAt(w, to)
	k, i := s.before(from), s.after(to)
	if !s.lowerFollows(v, k, w, i) && !makes(s.drive.mount.Lower, lowerFrom, lowerTo, to-from) {
		return false
	}
	return s.upperFollows(v, k, w, i) || makes(s.drive.mount.Upper, upperFrom, upperTo, to-from)
}

// cost is what is lost of the worth between two legs, and a thousandth of what is off
// track.
func (s *search) cost(a, b *leg, tolerance unit.Angle) float64 {
	off := s.worthBetween(a.to, b.from)
	if tolerance <= 0 {
		return off
	}
	part := s.slewBetween(a, b)
	n := max(8, min(400, int(math.Ceil(part.Seconds()/fineStep))))
	lost := 0.0
	for i := range n {
		from, to := part.From+part.Seconds()*float64(i)/float64(n), part.From+part.Seconds()*float64(i+1)/float64(n)
		l, u := part.motions((from + to) / 2)
		dir, _ := s.course.at((from + to) / 2)
		if between(s.drive.frame.direction(station.AxisAngles{Lower: unit.Angle(l.at), Upper: unit.Angle(u.at)}), dir) > tolerance {
			lost += s.worthBetween(from, to)
		}
	}
	return lost + off/1000
}

// worthBetween is the worth of following from one instant to another.
func (s *search) worthBetween(from, to float64) float64 {
	sum := 0.0
	for i := s.before(from); i+1 < len(s.at) && s.at[i] < to; i++ {
		if share := (min(to, s.at[i+1]) - max(from, s.at[i])) / (s.at[i+1] - s.at[i]); share > 0 {
			sum += share * s.worth[i]
		}
	}
	return sum
}
