package solve

import "slantwise/downlink/contacts"

// limits: each span of a limit has a row for each of what it limits. Any time of a length
// is held at such times side by side, and at those between.
func (b *builder) limits() {
	p := b.d.m.p
	for k := range p.Limits {
		l := &p.Limits[k]
		spans := l.Spans
		if len(spans) == 0 {
			spans = []contacts.Span{whole}
		}
		if l.Rolling > 0 {
			spans = nil
			half := max(1, l.Rolling/2)
			for t := ms(0); t < p.Length && len(spans) < 20000; t += half {
				spans = append(spans, contacts.Span{From: t, To: t + l.Rolling})
			}
		}
		var named []int
		for i := range p.Candidates {
			if l.Names(p, i) {
				named = append(named, i)
			}
		}
		for _, s := range spans {
			b.limit(l, s, named)
		}
	}
}

func (b *builder) limit(l *contacts.Limit, s contacts.Span, named []int) {
	p := b.d.m.p
	var in []int
	for _, i := range named {
		if p.Candidates[i].Window.Overlap(s) > 0 {
			in = append(in, i)
		}
	}
	if len(in) == 0 {
		return
	}
	if l.Contacts != nil && *l.Contacts < len(in) || l.Contacts != nil && b.d.m.split {
		r := b.row(float64(*l.Contacts), 1)
		for _, i := range in {
			b.once[i] = append(b.once[i], timeRow{s, r, 1})
		}
	}
	if l.Time != nil {
		r := b.row(float64(*l.Time), usual(p, in))
		for _, i := range in {
			b.use[i] = append(b.use[i], timeRow{s, r, 1})
		}
	}
	if l.Price != nil {
		dear := 0.0
		for _, i := range in {
			a := &p.Antennas[p.Candidates[i].Antenna]
			dear = max(dear, a.PerContact+a.PerMinute*p.Candidates[i].LongestContact().Seconds()/60)
		}
		r := b.row(*l.Price, max(dear, 1e-9))
		for _, i := range in {
			a := &p.Antennas[p.Candidates[i].Antenna]
			b.once[i] = append(b.once[i], timeRow{s, r, a.PerContact})
			// Money counts where the contact begins: its minutes are held against the span only
			// where all of the window begins there.
			if a.PerMinute > 0 && s.Holds(p.Candidates[i].Window) {
				b.use[i] = append(b.use[i], timeRow{whole, r, a.PerMinute / 60000})
			}
		}
	}
}

// usual returns the mean length of the longest contacts.
func usual(p *contacts.Problem, list []int) float64 {
	sum := 0.0
	for _, i := range list {
		sum += float64(p.Candidates[i].LongestContact())
	}
	return max(1, sum/float64(len(list)))
}
