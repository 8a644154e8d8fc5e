package downlink

// Permit keeps the volume of the profile to the spans in which the link may be used, as
// by a licence: the achievable rate and the chosen mode count within them alone. Spans
// are in order and apart from one another; none permits nothing. Margins and rates of
// the samples stay what they are. Called again, as for what a mount can follow, it keeps
// to what both permit.
func (p *Profile) Permit(spans []Interval) {
	permitted := make([]span, len(spans))
	for i, s := range spans {
		permitted[i] = span{s.From.Sub(p.Start).Seconds(), s.To.Sub(p.Start).Seconds()}
	}
	if p.limited {
		permitted = inBoth(p.permitted, permitted)
	}
	p.limited, p.permitted = true, permitted
	p.Volume = p.volume()
}

// inBoth returns what two lists share, each in order and apart.
func inBoth(a, b []span) []span {
	out := []span{}
	for len(a) > 0 && len(b) > 0 {
		if from, to := max(a[0].from, b[0].from), min(a[0].to, b[0].to); to > from {
			out = append(out, span{from, to})
		}
		if a[0].to < b[0].to {
			a = a[1:]
		} else {
			b = b[1:]
		}
	}
	return out
}

// Permits tells whether the link may be used some seconds after the start.
func (p *Profile) Permits(seconds float64) bool {
	for _, s := range p.permitted {
		if seconds >= s.from && seconds <= s.to {
			return true
		}
	}
	return !p.limited
}

// span is seconds after the start of a profile.
type span struct{ from, to float64 }

// achieved integrates a rate that goes straight from one instant to another, in bits,
// over what is permitted of the time.
func (p *Profile) achieved(a, b, before, after float64) float64 {
	if !p.limited {
		return (b - a) * (before + after) / 2
	}
	bits := 0.0
	for _, s := range p.permitted {
		from, to := max(a, s.from), min(b, s.to)
		if to > from {
			middle := ((from+to)/2 - a) / (b - a)
			bits += (to - from) * (before + (after-before)*middle)
		}
	}
	return bits
}

// addClosed adds what is permitted of a time in which the chosen mode closes, and
// returns its seconds.
func (p *Profile) addClosed(v *Volume, from, to float64) (seconds float64) {
	if !p.limited {
		v.Closes = append(v.Closes, Interval{p.at(from), p.at(to)})
		return to - from
	}
	for _, s := range p.permitted {
		a, b := max(from, s.from), min(to, s.to)
		if b > a {
			v.Closes = append(v.Closes, Interval{p.at(a), p.at(b)})
			seconds += b - a
		}
	}
	return seconds
}
