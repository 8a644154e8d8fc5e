package mount

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// search finds the course of the axes that is on track for most of a pass. It goes
// through the samples in order and keeps, for each way of standing, the most that can
// have been followed by then; a state comes from the one before, by following, or from an earlier
// one in any way by a slew in between, for which the time suffices. That is exact for the samples
// taken: every sequence of following and slewing is among them.
type search struct {
	drive  *Drive
	course *Course
	*samples
	ways  []way
	worth []float64 // of step i
	from  *station.AxisAngles
	lead  float64

	holds  [][]bool    // by way, then sample: within both ranges
	most   [][]float64 // followed when on track at the sample; -Inf: cannot be
	origin [][]origin
	best   [][]float64 // the greatest of most up to the sample
}

// origin is where a state comes from.
type origin struct {
	kind originKind
	way  int // slewed: from
	at   int
}

type originKind int

const (
	begun    originKind = iota // got here from rest
	followed                   // from the sample before
	slewed                     // from another sample
)

// prepare lays out a search over all ways, all worth the same where worth is nil.
func (d *Drive) prepare(c *Course, o Options) *search {
	s := &search{drive: d, course: c, samples: d.sample(c, o.Fine), from: o.From, lead: o.Lead}
	n := len(s.at)
	least, most := s.lower[0], s.lower[0]
	for _, v := range s.lower {
		least, most = min(least, v), max(most, v)
	}
	s.ways = d.ways(least, most)
	s.worth = make([]float64, n-1)
	highest := 0.0
	for i := range s.worth {
		w := 1.0
		if o.Worth != nil {
			w = o.Worth((s.at[i] + s.at[i+1]) / 2)
		}
		s.worth[i] = w
		highest = max(highest, w)
	}
	for i := range s.worth {
		// What is worth nothing is followed all the same, where that costs nothing.
		w := 1e-6
		if highest > 0 {
			w += s.worth[i] / highest
		}
		s.worth[i] = w * (s.at[i+1] - s.at[i])
	}
	for _, w := range s.ways {
		holds := make([]bool, n)
		for i := range holds {
			p := w.of(s.lower[i], s.upper[i])
			holds[i] = d.mount.Lower.Holds(unit.Angle(p.lower)) && d.mount.Upper.Holds(unit.Angle(p.upper))
		}
		s.holds = append(s.holds, holds)
	}
	return s
}

// run searches, beginning in one way, or in any for -1, and returns the last state of
// the best course; ok is false where the target is never reached.
func (s *search) run(first int) (way, at int, ok bool) {
	n := len(s.at)
	s.most, s.origin, s.best = make([][]float64, len(s.ways)), make([][]origin, len(s.ways)), make([][]float64, len(s.ways))
	for w := range s.ways {
		s.most[w], s.origin[w], s.best[w] = make([]float64, n), make([]origin, n), make([]float64, n)
	}
	whole := s.whole(first)
	top, way, at := math.Inf(-1), -1, -1
	from := s.rest()
	for i := range n {
		for w := range s.ways {
			if whole >= 0 && w != whole {
				s.most[w][i] = math.Inf(-1)
			} else {
				s.enter(w, i, first, from, whole < 0)
			}
			s.best[w][i] = s.most[w][i]
			if i > 0 {
				s.best[w][i] = max(s.best[w][i], s.best[w][i-1])
			}
			if s.most[w][i] > top {
				top, way, at = s.most[w][i], w, i
			}
		}
	}
	return way, at, way >= 0
}

// whole returns a way in which all is followed from the first sample on, the one that
// the mount is in soonest; -1: there is none.
func (s *search) whole(first int) int {
	n := len(s.at)
	if s.lowerBroken[n-1] > 0 || s.upperBroken[n-1] > 0 {
		return -1
	}
	best, soonest := -1, math.Inf(1)
	from := s.rest()
	for w := range s.ways {
		if first >= 0 && w != first || !s.begins(w, 0) || !allOf(s.holds[w]) {
			continue
		}
		if time := s.wayTo(from, w, 0); time < soonest {
			best, soonest = w, time
		}
	}
	return best
}

// rest is where the mount is before.
func (s *search) rest() station.AxisAngles {
	if s.from != nil {
		return *s.from
	}
	return s.drive.Stow()
}

