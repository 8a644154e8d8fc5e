package sizing

import (
	"math"

	"slantwise/downlink/rateplan"
	"slantwise/downlink/recorder"
)

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
