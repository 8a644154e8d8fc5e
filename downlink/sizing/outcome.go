package sizing

import (
	"fmt"
	"math"

	"slantwise/downlink/recorder"
)

// Outcome is what a variant brings. What was not asked for is NaN.
type Outcome struct {
	Variant Variant

	BytesPerDay           float64
	ClearBytesPerDay      float64 // if the sky were clear all year, sent as planned for the weather
	WorstWeekBytesPerDay  float64
	WorstMonthBytesPerDay float64

	MarginDB      float64 // the least of the sites, at the elevation that is asked for
	ShareMarginDB float64 // during the share of the contact time that is asked for

	AvailabilityPercent           float64 // of contact time at all sites
	WorstMonthAvailabilityPercent float64

	LongestGapH float64 // the year's edges bound gaps, too
	LatencyH    float64

	MountLostBytesPerDay float64 // what would come down beside BytesPerDay if mounts followed everything; 0 without mounts
	NotFollowedSPerDay   float64 // of the passes that count

	Price float64 // of one antenna; NaN without a law or a diameter

	done part
}

// part is a share of an outcome that is worked out at once.
type part int

const (
	planned      part = 1 << iota // bytes and latency: every pass is planned
	margins                       // the margins that are asked for
	availability                  // shares of contact time
	gaps
	months     // bytes in the worst month of weather; goes with planned
	everything = planned | margins | availability | gaps | months
)

// Outcome evaluates a variant, each once.
func (s *Study) Outcome(v Variant) (*Outcome, error) { return s.outcome(v, everything) }

// outcome evaluates at least some parts of a variant.
func (s *Study) outcome(v Variant, parts part) (*Outcome, error) {
	o := s.known[v]
	if o == nil {
		nan := math.NaN()
		o = &Outcome{Variant: v, BytesPerDay: nan, ClearBytesPerDay: nan, WorstWeekBytesPerDay: nan, WorstMonthBytesPerDay: nan,
			MarginDB: nan, ShareMarginDB: nan, AvailabilityPercent: nan, WorstMonthAvailabilityPercent: nan, LongestGapH: nan, LatencyH: nan, MountLostBytesPerDay: nan, NotFollowedSPerDay: nan, Price: nan}
		if p := s.spec.Family.Price; p != nil && v.Diameter > 0 {
			o.Price = p.At(v.Diameter)
		}
	}
	if parts&months&^o.done != 0 { // the plans are counted again
		o.done &^= planned
		parts |= planned
	}
	parts &^= o.done
	if parts == 0 {
		return o, nil
	}
	w := work{study: s, variant: v, out: o, months: parts&months != 0}
	if err := w.prepare(); err != nil {
		return nil, err
	}
	for _, step := range []struct {
		part part
		run  func() error
	}{{gaps, w.gaps}, {planned, w.bytes}, {margins, w.margins}, {availability, w.availability}} {
		if parts&step.part == 0 {
			continue
		}
		if err := step.run(); err != nil {
			return nil, err
		}
	}
	if parts&planned != 0 {
		s.plans++
	}
	o.done |= parts
	s.known[v] = o
	return o, nil
}

// work is the evaluation of one variant.
type work struct {
	study   *Study
	variant Variant
	fronts  []*front  // by site
	outages []*outage // by site; nil: the antenna follows everything
	out     *Outcome

	months   bool      // those of the worst month are asked for
	levelsOf []float64 // of the track at hand
	days     []float64 // bytes by day of the year
	contacts []recorder.Contact
}

// prepare makes the links of the sites, and finds what their antennas do not follow.
func (w *work) prepare() error {
	s := w.study
	w.fronts, w.outages = make([]*front, len(s.sites)), make([]*outage, len(s.sites))
	for _, i := range s.spec.Sites {
		f, err := s.front(i, w.variant)
		if err == nil && !w.variant.follows {
			template := s.spec.Places[i].Clear.Antenna
			w.outages[i], err = s.turning.outage(i, template, f.antenna, s.spec.Places[i].Clear.Transmitter.Frequency)
		}
		if err != nil {
			return fmt.Errorf("station %s: %w", s.spec.Flight.Sites[i].Site.Name, err)
		}
		w.fronts[i] = f
	}
	return nil
}

