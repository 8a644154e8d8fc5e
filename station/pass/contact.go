package pass

import "math"

// arc is an uninterrupted time above the skyline, from sight to sight.
type arc struct{ from, to sight }

// finder finds passes; it owns the memory that it uses again from site to site.
type finder struct {
	track track
	clock clock
	scene scene
	arcs  []arc
	// Working space of cutBySkyline.
	whole, clear []arc
}

// find appends the passes over one site to records, by rising AOS.
func (f *finder) find(k *skyline, records []record) []record {
	s := &f.scene
	s.track, s.frame, s.ground = &f.track, k.frame, k.frame.Origin.Norm()
	s.out = s.out[:0]
	above := s.level(math.Sin(k.low))
	start, end := s.see(&s.nodes[0]), s.see(&s.nodes[len(s.nodes)-1])
	f.arcs = pair(f.arcs[:0], above, s.out, &start, &end)
	if !k.level() {
		f.cutBySkyline(k, &start, &end)
	}
	f.join(k)
	for i := range f.arcs {
		if r, ok := s.contact(&f.arcs[i], k, f.clock); ok {
			records = append(records, r)
		}
	}
	return records
}

// pair makes arcs of crossings.
func pair(arcs []arc, above bool, crossings []sight, start, end *sight) []arc {
	from := start
	for i := range crossings {
		if above {
			arcs = append(arcs, arc{*from, crossings[i]})
		}
		above, from = !above, &crossings[i]
	}
	if above {
		arcs = append(arcs, arc{*from, *end})
	}
	return arcs
}

// stretchAt returns the index of the stretch that holds t.
func (k *track) stretchAt(t float64) int {
	i := min(max(int((t-k.from)*k.rate), 0), len(k.stretches)-1)
	for i > 0 && k.nodes[i].t > t {
		i--
	}
	for i < len(k.stretches)-1 && k.nodes[i+1].t <= t {
		i++
	}
	return i
}

// join merges arcs whose gap, in the milliseconds that are printed, is at most the
// site's merge gap.
func (f *finder) join(k *skyline) {
	gap := k.site.MergeGap.Milliseconds()
	if gap <= 0 || len(f.arcs) == 0 {
		return
	}
	last := 0
	for _, a := range f.arcs[1:] {
		if f.clock.at(a.from.t)-f.clock.at(f.arcs[last].to.t) <= gap {
			f.arcs[last].to = a.to
			continue
		}
		last++
		f.arcs[last] = a
	}
	f.arcs = f.arcs[:last+1]
}

// contact describes an arc; ok is false when it is shorter than a millisecond, so
// that its ends fall on one printed instant.
func (s *scene) contact(a *arc, k *skyline, c clock) (r record, ok bool) {
	r.aos, r.los = c.at(a.from.t), c.at(a.to.t)
	if r.los <= r.aos {
		return r, false
	}
	if a.from.t == s.from {
		r.cut |= CutAOS
	}
	if a.to.t == s.to {
		r.cut |= CutLOS
	}
	top, near := s.extremes(a)
	r.culmination = min(max(c.at(top.t), r.aos), r.los)
	r.maxElevation = s.height(&top)
	r.minRange = near
	r.aosAzimuth, r.culmAzimuth, r.losAzimuth = s.azimuth(&a.from), s.azimuth(&top), s.azimuth(&a.to)
	r.aosElevation, r.losElevation = s.elevation(&a.from, k), s.elevation(&a.to, k)
	return r, true
}

// azimuth returns the azimuth in rad, in [0, 2π).
func (s *scene) azimuth(p *sight) float32 {
	a := math.Atan2(p.d.Dot(s.frame.East), p.d.Dot(s.frame.North))
	if a < 0 {
		a += 2 * math.Pi
	}
	az := float32(a)
	if az >= 2*math.Pi { // rounded up to a full turn
		az = 0
	}
	return az
}

// elevation returns the elevation of an end of an arc in rad; over a level horizon
// it is known, but for the ends that the window cuts.
func (s *scene) elevation(p *sight, k *skyline) float32 {
	if k.level() && p.t != s.from && p.t != s.to {
		return float32(k.low)
	}
	return float32(s.height(p))
}

// height returns the elevation in rad from the offset alone: towards the zenith the
// sine loses half of its digits, and what carrying leaves in the range besides.
func (s *scene) height(p *sight) float64 {
	return math.Atan2(p.d.Dot(s.frame.Up), math.Hypot(p.d.Dot(s.frame.East), p.d.Dot(s.frame.North)))
}
