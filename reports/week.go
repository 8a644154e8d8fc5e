package reports

import (
	"cmp"
	"maps"
	"math"
	"slices"
	"time"
)

// week is the summary of a window for a team: its sums by day, by week where it is longer
// than one, by spacecraft and by station, and the passes that bring most and least.
type week struct {
	from, to    time.Time
	passes      []weekPass // by AOS
	periods     []period   // the window, its weeks, its days; of each first all, then spacecraft, then stations
	days        []time.Time
	overlapping int // passes that bring bytes and overlap another such at their station
	best, worst []weekPass
}

// weekPass is a pass by the link that brings most of it.
type weekPass struct {
	*row
	links int
}

// Kinds of periods.
const (
	windowKind = "window"
	weekKind   = "week"
	dayKind    = "day"
)

// period is a sum over the passes that begin in a span of the window.
type period struct {
	kind                string
	from, to            time.Time // cut to the window
	whole               bool      // the window covers it
	spacecraft, station string    // empty: all
	passes, worth       int       // worth: brings bytes in its mode
	logged              int       // in the logbook
	contact, closes     time.Duration
	bytes               float64 // in the best mode of each pass; NaN: no pass has a data link
	planBytes           float64 // of the rate plans; NaN: there is none
	taken, predicted    float64 // bytes of the logged passes whose both figures are known; NaN: none
	ageFrom, ageTo      time.Duration
	aged                bool // there are element sets
}

// weekListed is how many best and worst passes the summary names.
const weekListed = 5

// summarise adds up the rows of the index.
func summarise(from, to time.Time, rows []row) *week {
	w := &week{from: from, to: to, passes: passesOf(rows)}
	for day := midnight(from); day.Before(to); day = day.Add(24 * time.Hour) {
		w.days = append(w.days, day)
	}
	w.add(windowKind, from, to)
	if to.Sub(from) > 7*24*time.Hour {
		for monday := mondayOf(from); monday.Before(to); monday = monday.Add(7 * 24 * time.Hour) {
			w.add(weekKind, monday, monday.Add(7*24*time.Hour))
		}
	}
	for _, day := range w.days {
		w.add(dayKind, day, day.Add(24*time.Hour))
	}
	w.overlapping = overlapping(w.passes)
	w.rank()
	return w
}

// mondayOf is the start of the week of ISO 8601 that t lies in, in UTC.
func mondayOf(t time.Time) time.Time {
	day := midnight(t)
	return day.AddDate(0, 0, -(int(day.Weekday())+6)%7)
}

// passesOf joins the rows of a pass with several links into the one that brings most.
func passesOf(rows []row) []weekPass {
	type key struct {
		spacecraft, station string
		aos                 time.Time
	}
	var out []weekPass
	at := map[key]int{}
	for i := range rows {
		r := &rows[i]
		k := key{r.spacecraft, r.station, r.aos}
		n, had := at[k]
		if !had {
			at[k] = len(out)
			out = append(out, weekPass{r, 1})
			continue
		}
		out[n].links++
		if r.modeBytes > out[n].modeBytes || finite(r.modeBytes) && !finite(out[n].modeBytes) {
			out[n].row = r
		}
	}
	slices.SortStableFunc(out, func(a, b weekPass) int { return a.aos.Compare(b.aos) })
	return out
}

// add adds a period: over all, for each spacecraft and for each station.
func (w *week) add(kind string, from, to time.Time) {
	p := period{kind: kind, from: from, to: to, whole: !from.Before(w.from) && !to.After(w.to)}
	if from.Before(w.from) {
		p.from = w.from
	}
	if to.After(w.to) {
		p.to = w.to
	}
	var inside []*row
	for i := range w.passes {
		if aos := w.passes[i].aos; !aos.Before(from) && aos.Before(to) || kind == windowKind {
			inside = append(inside, w.passes[i].row)
		}
	}
	sum := func(spacecraft, station string) {
		one := p
		one.spacecraft, one.station = spacecraft, station
		one.bytes, one.planBytes, one.taken, one.predicted = math.NaN(), math.NaN(), math.NaN(), math.NaN()
		for _, r := range inside {
			if (spacecraft == "" || r.spacecraft == spacecraft) && (station == "" || r.station == station) {
				one.count(r)
			}
		}
		w.periods = append(w.periods, one)
	}
	sum("", "")
	for _, name := range distinctOf(w.passes, func(r *row) string { return r.spacecraft }) {
		sum(name, "")
	}
	for _, name := range distinctOf(w.passes, func(r *row) string { return r.station }) {
		sum("", name)
	}
}

