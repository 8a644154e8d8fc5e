package sizing

import (
	"math"
	"slices"

	"slantwise/downlink/rateplan"
	"slantwise/downlink/recorder"
)

// bytes plans every pass and counts what comes down.
func (w *work) bytes() error {
	s := w.study
	w.days = make([]float64, int(math.Ceil(s.spec.Flight.Days)))
	turns, weight := s.sampled(w.variant.thin)
	if err := w.settle(turns); err != nil {
		return err
	}
	w.out.ClearBytesPerDay, w.out.WorstMonthBytesPerDay = 0, 0
	w.out.MountLostBytesPerDay, w.out.NotFollowedSPerDay = 0, 0
	for _, t := range turns {
		track := w.track(t)
		plan, err := s.schedule(track.turn, &track.Track)
		if err != nil {
			return err
		}
		many := weight[t.Site]
		mean := w.count(t.Site, &track, &plan, many)
		if s.asksLatency() {
			w.contacts = append(w.contacts, contactOf(s.spec.Flight.Sites[t.Site].Site.Name, &track.Track, &plan))
		}
		if err := w.miss(t, &track, mean, many); err != nil {
			return err
		}
	}
	w.total()
	return w.latency()
}

// settle chooses what holds for all passes together, where there is such a thing.
func (w *work) settle(turns []Turn) error {
	if !w.study.spec.Settles {
		return nil
	}
	all := make([]rateplan.Track, len(turns))
	for k, t := range turns {
		all[k] = w.track(t).Track
		all[k].CN0DBHz = slices.Clone(all[k].CN0DBHz)
	}
	return w.study.spec.Rates.Settle(all)
}

// miss counts what the mount takes of a turn of which so many bytes come down with it.
func (w *work) miss(t Turn, track *passTrack, mean, weight float64) error {
	whole := track.whole
	if whole == nil {
		return nil
	}
	s := w.study
	plan, err := s.schedule(t.number, &whole.Track)
	if err != nil {
		return err
	}
	all := 0.0
	w.sent(t.Site, whole, &plan, func(_ int, bytes, year, _ float64) { all += bytes * (1 - year) })
	w.out.MountLostBytesPerDay += weight * all
	w.out.MountLostBytesPerDay -= mean
	w.out.NotFollowedSPerDay += weight * lostOf(w.outages[t.Site].of(t.Pass), whole.Seconds[0], whole.Seconds[len(whole.Seconds)-1])
	return nil
}

// gaps finds the longest time between two contacts in which anything closes under the
// planned weather.
func (w *work) gaps() error {
	last, gap := 0.0, 0.0
	for _, t := range w.study.turns {
		track := w.track(t)
		if from, until, ok := closing(&track.Track, w.study.need); ok {
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
	if !w.months {
		w.out.WorstMonthBytesPerDay = math.NaN()
	}
	w.out.MountLostBytesPerDay /= days
	w.out.NotFollowedSPerDay /= days
	w.out.WorstWeekBytesPerDay = worst / 7
}

// count adds the bytes of a plan: each stretch between two samples at its rate, by the
// share of the year in which the weather leaves the mode what it needs, as many times as
// the pass stands for. It returns the mean bytes that it has added.
func (w *work) count(site int, track *passTrack, plan *schedule, weight float64) float64 {
	mean := 0.0
	w.sent(site, track, plan, func(_ int, bytes, year, month float64) {
		bytes *= weight
		mean += bytes * (1 - year)
		w.out.ClearBytesPerDay += bytes
		w.out.WorstMonthBytesPerDay += bytes * (1 - month)
	})
	w.days[min(int(track.Seconds[0]/86400), len(w.days)-1)] += mean
	return mean
}

// sent calls add for each stretch of a plan in which data are sent: the sample of the
// track at its end, the bytes, and the shares of the average year and of its worst month in which
// the weather takes them.
func (w *work) sent(site int, track *passTrack, plan *schedule, add func(i int, bytes, year, month float64)) {
	if len(plan.steps) == 0 {
		return
	}
	st, f, clear := &w.study.sites[site], w.fronts[site], track.clear
	relock := w.study.spec.Rates.Rules().Relock.Seconds()
	end := plan.steps[len(plan.steps)-1].to
	step, locked, running := -1, math.Inf(-1), false
	for i := 1; i < len(track.Seconds); i++ {
		a, b := track.Seconds[i-1], track.Seconds[i]
		for step+1 < len(plan.steps) && a >= plan.steps[step+1].from-1e-6 {
			step++
			running = false
		}
		if step < 0 || a >= end-1e-6 || plan.steps[step].mode < 0 {
			running = false
			continue
		}
		mode := &plan.steps[step]
		slack := (clear[i-1]+clear[i])/2 - mode.need
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
		bytes := seconds * mode.rate / 8
		year, month := f.under(st.air, track.at[i], slack, w.months)
		add(i, bytes, year, month)
	}
}

// contactOf makes the contact of a plan as a recorder takes it.
func contactOf(station string, track *rateplan.Track, plan *schedule) recorder.Contact {
	return recorder.Contact{Station: station, From: track.Seconds[0], To: track.Seconds[len(track.Seconds)-1], Steps: slices.Clone(plan.received)}
}

func (w *work) latency() error {
	if w.contacts == nil {
		return nil
	}
	s, err := w.study.spec.Latency(w.contacts)
	w.out.LatencyH = s / 3600
	return err
}