// wayTo is how long the mount takes from rest to where a target is in a way, s.
func (s *search) wayTo(from station.AxisAngles, w, i int) float64 {
	p := s.place(w, i)
	return s.drive.SlewTime(from, station.AxisAngles{Lower: unit.Angle(p.lower), Upper: unit.Angle(p.upper)}).Seconds()
}

func allOf(list []bool) bool {
	for _, v := range list {
		if !v {
			return false
		}
	}
	return true
}

// enter fills one state.
func (s *search) enter(w, i, first int, from station.AxisAngles, slews bool) {
	s.most[w][i] = math.Inf(-1)
	if !s.holds[w][i] {
		return
	}
	if (first < 0 || w == first) && s.begins(w, i) {
		// Of beginnings that follow alike the one that is reached soonest.
		s.most[w][i], s.origin[w][i] = -1e-9*s.wayTo(from, w, i), origin{kind: begun}
	}
	if i > 0 && s.holds[w][i-1] && s.lowerBroken[i] == s.lowerBroken[i-1] && s.upperBroken[i] == s.upperBroken[i-1] {
		if v := s.most[w][i-1] + s.worth[i-1]; v > s.most[w][i] {
			s.most[w][i], s.origin[w][i] = v, origin{kind: followed, way: w, at: i - 1}
		}
	}
	if slews {
		s.slewInto(w, i)
	}
}

// begins tells whether the mount can be on track at a sample, coming from rest.
func (s *search) begins(w, i int) bool {
	if s.from == nil {
		return true
	}
	lower, upper := s.motions(w, i)
	time := s.lead + s.at[i]
	return s.drive.mount.Settle+quickest(s.drive.mount.Lower, motion{at: s.from.Lower.Radians()}, lower) <= time+timeSlack &&
		s.drive.mount.Settle+quickest(s.drive.mount.Upper, motion{at: s.from.Upper.Radians()}, upper) <= time+timeSlack
}

// slewInto looks for a better state from which the mount slews into this one. The later
// ones come first: a slew from further back can only win with more followed by then.
func (s *search) slewInto(w, i int) {
	rate := float64(s.drive.mount.Lower.Rate) * (1 + 1e-9)
	at := s.place(w, i).lower
	for v := range s.ways {
		turn := s.ways[v].of(0, 0).lower
		for k := i - 1; k >= 0 && s.best[v][k] > s.most[w][i]; k-- {
			// What is too far for the lower axis goes first: most of all.
			if math.Abs(at-turn-s.lower[k]) <= rate*(s.at[i]-s.at[k]) && s.most[v][k] > s.most[w][i] && s.slews(v, k, w, i) {
				s.most[w][i], s.origin[w][i] = s.most[v][k], origin{kind: slewed, way: v, at: k}
			}
		}
	}
}

// slews tells whether the time from one state to a later one suffices for both axes. An
// axis that can follow the target all the while does so.
func (s *search) slews(v, k, w, i int) bool {
	time := s.at[i] - s.at[k]
	lowerFrom, upperFrom := s.motions(v, k)
	lowerTo, upperTo := s.motions(w, i)
	if !s.lowerFollows(v, k, w, i) && !makes(s.drive.mount.Lower, lowerFrom, lowerTo, time) {
		return false
	}
	return s.upperFollows(v, k, w, i) || makes(s.drive.mount.Upper, upperFrom, upperTo, time)
}

func (s *search) lowerFollows(v, k, w, i int) bool {
	return v == w && s.lowerBroken[i] == s.lowerBroken[k] && allOf(s.holds[w][k:i])
}

func (s *search) upperFollows(v, k, w, i int) bool {
	return s.ways[v].over == s.ways[w].over && s.upperBroken[i] == s.upperBroken[k] && allOf(s.holds[w][k:i])
}

func (s *search) place(w, i int) place { return s.ways[w].of(s.lower[i], s.upper[i]) }

// motions returns where the axes stand and how they turn on track.
func (s *search) motions(w, i int) (lower, upper motion) {
	p := s.place(w, i)
	rate := s.upperRate[i]
	if s.ways[w].over {
		rate = -rate
	}
	return motion{p.lower, s.lowerRate[i]}, motion{p.upper, rate}
}
