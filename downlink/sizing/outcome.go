package sizing

import (
	"fmt"
	"math"

	"slantwise/downlink/rateplan"
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
	everything = planned | margins | availability | gaps
)

// Outcome evaluates a variant, each once.
func (s *Study) Outcome(v Variant) (*Outcome, error) { return s.outcome(v, everything) }

// outcome evaluates at least some parts of a variant.
func (s *Study) outcome(v Variant, parts part) (*Outcome, error) {
	o := s.known[v]
	if o == nil {
		nan := math.NaN()
		o = &Outcome{Variant: v, BytesPerDay: nan, ClearBytesPerDay: nan, WorstWeekBytesPerDay: nan, WorstMonthBytesPerDay: nan,
			MarginDB: nan, ShareMarginDB: nan, AvailabilityPercent: nan, WorstMonthAvailabilityPercent: nan, LongestGapH: nan, LatencyH: nan, Price: nan}
		if p := s.spec.Family.Price; p != nil && v.Diameter > 0 {
			o.Price = p.At(v.Diameter)
		}
	}
	parts &^= o.done
	if parts == 0 {
		return o, nil
	}
	w := work{study: s, variant: v, fronts: make([]*front, len(s.sites)), out: o}
	for _, i := range s.spec.Sites {
		f, err := s.front(i, v)
		if err != nil {
			return nil, fmt.Errorf("station %s: %w", s.spec.Flight.Sites[i].Site.Name, err)
		}
		w.fronts[i] = f
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
	fronts  []*front
	out     *Outcome

	days     []float64 // bytes by day of the year
	contacts []recorder.Contact
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

// bytes plans every pass and counts what comes down.
func (w *work) bytes() error {
	s := w.study
	w.days = make([]float64, int(math.Ceil(s.spec.Flight.Days)))
	turns, weight := s.sampled(w.variant.thin)
	tracks := make([]rateplan.Track, len(turns))
	clear := make([][]float64, len(turns))
	for k, t := range turns {
		tracks[k], clear[k] = w.track(t)
	}
	if s.spec.Settles {
		if err := s.spec.Rates.Settle(tracks); err != nil {
			return err
		}
	}
	w.out.ClearBytesPerDay, w.out.WorstMonthBytesPerDay = 0, 0
	for k := range tracks {
		plan, modes, err := s.spec.Rates.Plan(tracks[k])
		if err != nil {
			return err
		}
		w.count(turns[k], &tracks[k], clear[k], &plan, modes, weight[turns[k].Site])
		if s.spec.Latency != nil && !math.IsNaN(s.spec.Needs.Latency) {
			w.contacts = append(w.contacts, contactOf(&s.spec, turns[k], &tracks[k], &plan))
		}
	}
	w.total()
	return w.latency()
}

// track returns the samples of a turn, and C/N0 under a clear sky beside that under the
// planned weather.
func (w *work) track(t Turn) (track rateplan.Track, clear []float64) {
	flight := w.study.spec.Flight
	y := &flight.Sites[t.Site]
	_, to := y.Samples(t.Pass)
	n := to - t.From
	both := make([]float64, 2*n)
	w.levels(t.Site, t.From, to, both[:n], both[n:])
	return rateplan.Track{Start: flight.Start, Seconds: y.Seconds[t.From:to], CN0DBHz: both[:n]}, both[n:]
}

// gaps finds the longest time between two contacts in which anything closes under the
// planned weather.
func (w *work) gaps() error {
	last, gap := 0.0, 0.0
	for _, t := range w.study.turns {
		track, _ := w.track(t)
		if from, until, ok := closing(&track, w.study.need); ok {
			gap, last = max(gap, from-last), until
		}
	}
	w.out.LongestGapH = max(gap, w.study.spec.Flight.Days*86400-last) / 3600
	return nil
}

// closing returns the first and the last instant at which a track has a C/N0.
func closing(t *rateplan.Track, need float64) (from, to float64, ok bool) {
	for i, c := range t.CN0DBHz {
		if c >= need {
			if !ok {
				from, ok = t.Seconds[i], true
			}
			to = t.Seconds[i]
		}
	}
	return from, to, ok
}

// total makes means of the days.
func (w *work) total() {
	sum, week, worst := 0.0, 0.0, math.Inf(1)
	for i, b := range w.days {
		sum += b
		if week += b; i >= 7 {
			week -= w.days[i-7]
		}
		// A last day that is not whole does not make a week.
		if i >= 6 && float64(i+1) <= w.study.spec.Flight.Days {
			worst = min(worst, week)
		}
	}
	days := w.study.spec.Flight.Days
	if w.variant.thin > 1 {
		worst = math.NaN()
	}
	w.out.BytesPerDay = sum / days
	w.out.ClearBytesPerDay /= days
	w.out.WorstMonthBytesPerDay /= days
	w.out.WorstWeekBytesPerDay = worst / 7
}

// count adds the bytes of a plan: each stretch between two samples at its rate, by the
// share of the year in which the weather leaves the mode what it needs, as many times as
// the pass stands for.
func (w *work) count(t Turn, track *rateplan.Track, clear []float64, plan *rateplan.Plan, modes []rateplan.Mode, weight float64) {
	day := &w.days[min(int(track.Seconds[0]/86400), len(w.days)-1)]
	w.sent(t, track, clear, plan, modes, func(_ int, bytes, year, month float64) {
		bytes *= weight
		*day += bytes * (1 - year)
		w.out.ClearBytesPerDay += bytes
		w.out.WorstMonthBytesPerDay += bytes * (1 - month)
	})
}

// sent calls add for each stretch of a plan in which data are sent: the sample of the
// track at its end, the bytes, and the shares of the average year and of its worst month in which
// the weather takes them.
func (w *work) sent(t Turn, track *rateplan.Track, clear []float64, plan *rateplan.Plan, modes []rateplan.Mode, add func(i int, bytes, year, month float64)) {
	if len(plan.Steps) == 0 {
		return
	}
	st, f := &w.study.sites[t.Site], w.fronts[t.Site]
	relock := w.study.spec.Rates.Rules().Relock.Seconds()
	starts := stepStarts(track, plan)
	step, locked, running := -1, math.Inf(-1), false
	for i := 1; i < len(track.Seconds); i++ {
		a, b := track.Seconds[i-1], track.Seconds[i]
		for step+1 < len(starts) && a >= starts[step+1]-1e-6 {
			step++
			running = false
		}
		if step < 0 || step == len(starts)-1 || plan.Steps[step].Mode < 0 {
			running = false
			continue
		}
		mode := &modes[plan.Steps[step].Mode]
		slack := (clear[i-1]+clear[i])/2 - mode.NeedDBHz
		if !(slack >= 0) {
			running = false
			continue
		}
		if !running {
			running, locked = true, a+relock
		}
		seconds := b - max(a, locked)
		if !(seconds > 0) {
			continue
		}
		bytes := seconds * mode.NetRate.BitsPerSecond() / 8
		year, month := f.under(st.air, st.place[t.From+i], slack)
		add(i, bytes, year, month)
	}
}

// stepStarts returns when each step of a plan begins, in seconds of the track, and when
// the last one ends.
func stepStarts(t *rateplan.Track, p *rateplan.Plan) []float64 {
	out := make([]float64, len(p.Steps)+1)
	for i := range p.Steps {
		out[i] = p.Steps[i].From.Sub(t.Start).Seconds()
	}
	out[len(p.Steps)] = p.Steps[len(p.Steps)-1].To.Sub(t.Start).Seconds()
	return out
}

// contactOf makes the contact of a plan as a recorder takes it.
func contactOf(spec *Spec, t Turn, track *rateplan.Track, plan *rateplan.Plan) recorder.Contact {
	y := &spec.Flight.Sites[t.Site]
	c := recorder.Contact{Station: y.Site.Name, From: track.Seconds[0], To: track.Seconds[len(track.Seconds)-1]}
	for _, r := range plan.Receptions(*track) {
		c.Steps = append(c.Steps, recorder.Step{From: r.From, To: r.To, BytesPerSecond: plan.Steps[r.Step].NetRate.BitsPerSecond() / 8})
	}
	return c
}

func (w *work) latency() error {
	if w.contacts == nil {
		return nil
	}
	s, err := w.study.spec.Latency(w.contacts)
	w.out.LatencyH = s / 3600
	return err
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
	year, month := w.under(0)
	w.out.AvailabilityPercent, w.out.WorstMonthAvailabilityPercent = 100*(1-year), 100*(1-month)
	return nil
}

// under returns the share of contact time in which the margin over the required one is
// less than m dB.
func (w *work) under(m float64) (year, month float64) {
	total, need := 0.0, w.study.spec.Mode.NeedDBHz+m
	shift := w.variant.shift()
	for _, site := range w.study.spec.Sites {
		st, f := &w.study.sites[site], w.fronts[site]
		at := st.year
		for p := range at.Passes {
			from, to := at.Samples(p)
			for i := from + 1; i < to; i++ {
				if !w.usable(at, i-1) || !w.usable(at, i) {
					continue
				}
				dt := at.Seconds[i] - at.Seconds[i-1]
				total += dt
				if !f.usable {
					year, month = year+dt, month+dt
					continue
				}
				clear := (at.FluxDB[i-1]+st.place[i-1].at(f.clear)+at.FluxDB[i]+st.place[i].at(f.clear))/2 + shift
				y, m := f.under(st.air, st.place[i], clear-need)
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
		if year, _ := w.under(mid); year > 1-share {
			high = mid
		} else {
			low = mid
		}
	}
	return low
}
