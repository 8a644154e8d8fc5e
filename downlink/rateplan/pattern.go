package rateplan

import "math"

// Pattern appends to b, a bit each, which samples of a track close in which mode, with no guard
// in time and with that of the rules. A plan hangs on nothing else: two tracks of the same
// instants with the same pattern have the same steps and bytes. It fails as Plan does.
func (p *Planner) Pattern(t *Track, b []byte) ([]byte, error) {
	if err := p.checkTrack(t); err != nil {
		return nil, err
	}
	n := len(t.Seconds)
	p.size(n)
	guards := [...]float64{p.singleGuard(), p.rules.GuardTime.Seconds()}
	for i, guard := range guards {
		if i > 0 && guard == guards[0] {
			break
		}
		p.guardTrack(t, guard)
		for m := range p.modes {
			need := p.modes[m].NeedDBHz + float64(p.rules.Guard)
			bits := byte(0)
			for j, c := range p.guarded {
				bits <<= 1
				if c >= need {
					bits |= 1
				}
				if j&7 == 7 {
					b = append(b, bits)
					bits = 0
				}
			}
			b = append(b, bits)
		}
	}
	return b, nil
}

// WithoutBounds returns a planner whose plans leave out FreeBytes and ShannonBytes, which are
// NaN, for whoever makes thousands.
func (p *Planner) WithoutBounds() *Planner {
	return &Planner{modes: p.modes, rules: p.rules, bare: true}
}

// bounds returns the bounds of a plan, in bytes.
func (p *Planner) bounds(t *Track) (free, limit float64) {
	if p.bare {
		return math.NaN(), math.NaN()
	}
	return p.free(t) / 8, shannon(t, p.rules.Band.Hertz()) / 8
}
