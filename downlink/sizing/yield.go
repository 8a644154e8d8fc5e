package sizing

import (
	"maps"
	"math"
	"slices"
)

// Yield is what sites bring cell by cell of a year, as a ranking of sets needs it. It is
// immutable.
type Yield struct {
	Days  float64
	cell  float64      // s
	sites [][]cellGain // by site, in the order of the cells
}

// cellGain is what one site brings in one cell.
type cellGain struct {
	cell  int32
	bytes float32 // expected
	seen  float32 // share of the cell in which the spacecraft is in contact
	up    float32 // of that, by the probability over the year that the mode's margin is there
}

// Yield works out what each of the flight's sites brings alone, in a variant: every pass planned
// as a whole, its bytes by the share of the year in which they arrive, in cells of the
// flight's step.
func (s *Study) Yield(v Variant) (*Yield, error) {
	f := s.spec.Flight
	y := &Yield{Days: f.Days, cell: f.Step.Seconds(), sites: make([][]cellGain, len(f.Sites))}
	w := work{study: s, variant: v}
	if err := w.prepare(); err != nil {
		return nil, err
	}
	for _, i := range s.spec.Sites {
		var err error
		if y.sites[i], err = w.yield(i, y.cell); err != nil {
			return nil, err
		}
	}
	return y, nil
}

// yield plans the passes of a site one by one.
func (w *work) yield(site int, cell float64) ([]cellGain, error) {
	s := w.study
	year := &s.spec.Flight.Sites[site]
	var out []cellGain
	for p := range year.Passes {
		from, to := year.Samples(p)
		if to-from < 2 {
			continue
		}
		t := Turn{Site: site, Pass: p, From: from}
		track := w.track(t)
		plan, err := s.schedule(0, &track.Track)
		if err != nil {
			return nil, err
		}
		bytes := make([]float64, len(track.Seconds))
		w.sent(site, &track, &plan, func(i int, b, taken, _ float64) { bytes[i] += b * (1 - taken) })
		out = w.cells(out, site, &track, bytes, cell)
	}
	return out, nil
}

// cells spreads a pass over the cells that it touches.
func (w *work) cells(out []cellGain, site int, track *passTrack, bytes []float64, cell float64) []cellGain {
	st, f, clear := &w.study.sites[site], w.fronts[site], track.clear
	first := len(out)
	for i := 1; i < len(clear); i++ {
		a, b := track.Seconds[i-1], track.Seconds[i]
		up := 0.0
		if c := (clear[i-1] + clear[i]) / 2; !math.IsNaN(c) {
			taken, _ := f.under(st.air, track.at[i], c-w.study.spec.Mode.NeedDBHz, false)
			up = 1 - taken
		}
		for k := int32(a / cell); float64(k)*cell < b; k++ {
			share := (min(b, float64(k+1)*cell) - max(a, float64(k)*cell)) / (b - a)
			if share <= 0 {
				continue
			}
			n := len(out)
			if n == first || out[n-1].cell != k {
				out = append(out, cellGain{cell: k})
				n++
			}
			out[n-1].bytes += float32(share * bytes[i])
			out[n-1].seen += float32(share * (b - a) / cell)
			out[n-1].up += float32(share * (b - a) / cell * up)
		}
	}
	return out
}

// Bytes returns the bytes a day of a set of sites: at each instant those of the site that
// brings most, handed over without loss. Weather that sites share changes nothing in it: each
// instant has its one station, and means add up.
func (y *Yield) Bytes(sites []int) float64 {
	s := newRanking(y)
	for _, i := range sites {
		s.take(i)
	}
	return s.sum / y.Days
}

// Available returns the share of the time with any of the sites in view in which the
// mode's margin is there at one of them at least: if their weather is one (the best of the sites counts),
// and if it is independent (all must fail together). Real weather lies between where it is not
// opposed. NaN without contact.
func (y *Yield) Available(sites []int) (oneWeather, independent float64) {
	type joint struct{ seen, best, fails float64 }
	cells := map[int32]joint{}
	for _, i := range sites {
		for _, c := range y.sites[i] {
			j, ok := cells[c.cell]
			if !ok {
				j.fails = 1
			}
			j.seen, j.best = max(j.seen, float64(c.seen)), max(j.best, float64(c.up))
			j.fails *= 1 - min(1, float64(c.up))
			cells[c.cell] = j
		}
	}
	seen := 0.0
	for _, k := range slices.Sorted(maps.Keys(cells)) { // in order: sums must not hang on the map
		j := cells[k]
		seen += j.seen
		oneWeather += j.best
		independent += min(j.seen, 1-j.fails)
	}
	if seen == 0 {
		return math.NaN(), math.NaN()
	}
	return oneWeather / seen, independent / seen
}
