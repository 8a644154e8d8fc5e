package sizing

import (
	"math"

	"slantwise/downlink/rateplan"
	"slantwise/station/mount"
)

// passTrack is C/N0 over a turn.
type passTrack struct {
	rateplan.Track           // under the planned weather
	clear          []float64 // under a clear sky
	at             []place   // of each sample
	turn           int       // the number of the turn whose instants these are; 0: they are its own
	whole          *passTrack
}

// track returns the samples of a turn. What the mount does not follow is not usable in
// it; whole is then the turn as if it did. The track lasts until the next one is asked for.
func (w *work) track(t Turn) passTrack {
	flight := w.study.spec.Flight
	y := &flight.Sites[t.Site]
	_, to := y.Samples(t.Pass)
	n := to - t.From
	if len(w.levelsOf) < 2*n {
		w.levelsOf = make([]float64, 2*n)
	}
	both := w.levelsOf[:2*n]
	w.levels(t.Site, t.From, to, both[:n], both[n:])
	out := passTrack{Track: rateplan.Track{Start: flight.Start, Seconds: y.Seconds[t.From:to], CN0DBHz: both[:n]}, clear: both[n:], turn: t.number, at: w.study.sites[t.Site].place[t.From:to]}
	lost := w.outages[t.Site].of(t.Pass)
	if len(lost) == 0 {
		return out
	}
	cut := out.without(lost)
	cut.whole = &out
	return cut
}

// cutWidth is how far from the edge of what is lost, in s, a sample says so.
const cutWidth = 1e-3

// without returns the track with some spans of it not usable: samples at their edges are
// put in, straight between those around, so that no more and no less than the spans is
// lost.
func (p *passTrack) without(lost []mount.Span) passTrack {
	out := passTrack{Track: rateplan.Track{Start: p.Start}}
	last := math.Inf(-1)
	add := func(s, planned, clear float64, at place) {
		if s > last {
			out.Seconds, out.CN0DBHz = append(out.Seconds, s), append(out.CN0DBHz, planned)
			out.clear, out.at = append(out.clear, clear), append(out.at, at)
			last = s
		}
	}
	edge := func(s float64, usable bool, i int) { // between samples i-1 and i
		if i == 0 || i == len(p.Seconds) {
			return
		}
		planned, clear := math.NaN(), math.NaN()
		if usable {
			w := (s - p.Seconds[i-1]) / (p.Seconds[i] - p.Seconds[i-1])
			planned, clear = p.CN0DBHz[i-1]+w*(p.CN0DBHz[i]-p.CN0DBHz[i-1]), p.clear[i-1]+w*(p.clear[i]-p.clear[i-1])
		}
		add(s, planned, clear, p.at[i])
	}
	i := 0
	for _, l := range lost {
		if l.Seconds() <= 4*cutWidth {
			continue
		}
		for ; i < len(p.Seconds) && p.Seconds[i] < l.From-cutWidth; i++ {
			add(p.Seconds[i], p.CN0DBHz[i], p.clear[i], p.at[i])
		}
		edge(l.From, true, i)
		edge(l.From+cutWidth, false, i)
		for ; i < len(p.Seconds) && p.Seconds[i] <= l.To+cutWidth; i++ {
			if p.Seconds[i] > l.From+cutWidth && p.Seconds[i] < l.To-cutWidth {
				add(p.Seconds[i], math.NaN(), math.NaN(), p.at[i])
			}
		}
		edge(l.To-cutWidth, false, i)
		edge(l.To, true, i)
	}
	for ; i < len(p.Seconds); i++ {
		add(p.Seconds[i], p.CN0DBHz[i], p.clear[i], p.at[i])
	}
	if len(out.Seconds) >= 2 {
		return out
	}
	gone := make([]float64, len(p.Seconds)) // all of it
	for i := range gone {
		gone[i] = math.NaN()
	}
	return passTrack{Track: rateplan.Track{Start: p.Start, Seconds: p.Seconds, CN0DBHz: gone}, clear: gone, at: p.at}
}

// lostOf returns the seconds of a stretch that are in some spans.
func lostOf(lost []mount.Span, from, to float64) float64 {
	sum := 0.0
	for _, l := range lost {
		sum += max(0, min(to, l.To)-max(from, l.From))
	}
	return sum
}
