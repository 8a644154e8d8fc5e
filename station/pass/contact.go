package pass

import (
	"math"

	"slantwise/orbit"
)

// arc is an uninterrupted time above the skyline, in s.
type arc struct{ from, to float64 }

// finder finds passes; it owns the memory that it uses again from site to site.
type finder struct {
	track   track
	clock   clock
	arcs    []arc
	risings []float64
}

// find appends the passes over one site to records, by rising AOS.
func (f *finder) find(k *skyline, records []record) []record {
	s := &scene{track: &f.track, frame: k.frame, ground: k.frame.Origin.Norm(), out: f.risings[:0]}
	above := s.level(math.Sin(k.low))
	f.arcs = pair(f.arcs[:0], above, s.out, f.track.from, f.track.to)
	if !k.level() {
		f.arcs = s.cutBySkyline(k, f.arcs)
	}
	f.risings = s.out
	arcs := f.joined(k)
	for _, a := range arcs {
		r, ok := s.contact(a, f.clock)
		if ok {
			records = append(records, r)
		}
	}
	return records
}

// pair makes arcs of crossings.
func pair(arcs []arc, above bool, crossings []float64, from, to float64) []arc {
	start := from
	for _, t := range crossings {
		if above {
			arcs = append(arcs, arc{start, t})
		}
		above, start = !above, t
	}
	if above {
		arcs = append(arcs, arc{start, to})
	}
	return arcs
}

// cutBySkyline takes from arcs over the lowest part of the skyline what lies under
// its higher parts.
func (s *scene) cutBySkyline(k *skyline, arcs []arc) []arc {
	var cut []arc
	for _, whole := range arcs {
		s.out = s.out[:0]
		a := s.aim(k, whole.from)
		above := a.above >= 0
		i := s.stretchAt(whole.from)
		for a.t < whole.to {
			b := s.aim(k, math.Min(s.nodes[i+1].t, whole.to))
			s.unveil(k, &a, &b, &s.stretches[i])
			a = b
			i++
		}
		cut = pair(cut, above, s.out, whole.from, whole.to)
	}
	return cut
}

// stretchAt returns the index of the stretch that holds t.
func (k *track) stretchAt(t float64) int {
	step := k.nodes[1].t - k.nodes[0].t
	i := min(max(int((t-k.from)/step), 0), len(k.stretches)-1)
	for i > 0 && k.nodes[i].t > t {
		i--
	}
	for i < len(k.stretches)-1 && k.nodes[i+1].t <= t {
		i++
	}
	return i
}

// joined merges arcs whose gap, in the milliseconds that are printed, is at most the
// site's merge gap.
func (f *finder) joined(k *skyline) []arc {
	gap := k.site.MergeGap.Milliseconds()
	if gap <= 0 || len(f.arcs) == 0 {
		return f.arcs
	}
	last := 0
	for _, a := range f.arcs[1:] {
		if f.clock.at(a.from)-f.clock.at(f.arcs[last].to) <= gap {
			f.arcs[last].to = a.to
			continue
		}
		last++
		f.arcs[last] = a
	}
	return f.arcs[:last+1]
}

// contact describes an arc; ok is false when it is shorter than a millisecond, so
// that its ends fall on one printed instant.
func (s *scene) contact(a arc, c clock) (r record, ok bool) {
	r.aos, r.los = c.at(a.from), c.at(a.to)
	if r.los <= r.aos {
		return r, false
	}
	top, near := s.extremes(a)
	r.culmination = min(max(c.at(top), r.aos), r.los)
	r.minRange = near
	var el float64
	r.aosAzimuth, el = compass(s.direction(a.from))
	r.aosElevation = float32(el)
	r.losAz, el = compass(s.direction(a.to))
	r.losElevation = float32(el)
	r.culmAzimuth, r.maxElevation = compass(s.direction(top))
	if a.from == s.from {
		r.cut |= CutAOS
	}
	if a.to == s.to {
		r.cut |= CutLOS
	}
	return r, true
}

// compass returns azimuth and elevation of an offset by east, north and up, in rad.
func compass(d orbit.Vec3) (az float32, el float64) {
	a := math.Atan2(d.X, d.Y)
	if a < 0 {
		a += 2 * math.Pi
	}
	az = float32(a)
	if az >= 2*math.Pi { // rounded up to a full turn
		az = 0
	}
	return az, math.Atan2(d.Z, math.Hypot(d.X, d.Y))
}
