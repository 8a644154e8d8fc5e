package rateplan

// Reception is a span in which what is sent gets through, at one rate.
type Reception struct {
	From, To float64 // seconds of the track
	Step     int     // of the plan
	Bytes    float64
}

// Receptions returns the spans of a track in which a plan of it brings something down,
// in order: its steps without the time to lock and without the time in which the mode
// does not close. Together they hold the plan's bytes.
func (p *Plan) Receptions(t Track) []Reception {
	var out []Reception
	step, until := 0, -1 // the sample at which the last span ends
	for i := 1; i < len(t.Seconds) && step < len(p.Steps); i++ {
		for step < len(p.Steps)-1 && !t.at(t.Seconds[i-1]).Before(p.Steps[step+1].From) {
			step++
		}
		bytes := p.SoFar[i] - p.SoFar[i-1]
		rate := p.Steps[step].NetRate.BitsPerSecond() / 8
		if !(bytes > rate*1e-9) { // a nanosecond is rounding
			continue
		}
		if n := len(out); n > 0 && out[n-1].Step == step && until == i-1 {
			out[n-1].To, out[n-1].Bytes = t.Seconds[i], out[n-1].Bytes+bytes
		} else {
			out = append(out, Reception{From: max(t.Seconds[i-1], t.Seconds[i]-bytes/rate), To: t.Seconds[i], Step: step, Bytes: bytes})
		}
		until = i
	}
	return out
}