// shift is what a variant adds to every C/N0, in dB.
func (v *Variant) shift() float64 { return float64(v.Power - v.Pointing) }

// usable tells whether a sample counts.
func (w *work) usable(y *SiteYear, i int) bool {
	if raise := w.variant.Raise; raise > 0 && y.ElevationDeg[i] < (y.Site.MinimumElevation+raise).Degrees() {
		return false
	}
	return y.Open[i]
}

// levels fills C/N0 of a site's samples, planned weather and clear sky; NaN where the
// link is not usable.
func (w *work) levels(site, from, to int, planned, clear []float64) {
	st, f := &w.study.sites[site], w.fronts[site]
	shift := w.variant.shift()
	for k := range planned {
		i := from + k
		if !f.usable || !w.usable(st.year, i) {
			planned[k], clear[k] = math.NaN(), math.NaN()
			continue
		}
		g := st.year.FluxDB[i] + shift
		planned[k], clear[k] = g+st.place[i].at(f.planned), g+st.place[i].at(f.clear)
	}
}

// margins fills in the margins that are asked for.
func (w *work) margins() error {
	spec := &w.study.spec
	if m := spec.Needs.Margin; m != nil {
		w.out.MarginDB = math.Inf(1)
		for _, i := range spec.Sites {
			flux := w.study.sites[i].marginFlux
			p := w.study.sites[i].air.ladder.find(m.Elevation.Degrees())
			cn0 := flux + w.variant.shift() + p.at(w.fronts[i].planned)
			w.out.MarginDB = min(w.out.MarginDB, cn0-spec.Mode.NeedDBHz+float64(spec.Margin))
		}
	}
	if m := spec.Needs.MarginShare; m != nil {
		w.out.ShareMarginDB = w.marginDuring(m.Percent/100) + float64(spec.Margin)
	}
	return nil
}

// availability fills in the share of contact time in which the mode's margin over the
// required one is 0 or more.
func (w *work) availability() error {
	year, month := w.under(0, true)
	w.out.AvailabilityPercent, w.out.WorstMonthAvailabilityPercent = 100*(1-year), 100*(1-month)
	return nil
}

// under returns the share of contact time in which the margin over the required one is
// less than m dB; that of the worst month with months, else NaN.
func (w *work) under(m float64, months bool) (year, month float64) {
	total, need := 0.0, w.study.spec.Mode.NeedDBHz+m
	shift := w.variant.shift()
	for _, site := range w.study.spec.Sites {
		st, f := &w.study.sites[site], w.fronts[site]
		at := st.year
		for p := range at.Passes {
			if !stands(p, w.variant.thin) {
				continue
			}
			from, to := at.Samples(p)
			lost := w.outages[site].of(p)
			for i := from + 1; i < to; i++ {
				if !w.usable(at, i-1) || !w.usable(at, i) {
					continue
				}
				dt := at.Seconds[i] - at.Seconds[i-1]
				total += dt
				if lost != nil { // is contact, and has no margin
					gone := lostOf(lost, at.Seconds[i-1], at.Seconds[i])
					dt, year, month = dt-gone, year+gone, month+gone
				}
				if !f.usable {
					year, month = year+dt, month+dt
					continue
				}
				clear := (at.FluxDB[i-1]+st.place[i-1].at(f.clear)+at.FluxDB[i]+st.place[i].at(f.clear))/2 + shift
				y, m := f.under(st.air, st.place[i], clear-need, months)
				year += dt * y
				month += dt * m
			}
		}
	}
	if total == 0 {
		return 1, 1
	}
	return year / total, month / total
}

// marginDuring returns the margin over the required one that is there for at least a
// share of the contact time, to 0.001 dB.
func (w *work) marginDuring(share float64) float64 {
	low, high := -100.0, 156.0
	for high-low > 1e-3 {
		mid := (low + high) / 2
		if year, _ := w.under(mid, false); year > 1-share {
			high = mid
		} else {
			low = mid
		}
	}
	return low
}