func distinctOf(passes []weekPass, of func(*row) string) []string {
	var list []string
	for i := range passes {
		list = append(list, of(passes[i].row))
	}
	slices.Sort(list)
	return slices.Compact(list)
}

func (p *period) count(r *row) {
	p.passes++
	p.contact += r.los.Sub(r.aos)
	if r.verdict.state <= neverCloses {
		p.closes += r.verdict.closed
	}
	if r.modeBytes > 0 {
		p.worth++
	}
	plus(&p.bytes, r.modeBytes)
	if r.plan != nil {
		plus(&p.planBytes, r.plan.Bytes)
	}
	if r.logged {
		p.logged++
	}
	if finite(r.takenBytes) && finite(r.predictedBytes) {
		plus(&p.taken, r.takenBytes)
		plus(&p.predicted, r.predictedBytes)
	}
	if r.inPlace {
		return
	}
	if !p.aged {
		p.ageFrom, p.ageTo, p.aged = r.age, r.age, true
	}
	p.ageFrom, p.ageTo = min(p.ageFrom, r.age), max(p.ageTo, r.age)
}

// plus adds what exists to a sum that exists from its first part on.
func plus(sum *float64, v float64) {
	switch {
	case !finite(v):
	case !finite(*sum):
		*sum = v
	default:
		*sum += v
	}
}

// overlapping counts the passes that bring bytes while another such pass is over the same
// station.
func overlapping(passes []weekPass) int {
	last := map[string]int{} // the pass of a station that ends last so far
	touched := make([]bool, len(passes))
	for i := range passes {
		p := &passes[i]
		if !(p.modeBytes > 0) {
			continue
		}
		if k, had := last[p.station]; had && p.aos.Before(passes[k].los) {
			touched[i], touched[k] = true, true
			if p.los.Before(passes[k].los) {
				continue
			}
		}
		last[p.station] = i
	}
	n := 0
	for _, t := range touched {
		if t {
			n++
		}
	}
	return n
}

// rank names the passes that bring most and least of those with a data link: of several
// spacecraft some of each, so that the fastest does not hide the others.
func (w *week) rank() {
	able := map[string][]weekPass{}
	for _, p := range w.passes {
		if finite(p.modeBytes) {
			able[p.spacecraft] = append(able[p.spacecraft], p)
		}
	}
	each := max(1, weekListed/max(1, len(able)))
	for _, name := range slices.Sorted(maps.Keys(able)) {
		list := able[name]
		slices.SortStableFunc(list, func(a, b weekPass) int {
			return cmp.Or(-cmp.Compare(a.modeBytes, b.modeBytes), -cmp.Compare(a.greatest, b.greatest))
		})
		best := slices.DeleteFunc(slices.Clone(list[:min(each, len(list))]), func(p weekPass) bool { return p.modeBytes <= 0 })
		rest := list[len(best):]
		worst := slices.Clone(rest[max(0, len(rest)-each):])
		slices.Reverse(worst)
		w.best, w.worst = append(w.best, best...), append(w.worst, worst...)
	}
}

// of returns the periods of a kind over all spacecraft and stations.
func (w *week) of(kind string) []period {
	var out []period
	for _, p := range w.periods {
		if p.kind == kind && p.spacecraft == "" && p.station == "" {
			out = append(out, p)
		}
	}
	return out
}
